using Uncertain.Numerics;

namespace Uncertain.Inference.Compilation;

/// <summary>
/// A decomposable, deterministic form of a lineage in one flat array, see <see cref="FormBuilder"/>: conjunctions are of
/// independent parts, the branches of a decision exclude each other. Immutable.
/// </summary>
internal sealed class CompiledForm
{
    /// <summary>Roundings along which a double keeps the promised 1e-12 with a margin: 4096 * 2^-53 = 4.5e-13.</summary>
    private const double SafeRoundings = 4096;

    /// <summary>What one rounding may change, relatively.</summary>
    private const double Rounding = 1.0 / (1L << 53);

    private readonly double _roundings;

    public CompiledForm(int[] words, int nodeCount, FormDistribution[] distributions, int root)
    {
        Words = words;
        NodeCount = nodeCount;
        Distributions = distributions;
        Root = root;
        _roundings = Roundings();
    }

    public int NodeCount { get; }

    public int[] Words { get; }

    public FormDistribution[] Distributions { get; }

    /// <summary>The edge to the whole formula.</summary>
    public int Root { get; }

    /// <summary>Where the node behind the one at a position begins.</summary>
    public int Next(int position) =>
        position + 1 + (Words[position] >> 2) + ((FormNodeKind)(Words[position] & 3) == FormNodeKind.Choice ? 1 : 0);

    /// <summary>Where each node begins; the constant has no place.</summary>
    public int[] Positions()
    {
        int[] positions = new int[NodeCount];
        int position = 0;
        for (int node = 1; node < NodeCount; node++)
        {
            positions[node] = position;
            position = Next(position);
        }

        return positions;
    }

    public long Bytes => (long)Words.Length * sizeof(int);

    /// <summary>Both tails under a setting of the chances; 1e-12 relative in each, at any size and range.</summary>
    /// <exception cref="EvaluationRefusedException">A number is below the range of extended numbers.</exception>
    public Probability Evaluate(ChanceSetting setting, string evaluator, Func<Cost> cost)
    {
        if (_roundings <= SafeRoundings
            && ForwardPass<double, DoubleChances>.TryEvaluate(this, new DoubleChances(setting), out Tails<double> tails))
        {
            return Probability.Exact(tails, evaluator, cost());
        }

        try
        {
            ForwardPass<ExtendedDouble, ExtendedChances>.TryEvaluate(
                this, new ExtendedChances(setting), out Tails<ExtendedDouble> extended);
            return Probability.Exact(extended, evaluator, cost());
        }
        catch (OverflowException exception)
        {
            throw BelowRange(exception);
        }
    }

    /// <summary>The same under many settings, eight or four of them side by side.</summary>
    /// <exception cref="EvaluationRefusedException">A number is below the range of extended numbers.</exception>
    public Probability[] Evaluate(IReadOnlyList<ChanceSetting> settings, string evaluator, Func<Cost> cost)
    {
        var results = new Probability[settings.Count];
        for (int first = 0; first < results.Length; first += EightDoubles.Count)
        {
            Span<Probability> group = results.AsSpan(first, Math.Min(EightDoubles.Count, results.Length - first));
            var eight = new EightChances(new SettingGroup(settings, first, EightDoubles.Count));
            if (_roundings > SafeRoundings
                || !ForwardPass<EightDoubles, EightChances>.TryEvaluate(this, eight, out Tails<EightDoubles> tails))
            {
                EvaluateExtended(settings, first, group, evaluator, cost);
                continue;
            }

            for (int lane = 0; lane < group.Length; lane++)
            {
                group[lane] = Probability.Exact(new Tails<double>(tails.True[lane], tails.False[lane]), evaluator, cost());
            }
        }

        return results;
    }

    private void EvaluateExtended(
        IReadOnlyList<ChanceSetting> settings, int first, Span<Probability> results, string evaluator, Func<Cost> cost)
    {
        try
        {
            for (int done = 0; done < results.Length; done += FourExtended.Count)
            {
                var four = new FourExtendedChances(new SettingGroup(settings, first + done, FourExtended.Count));
                ForwardPass<FourExtended, FourExtendedChances>.TryEvaluate(this, four, out Tails<FourExtended> tails);
                for (int lane = 0; lane < FourExtended.Count && done + lane < results.Length; lane++)
                {
                    results[done + lane] = Probability.Exact(
                        new Tails<ExtendedDouble>(tails.True.Lane(lane), tails.False.Lane(lane)), evaluator, cost());
                }
            }
        }
        catch (OverflowException exception)
        {
            throw BelowRange(exception);
        }
    }

