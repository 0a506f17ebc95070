using Uncertain.Inference.Compilation;
using Uncertain.Numerics;
using Uncertain.Worlds;

namespace Uncertain.Inference.Posteriors;

/// <summary>
/// The chances of all outcomes of the variables of one part of the evidence, given it: one backward pass over its compiled form.
/// </summary>
/// <remarks>
/// From the derivatives D (A. Darwiche, "A differential approach to inference in Bayesian networks", Journal of the ACM 50, 2003) follow
/// P(e | outcome) = P(e | none) + D and P(e | none) = P(e) - sum of chance times D. The differences are taken with 31 digits. Where they
/// leave too few, because the evidence all but rules an outcome out, P(e | outcome) is computed by a pass of its own, which subtracts
/// nothing.
/// </remarks>
internal sealed class PosteriorPass
{
    // A million roundings of extended numbers leave 25 digits; what is left of a difference above this part keeps 1e-13.
    private const double LeastPart = 1e-12;

    private readonly PartValues _part;
    private readonly Dictionary<int, Difference<ExtendedDouble>> _derivatives = [];

    private PosteriorPass(PartValues part)
    {
        _part = part;
        FormDerivatives<ExtendedDouble> derivatives = part.Form.Derive(new ChanceSetting(part.Chances));
        for (int i = 0; i < derivatives.Slots.Length; i++)
        {
            Difference<ExtendedDouble> derivative = derivatives.OfSlot[i];
            _derivatives[derivatives.Slots[i]] = new(derivative.Rise / part.Chance, derivative.Fall / part.Chance);
        }
    }

    /// <summary>Adds both tails of each outcome, by slot.</summary>
    public static void Run(PartValues part, Dictionary<int, Tails<ExtendedDouble>> tailsOf, CancellationToken cancellationToken)
    {
        var pass = new PosteriorPass(part);
        foreach (int variable in part.Part.Variables)
        {
            cancellationToken.ThrowIfCancellationRequested();
            pass.Variable(variable, tailsOf);
        }
    }

    private void Variable(int variable, Dictionary<int, Tails<ExtendedDouble>> tailsOf)
    {
        VariableTable table = _part.Chances;
        int first = table.FirstSlot(variable);
        int none = table.OutcomeCount(variable);
        var weights = new ExtendedDouble[none + 1];

        // P(e | none) / P(e) as a difference; D of an outcome that the form does not tell apart is 0.
        var ofNone = new Difference<ExtendedDouble>(ExtendedDouble.MultiplicativeIdentity, default);
        for (int outcome = 0; outcome < none; outcome++)
        {
            ofNone += Derivative(first + outcome).NegateIf(true) * ExtendedDouble.From(table.Chance(first + outcome));
        }

        ExtendedDouble[] chances = OutcomeChances.Of(table, variable);
        double leastPart = LeastPartOf(chances);
        for (int outcome = 0; outcome <= none; outcome++)
        {
            if (!chances[outcome].IsZero)
            {
                Difference<ExtendedDouble> factor = outcome == none ? ofNone : ofNone + Derivative(first + outcome);
                weights[outcome] = chances[outcome] * Factor(factor, leastPart, variable, outcome);
            }
        }

        for (int outcome = 0; outcome < none; outcome++)
        {
            ExtendedDouble others = default;
            for (int other = 0; other <= none; other++)
            {
                others += other == outcome ? default : weights[other];
            }

            tailsOf[first + outcome] = ConditionalProbability.Shares(weights[outcome], others)!.Value;
        }
    }

    // The chances of alternatives may make up 1 up to rounding only, and then so does what the differences rest on.
    private static double LeastPartOf(ExtendedDouble[] chances)
    {
        ExtendedDouble sum = default;
        foreach (ExtendedDouble chance in chances)
        {
            sum += chance;
        }

        return Math.Max(LeastPart, 1e13 * Math.Abs(ExtendedDouble.Subtract(sum, ExtendedDouble.MultiplicativeIdentity)));
    }

    private Difference<ExtendedDouble> Derivative(int slot) => _derivatives.GetValueOrDefault(slot);

    /// <summary>P(e | outcome) / P(e).</summary>
    private ExtendedDouble Factor(Difference<ExtendedDouble> factor, double leastPart, int variable, int outcome)
    {
        double difference = ExtendedDouble.Subtract(factor.Rise, factor.Fall);
        if (difference >= leastPart * factor.Rise.ToDouble())
        {
            return ExtendedDouble.From(difference);
        }

        int first = _part.Chances.FirstSlot(variable);
        var changes = new Dictionary<int, double>();
        for (int other = 0; other < _part.Chances.OutcomeCount(variable); other++)
        {
            changes[first + other] = other == outcome ? 1 : 0;
        }

        Probability exact = _part.Form.Evaluate(
            new ChanceSetting(_part.Chances, changes), CompilationEvaluator.EvaluatorName, () => default);
        return exact.Tails.True / _part.Chance;
    }
}
