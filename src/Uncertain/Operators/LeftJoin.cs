using System.Linq.Expressions;
using Uncertain.Execution;
using Uncertain.Lineages;
using Uncertain.Planning;
using Uncertain.Planning.Calculus;

namespace Uncertain;

/// <content>Left outer join.</content>
public sealed partial class UncertainSet<T>
{
    /// <summary>
    /// Pairs of elements with equal keys, as <see cref="Join"/>, and each element of this set once with <c>default</c> in the worlds
    /// where no element of the other set matches it. Null keys never match. Linear in both sets and the pairs.
    /// </summary>
    /// <param name="inner">The other set, of the same world space.</param>
    /// <param name="outerKeySelector">Key of an element of this set.</param>
    /// <param name="innerKeySelector">Key of an element of the other set.</param>
    /// <param name="resultSelector">The result for a pair; the second argument is <c>default</c> where nothing matches.</param>
    /// <param name="comparer">Compares keys; default equality if null.</param>
    /// <exception cref="WorldSpaceMismatchException">The other set belongs to another world space.</exception>
    public UncertainSet<TResult> LeftJoin<TInner, TKey, TResult>(
        UncertainSet<TInner> inner, Expression<Func<T, TKey>> outerKeySelector, Expression<Func<TInner, TKey>> innerKeySelector,
        Expression<Func<T, TInner?, TResult>> resultSelector, IEqualityComparer<TKey>? comparer = null) =>
        new(new LeftJoinNode<TInner, TKey, TResult>(
            new JoinInputs<T, TInner, TKey>(Node, inner, outerKeySelector, innerKeySelector, comparer, nameof(LeftJoin)), resultSelector));

    private sealed class LeftJoinNode<TInner, TKey, TResult>(
        JoinInputs<T, TInner, TKey> sides, Expression<Func<T, TInner?, TResult>> resultSelector)
        : PlanNode<TResult>(sides.Outer.Worlds, sides.Outer, sides.Inner)
    {
        private readonly JoinInputs<T, TInner, TKey> _sides = sides;
        private readonly Lambda<T, TInner?, TResult> _result = new(resultSelector, nameof(LeftJoin));

        public override string Describe() => $"left join {_sides.Describe()}{PlanText.Into(_result.Tree)}";

        public override IEnumerable<Batch<TResult>> Run(QueryRun run)
        {
            HashIndex<TKey, TInner> index = _sides.Index(run);
            var output = new Batch<TResult>();
            foreach (Batch<T> batch in _sides.Outer.Run(run))
            {
                for (int i = 0; i < batch.Count; i++)
                {
                    T outer = batch.Values[i];
                    TKey key = _sides.KeyOf(outer);
                    LineageRef alone = run.Arena.And(batch.Lineages[i], !index.AnyWith(key, run.Arena));
                    int match = index.First(key);
                    if (alone != LineageRef.False)
                    {
                        output.Add(_result.Invoke(outer, default), alone);
                    }

                    while (true)
                    {
                        run.Step();
                        if (output.IsFull)
                        {
                            run.Checkpoint(output.Count);
                            yield return output;
                            output.Count = 0;
                        }

                        if (match < 0)
                        {
                            break;
                        }

                        LineageRef both = run.Arena.And(batch.Lineages[i], index.Lineage(match));
                        if (both != LineageRef.False)
                        {
                            output.Add(_result.Invoke(outer, index.Value(match)), both);
                        }

                        match = index.Next(match);
                    }
                }
            }

            run.Checkpoint(output.Count);
            yield return output;
        }

        public override Conjunction Translate() => throw new NoSafePlanException(
            "a left outer join uses its left set twice, with and without a match; join and anti-join apart if one of them is enough");
    }
}
