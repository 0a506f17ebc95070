using System.Buffers;
using System.Numerics;
using Uncertain.Numerics;

namespace Uncertain.Inference.Compilation;

/// <summary>One pass over a compiled form, from the first node to the last; both tails of each node.</summary>
internal static class ForwardPass<TNumber, TChances>
    where TNumber : struct, IAdditionOperators<TNumber, TNumber, TNumber>, IMultiplyOperators<TNumber, TNumber, TNumber>,
        IAdditiveIdentity<TNumber, TNumber>, IMultiplicativeIdentity<TNumber, TNumber>
    where TChances : struct, IChanceReader<TNumber>
{
    /// <summary>False if a number came near the end of its range; then the figure is not to be used.</summary>
    public static bool TryEvaluate(CompiledForm form, TChances chances, out Tails<TNumber> result)
    {
        Tails<TNumber>[] values = ArrayPool<Tails<TNumber>>.Shared.Rent(form.NodeCount);
        try
        {
            bool inRange = TryRun(form, chances, values, new TNumber[]?[form.Distributions.Length]);
            result = inRange ? Edge(form.Root, values) : default;
            return inRange;
        }
        finally
        {
            ArrayPool<Tails<TNumber>>.Shared.Return(values);
        }
    }

    /// <summary>The same with the tails of all nodes and the weights of all distributions that occur.</summary>
    public static bool TryRun(CompiledForm form, TChances chances, Tails<TNumber>[] values, TNumber[]?[] weights)
    {
        values[0] = Tails<TNumber>.Always;
        int position = 0;
        for (int node = 1; node < form.NodeCount; node++)
        {
            Tails<TNumber> value = Node(form.Words, ref position, form.Distributions, chances, values, weights);
            if (chances.IsOutOfRange(value))
            {
                return false;
            }

            values[node] = value;
        }

        return true;
    }

    /// <summary>The tails of the node that begins at a position, which moves on to the next node.</summary>
    public static Tails<TNumber> Node(
        ReadOnlySpan<int> words, ref int position, IReadOnlyList<FormDistribution> distributions, TChances chances,
        Tails<TNumber>[] values, TNumber[]?[] weights)
    {
        int header = words[position];
        ReadOnlySpan<int> edges = words.Slice(position + 1, header >> 2);
        position += 1 + edges.Length;
        switch ((FormNodeKind)(header & 3))
        {
            case FormNodeKind.Literal:
                return chances.Literal(edges[0]);
            case FormNodeKind.Conjunction:
                return Conjunction(edges, values);
            case FormNodeKind.Decision:
                return Decision(edges, values);
            default:
                int distribution = edges[0];
                edges = words.Slice(position - edges.Length + 1, edges.Length);
                position++;
                return Choice(edges, weights[distribution] ??= chances.Weights(distributions[distribution]), values);
        }
    }

    private static Tails<TNumber> Conjunction(ReadOnlySpan<int> edges, Tails<TNumber>[] values)
    {
        Tails<TNumber> all = Edge(edges[0], values);
        foreach (int edge in edges[1..])
        {
            all &= Edge(edge, values);
        }

        return all;
    }

    private static Tails<TNumber> Decision(ReadOnlySpan<int> edges, Tails<TNumber>[] values)
    {
        Tails<TNumber> selector = Edge(edges[0], values);
        Tails<TNumber> then = Edge(edges[1], values);
        Tails<TNumber> otherwise = Edge(edges[2], values);
        return new Tails<TNumber>(
            (selector.True * then.True) + (selector.False * otherwise.True),
            (selector.True * then.False) + (selector.False * otherwise.False));
    }

    private static Tails<TNumber> Choice(ReadOnlySpan<int> edges, TNumber[] weights, Tails<TNumber>[] values)
    {
        TNumber yes = TNumber.AdditiveIdentity;
        TNumber no = TNumber.AdditiveIdentity;
        for (int i = 0; i < edges.Length; i++)
        {
            Tails<TNumber> branch = Edge(edges[i], values);
            yes += weights[i] * branch.True;
            no += weights[i] * branch.False;
        }

        return new Tails<TNumber>(yes, no);
    }

    private static Tails<TNumber> Edge(int edge, Tails<TNumber>[] values) => values[edge >> 1].NegateIf((edge & 1) != 0);
}
