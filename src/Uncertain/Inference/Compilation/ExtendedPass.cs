using Uncertain.Numerics;

namespace Uncertain.Inference.Compilation;

/// <summary>The forward pass over a compiled form in extended numbers: any size, any range.</summary>
internal static class ExtendedPass
{
    public static Tails<ExtendedDouble> Evaluate(CompiledForm form, ChanceSetting setting)
    {
        try
        {
            var values = new Tails<ExtendedDouble>[form.NodeCount];
            Run(form, setting, values);
            return values[form.Root >> 1].NegateIf((form.Root & 1) != 0);
        }
        catch (OverflowException exception)
        {
            throw new EvaluationRefusedException(
                "A probability of this lineage is below 2^-2,000,000,000, beyond the range of the evaluator's numbers. "
                + "Split the lineage into independent parts, and add up the logarithms of their probabilities.",
                exception);
        }
    }

    private static void Run(CompiledForm form, ChanceSetting setting, Tails<ExtendedDouble>[] values)
    {
        values[0] = Tails<ExtendedDouble>.Always;
        int[] words = form.Words;
        int position = 0;
        for (int node = 1; node < form.NodeCount; node++)
        {
            int header = words[position++];
            int count = header >> 2;
            switch ((FormNodeKind)(header & 3))
            {
                case FormNodeKind.Literal:
                    values[node] = setting.Literal(words[position++]).Widen();
                    break;
                case FormNodeKind.Conjunction:
                    Tails<ExtendedDouble> all = Edge(words[position], values);
                    for (int i = 1; i < count; i++)
                    {
                        all &= Edge(words[position + i], values);
                    }

                    values[node] = all;
                    position += count;
                    break;
                case FormNodeKind.Decision:
                    Tails<ExtendedDouble> selector = Edge(words[position], values);
                    Tails<ExtendedDouble> then = Edge(words[position + 1], values);
                    Tails<ExtendedDouble> otherwise = Edge(words[position + 2], values);
                    values[node] = new Tails<ExtendedDouble>(
                        (selector.True * then.True) + (selector.False * otherwise.True),
                        (selector.True * then.False) + (selector.False * otherwise.False));
                    position += 3;
                    break;
                default:
                    double[] weights = setting.Weights(form.Distributions[words[position++]]);
                    values[node] = Choice(words.AsSpan(position, count), weights, values);
                    position += count;
                    break;
            }
        }
    }

    private static Tails<ExtendedDouble> Choice(ReadOnlySpan<int> edges, double[] weights, Tails<ExtendedDouble>[] values)
    {
        ExtendedDouble yes = default;
        ExtendedDouble no = default;
        for (int i = 0; i < edges.Length; i++)
        {
            Tails<ExtendedDouble> branch = Edge(edges[i], values);
            ExtendedDouble weight = ExtendedDouble.From(weights[i]);
            yes += weight * branch.True;
            no += weight * branch.False;
        }

        return new Tails<ExtendedDouble>(yes, no);
    }

    private static Tails<ExtendedDouble> Edge(int edge, Tails<ExtendedDouble>[] values) =>
        values[edge >> 1].NegateIf((edge & 1) != 0);
}
