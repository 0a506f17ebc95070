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
            Merge<T> merge = Merge<T>.All(_input, run);
            LineageRef[] merged = merge.Shared();
            var keys = new TKey[merged.Length];
            _keySelector.InvokeAll(merge.Values, null, 0, keys, run.Cancellation);
            KeyTable<TKey> table = KeyTable<TKey>.Create(comparer);
            var places = new int[keys.Length];
            table.Add(keys, places);
            var groups = new (List<T> Values, List<LineageRef> Lineages)[table.Count];
            for (int i = 0; i < merged.Length; i++)
            {
                run.Cancellation.ThrowIfCancellationRequested();
                if (merged[i] != LineageRef.False)
                {
                    ref (List<T> Values, List<LineageRef> Lineages) group = ref groups[places[i]];
                    (group.Values ??= []).Add(merge.Values[i]);
                    (group.Lineages ??= []).Add(merged[i]);
                }
            }

            var result = new UncertainGroup<TKey, T>[groups.Length];
            var there = new LineageRef[groups.Length];
            for (int i = 0; i < result.Length; i++)
            {
                TKey key = table.Keys[i];
                LineageRef[] members = [.. groups[i].Lineages ?? []];
                result[i] = new UncertainGroup<TKey, T>(
                    key, this, new DerivedNode<T>(run.Arena, [.. groups[i].Values ?? []], members, $"group '{key}'"));
                there[i] = members.Length == 0 ? LineageRef.False : run.Arena.Or(members);
            }

            return new RecordList<UncertainGroup<TKey, T>>(result, LineageColumn.Given(there)).Flow(run);
        }

        public override Conjunction Translate() => throw new NoSafePlanException("a group is a set of its own, which has no safe plan");
    }
}
