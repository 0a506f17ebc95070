using System.Linq.Expressions;
using Uncertain.Execution;
using Uncertain.Lineages;
using Uncertain.Planning;
using Uncertain.Planning.Calculus;

namespace Uncertain;

/// <content>Left outer join.</content>
public partial class UncertainSet<T>
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

        public override Flow<TResult> Start(QueryRun run)
        {
            HashIndex<TKey, TInner> index = _sides.Index(run);
            Flow<T> outer = _sides.Outer.Start(run);
            return outer.Then<TResult>(LineageForm.Any, addsNodes: true, next => new LeftJoinSink(
                _sides.Matcher(index, run),
                index,
                run,
                new PairOutput<T, TInner?, TResult>(run, outer.Lineages, index.Records!, LineageForm.Any, _result, next)));
        }

        public override Conjunction Translate() => throw new NoSafePlanException(
            "a left outer join uses its left set twice, with and without a match; join and anti-join apart if one of them is enough");

        private sealed class LeftJoinSink(
            Matcher<T, TInner, TKey> matcher, HashIndex<TKey, TInner> index, QueryRun run, PairOutput<T, TInner?, TResult> output) : Sink<T>
        {
            public override void Take(Batch<T> batch)
            {
                ReadOnlySpan<int> first = matcher.First(batch);
                output.Begin(batch);
                for (int i = 0; i < first.Length; i++)
                {
                    LineageRef alone = !index.Any(first[i], run.Arena);
                    output.Add(i, PairOutput<T, TInner?, TResult>.Alone, run.Arena.And(run.Arena.And(batch.Term(i)), alone));
                    for (int match = first[i]; match >= 0; match = index.Next(match))
                    {
                        output.Add(i, match);
                    }
                }

                output.Send();
            }
        }
    }
}