    /// <summary>
    /// The derivatives in doubles, both parts of each difference within a relative <paramref name="error"/>; null if doubles do
    /// not do for any.
    /// </summary>
    public FormDerivatives<double>? TryDerive(ChanceSetting setting, out double error)
    {
        error = _roundings > SafeRoundings ? 1 : (_roundings + BackwardRoundings()) * Rounding;
        return error > 2 * SafeRoundings * Rounding
            ? null
            : BackwardPass<double, DoubleChances>.TryRun(this, new DoubleChances(setting));
    }

    /// <summary>The derivatives in extended numbers: 31 digits, of which the difference may cost the first.</summary>
    /// <exception cref="EvaluationRefusedException">A number is below the range of extended numbers.</exception>
    public FormDerivatives<ExtendedDouble> Derive(ChanceSetting setting)
    {
        try
        {
            return BackwardPass<ExtendedDouble, ExtendedChances>.TryRun(this, new ExtendedChances(setting))!;
        }
        catch (OverflowException exception)
        {
            throw BelowRange(exception);
        }
    }

    /// <summary>A number is too small for <see cref="ExtendedDouble"/>.</summary>
    public static EvaluationRefusedException BelowRange(OverflowException exception) => new(
        "A probability of this lineage is below 2^-2,000,000,000, beyond the range of the evaluator's numbers. "
        + "Split the lineage into independent parts, and add up the logarithms of their probabilities.",
        exception);

    /// <summary>
    /// The most roundings that meet in one derivative, beside those of the tails: a user adds its factors and one for the sum.
    /// </summary>
    private double BackwardRoundings()
    {
        var roundings = new float[NodeCount];
        int[] positions = Positions();
        float worst = 0;
        for (int node = NodeCount - 1; node > 0; node--)
        {
            // Sums over many users round once for each; they are added one by one, so their number is a bound.
            int position = positions[node];
            int count = Words[position] >> 2;
            var kind = (FormNodeKind)(Words[position] & 3);
            float own = roundings[node];
            worst = Math.Max(worst, own);
            if (kind == FormNodeKind.Literal)
            {
                continue;
            }

            foreach (int edge in Words.AsSpan(position + (kind == FormNodeKind.Choice ? 2 : 1), count))
            {
                ref float inner = ref roundings[edge >> 1];
                inner = Math.Max(inner, own + count + 2) + 1;
            }
        }

        return worst;
    }

    /// <summary>
    /// The most roundings that meet in one result. A product adds up those of its factors, a sum of exclusive parts takes
    /// the worst of them, both tails alike.
    /// </summary>
    private double Roundings()
    {
        var roundings = new float[NodeCount];
        int position = 0;
        float worst = 0;
        for (int node = 1; node < NodeCount; node++)
        {
            int header = Words[position++];
            int count = header >> 2;
            float sum = 0;
            switch ((FormNodeKind)(header & 3))
            {
                case FormNodeKind.Literal:
                    position++;
                    sum = 1;
                    break;
                case FormNodeKind.Conjunction:
                    foreach (int edge in Words.AsSpan(position, count))
                    {
                        sum += roundings[edge >> 1] + 2;
                    }

                    position += count;
                    break;
                case FormNodeKind.Decision:
                    sum = roundings[Words[position] >> 1] + 2
                        + Math.Max(roundings[Words[position + 1] >> 1], roundings[Words[position + 2] >> 1]);
                    position += 3;
                    break;
                default:
                    position++;
                    foreach (int edge in Words.AsSpan(position, count))
                    {
                        sum = Math.Max(sum, roundings[edge >> 1]);
                    }

                    sum += count + 1;
                    position += count;
                    break;
            }

            roundings[node] = sum;
            worst = Math.Max(worst, sum);
        }

        return worst;
    }
}
