using System.Numerics;
using Uncertain.Numerics;

namespace Uncertain.Inference.Aggregates;

/// <summary>
/// The chances of the counts below a limit, over independent parts of which one at a time changes: a balanced tree of truncated
/// convolutions.
/// </summary>
internal sealed class CountTree
{
    private static readonly ExtendedDouble[] s_nothing = [ExtendedDouble.MultiplicativeIdentity];

    private readonly int _limit;
    private readonly int _leaves;
    private readonly ExtendedDouble[][] _nodes;
    private readonly AggregateBudget _budget;

    /// <param name="parts">Number of parts; each has the count 0 at first.</param>
    /// <param name="limit">Counts from here on are not told apart.</param>
    /// <param name="budget">Pays for the work.</param>
    public CountTree(int parts, int limit, AggregateBudget budget)
    {
        _limit = limit;
        _budget = budget;
        _leaves = (int)BitOperations.RoundUpToPowerOf2((uint)Math.Max(1, parts));
        budget.Hold(40L * 2 * _leaves);
        _nodes = new ExtendedDouble[2 * _leaves][];
        Array.Fill(_nodes, s_nothing);
    }

    /// <summary>The chances of the counts 0, 1, ... of all parts together.</summary>
    public ExtendedDouble[] Total => _nodes[1];

    /// <summary>Changes one part.</summary>
    public void Set(int part, ExtendedDouble[] chances)
    {
        int node = _leaves + part;
        _nodes[node] = chances.Length <= _limit ? chances : chances[.._limit];
        for (node >>= 1; node >= 1; node >>= 1)
        {
            _nodes[node] = Product(_nodes[2 * node], _nodes[(2 * node) + 1]);
        }
    }

    private ExtendedDouble[] Product(ExtendedDouble[] left, ExtendedDouble[] right)
    {
        _budget.Step(2 + (3L * left.Length * right.Length));
        var product = new ExtendedDouble[Math.Min(_limit, left.Length + right.Length - 1)];
        for (int i = 0; i < left.Length; i++)
        {
            for (int j = 0; j < right.Length && i + j < product.Length; j++)
            {
                product[i + j] += left[i] * right[j];
            }
        }

        return product;
    }
}
