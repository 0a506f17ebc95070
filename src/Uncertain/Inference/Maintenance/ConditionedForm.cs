using Uncertain.Inference.Posteriors;
using Uncertain.Numerics;

namespace Uncertain.Inference.Maintenance;

/// <summary>
/// An answer's compiled form; where it depends on evidence over several variables, those of the answer with the evidence and of the
/// evidence without the answer.
/// </summary>
internal sealed record ConditionedForm(MaintainedForm With, MaintainedForm? Without)
{
    public Probability Probability
    {
        get
        {
            if (Without is null)
            {
                return With.Probability;
            }

            Probability with = With.Probability;
            return ConditionalProbability.Of(with, Without.Probability, Accuracy.Exact)
                ?? throw new EvaluationRefusedException(
                    "The evidence became impossible with these chances. Set other chances, or undo what was found.");
        }
    }

    public void Update(IReadOnlyCollection<int> variables)
    {
        With.Update(variables);
        Without?.Update(variables);
    }
}
