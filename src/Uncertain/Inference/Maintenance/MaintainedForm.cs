using Uncertain.Inference.Compilation;
using Uncertain.Numerics;
using Uncertain.Worlds;

namespace Uncertain.Inference.Maintenance;

/// <summary>A compiled lineage under chances that change: a small one is evaluated anew, a large one along what changed.</summary>
internal sealed class MaintainedForm
{
    // So many nodes are evaluated as quickly as a path through them is found.
    private const int SmallNodes = 64;

    private readonly CompiledForm _form;
    private readonly VariableTable _chances;
    private readonly PathForm? _paths;

    public MaintainedForm(CompiledForm form, VariableTable chances)
    {
        _form = form;
        _chances = chances;
        _paths = form.NodeCount > SmallNodes ? new PathForm(form, chances) : null;
    }

    public IEnumerable<int> Variables
    {
        get
        {
            var variables = new SortedSet<int>(_form.Distributions.Select(distribution => distribution.Variable));
            for (int position = 0; position < _form.Words.Length; position = _form.Next(position))
            {
                if ((FormNodeKind)(_form.Words[position] & 3) == FormNodeKind.Literal)
                {
                    variables.Add(_chances.VariableOf(_form.Words[position + 1]));
                }
            }

            return variables;
        }
    }

    public Probability Probability => _paths is not null
        ? Probability.Exact(_paths.Tails, CompilationEvaluator.EvaluatorName, new Cost(default, _form.NodeCount, 0))
        : _form.Evaluate(
            new ChanceSetting(_chances), CompilationEvaluator.EvaluatorName, () => new Cost(default, _form.NodeCount, 0));

    /// <summary>Takes over the present chances of some variables.</summary>
    public void Update(IEnumerable<int> variables) => _paths?.Update(variables);
}
