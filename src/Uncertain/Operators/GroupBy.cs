using System.Linq.Expressions;
using Uncertain.Execution;
using Uncertain.Lineages;
using Uncertain.Operators;
using Uncertain.Planning;
using Uncertain.Planning.Calculus;
using Uncertain.Worlds;

namespace Uncertain;

/// <content>Groups.</content>
public partial class UncertainSet<T>
{
    /// <summary>
    /// The groups of the elements with equal keys. A group is there in the worlds in which it is not empty, and is itself a set: what it
    /// holds differs from world to world, so its count, sums and extremes have distributions. Linear.
    /// </summary>
    /// <param name="keySelector">The key; null is a key too.</param>
    /// <param name="comparer">Compares keys; default equality if null.</param>
    /// <example>
    /// <code>
    /// from c in crates
    /// group c by c.Ferry into g
    /// where g.Count() >= 3
    /// select new { Ferry = g.Key, Weight = g.Sum(c => c.Weight) }
    /// </code>
    /// is a set with an element for each ferry, there in the worlds in which it has three crates or more; its <c>Weight.Evaluate()</c>
    /// is the distribution of the group's weight over all worlds.
    /// </example>
    public UncertainSet<UncertainGroup<TKey, T>> GroupBy<TKey>(
        Expression<Func<T, TKey>> keySelector, IEqualityComparer<TKey>? comparer = null) =>
        new(new GroupByNode<TKey>(Node, keySelector, comparer));

    private sealed class GroupByNode<TKey>(PlanNode<T> input, Expression<Func<T, TKey>> keySelector, IEqualityComparer<TKey>? comparer)
        : PlanNode<UncertainGroup<TKey, T>>(input.Worlds, input)
    {
        private readonly PlanNode<T> _input = input;
        private readonly Lambda<T, TKey> _keySelector = new(keySelector, nameof(GroupBy));

        public override string Describe() => $"group by {PlanText.Lambda(_keySelector.Tree)}";

        public override Flow<UncertainGroup<TKey, T>> Start(QueryRun run)
        {
            var places = new Dictionary<ValueTuple<TKey>, int>(new KeyComparer<TKey>(comparer));
            var groups = new List<(TKey Key, List<T> Values, List<LineageRef> Lineages)>();
            Merge<T> merge = Merge<T>.All(_input, run);
            LineageRef[] merged = merge.Shared();
            for (int i = 0; i < merged.Length; i++)
            {
                run.Cancellation.ThrowIfCancellationRequested();
                (T value, LineageRef lineage) = (merge.Values[i], merged[i]);
                if (lineage == LineageRef.False)
                {
                    continue;
                }

                TKey key = _keySelector.Invoke(value);
                if (!places.TryGetValue(new(key), out int place))
                {
                    places.Add(new(key), place = groups.Count);
                    groups.Add((key, [], []));
                }

                groups[place].Values.Add(value);
                groups[place].Lineages.Add(lineage);
            }

            var result = new UncertainGroup<TKey, T>[groups.Count];
            var there = new LineageRef[groups.Count];
            for (int i = 0; i < result.Length; i++)
            {
                (TKey key, List<T> values, List<LineageRef> lineages) = groups[i];
                LineageRef[] members = [.. lineages];
                result[i] = new UncertainGroup<TKey, T>(
                    key, this, new DerivedNode<T>(run.Arena, [.. values], members, $"group '{key}'"));
                there[i] = run.Arena.Or(members);
            }

            return new RecordList<UncertainGroup<TKey, T>>(result, LineageColumn.Given(there)).Flow(run);
        }

        public override Conjunction Translate() => throw new NoSafePlanException("a group is a set of its own, which has no safe plan");
    }
}
