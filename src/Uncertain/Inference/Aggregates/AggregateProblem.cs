using Uncertain.Execution;
using Uncertain.Lineages;

namespace Uncertain.Inference.Aggregates;

/// <summary>
/// One aggregate over the derived elements of one set. Its values are coded as long keys, ascending with the values;
/// <see cref="NoValue"/> stands for 'no value'.
/// </summary>
/// <typeparam name="TValue">Type of the aggregate's values.</typeparam>
internal abstract class AggregateProblem<TValue>(LineageRef[] elements)
{
    public const long NoValue = long.MinValue;

    /// <summary>The lineages of the elements.</summary>
    public LineageRef[] Elements { get; } = elements;

    /// <summary>The exact law of the keys.</summary>
    /// <exception cref="Compilation.BudgetSpentException">A budget ran out.</exception>
    public abstract Law Solve(LineageArena arena, AggregateBudget budget);

    /// <summary>The value of a key.</summary>
    public abstract TValue Decode(long key);

    /// <summary>For sampling: the keys of many worlds at once, from which elements are there.</summary>
    public abstract void KeysOf(PresenceTable worlds, Span<long> keys);

    /// <summary>The worlds in which there is a value.</summary>
    public abstract LineageRef HasValue(QueryRun run);

    /// <summary>The worlds in which there is a value and it is at least, or more than, a bound.</summary>
    public abstract LineageRef Reaches(TValue bound, bool strictly, QueryRun run);

    /// <summary>Weights whose sum is the aggregate, for its moments; null where it is no sum.</summary>
    public virtual double[]? LinearWeights => null;

    protected Contribution[] Weighted(Func<int, long> weight)
    {
        var contributions = new Contribution[Elements.Length];
        for (int i = 0; i < contributions.Length; i++)
        {
            contributions[i] = new Contribution(Elements[i], weight(i));
        }

        return contributions;
    }
}
