using System.Buffers;
using Uncertain.Numerics;

namespace Uncertain.Inference.Compilation;

/// <summary>The forward pass over a compiled form in plain doubles, for forms whose roundings and range allow it.</summary>
internal static class DoublePass
{
    /// <summary>False if a tail came near the end of the range of double; then the figure is not to be used.</summary>
    public static bool TryEvaluate(CompiledForm form, ChanceSetting setting, out Tails<double> result)
    {
        Tails<double>[] values = ArrayPool<Tails<double>>.Shared.Rent(form.NodeCount);
        try
        {
            bool inRange = Run(form, setting, values);
            result = inRange ? values[form.Root >> 1].NegateIf((form.Root & 1) != 0) : default;
            return inRange;
        }
        finally
        {
            ArrayPool<Tails<double>>.Shared.Return(values);
        }
    }

    private static bool Run(CompiledForm form, ChanceSetting setting, Tails<double>[] values)
    {
        values[0] = Tails<double>.Always;
        int[] words = form.Words;
        int position = 0;
        for (int node = 1; node < form.NodeCount; node++)
        {
            int header = words[position++];
            int count = header >> 2;
            Tails<double> value;
            switch ((FormNodeKind)(header & 3))
            {
                case FormNodeKind.Literal:
                    value = setting.Literal(words[position++]);
                    break;
                case FormNodeKind.Conjunction:
                    value = Conjunction(words.AsSpan(position, count), values);
                    position += count;
                    break;
                case FormNodeKind.Decision:
                    value = Decision(words.AsSpan(position, 3), values);
                    position += 3;
                    break;
                default:
                    double[] weights = setting.Weights(form.Distributions[words[position++]]);
                    value = Choice(words.AsSpan(position, count), weights, values);
                    position += count;
                    break;
            }

            // A tail that is 0 for certain (a chance of 0 or 1 was set) sends the form to the extended pass as well;
            // that costs time only.
            if (!(value.True >= TailConversions.SafeRange && value.False >= TailConversions.SafeRange))
            {
                return false;
            }

            values[node] = value;
        }

        return true;
    }

    private static Tails<double> Conjunction(ReadOnlySpan<int> edges, Tails<double>[] values)
    {
        Tails<double> all = Edge(edges[0], values);
        foreach (int edge in edges[1..])
        {
            all &= Edge(edge, values);
        }

        return all;
    }

    private static Tails<double> Decision(ReadOnlySpan<int> edges, Tails<double>[] values)
    {
        Tails<double> selector = Edge(edges[0], values);
        Tails<double> then = Edge(edges[1], values);
        Tails<double> otherwise = Edge(edges[2], values);
        return new Tails<double>(
            (selector.True * then.True) + (selector.False * otherwise.True),
            (selector.True * then.False) + (selector.False * otherwise.False));
    }

    private static Tails<double> Choice(ReadOnlySpan<int> edges, double[] weights, Tails<double>[] values)
    {
        double yes = 0;
        double no = 0;
        for (int i = 0; i < edges.Length; i++)
        {
            Tails<double> branch = Edge(edges[i], values);
            yes += weights[i] * branch.True;
            no += weights[i] * branch.False;
        }

        return new Tails<double>(yes, no);
    }

    private static Tails<double> Edge(int edge, Tails<double>[] values) => values[edge >> 1].NegateIf((edge & 1) != 0);
}
