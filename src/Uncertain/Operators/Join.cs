using System.Linq.Expressions;
using Uncertain.Execution;
using Uncertain.Lineages;
using Uncertain.Planning;
using Uncertain.Planning.Calculus;

namespace Uncertain;

/// <content>Inner join.</content>
public partial class UncertainSet<T>
{
    /// <summary>
    /// Pairs of elements with equal keys; a pair is there where both elements are. Null keys never match, as in System.Linq.
    /// Linear in both sets and the pairs.
    /// </summary>
    /// <param name="inner">The other set, of the same world space.</param>
    /// <param name="outerKeySelector">Key of an element of this set; composite keys are anonymous types or tuples.</param>
    /// <param name="innerKeySelector">Key of an element of the other set.</param>
    /// <param name="resultSelector">The result for a pair.</param>
    /// <param name="comparer">Compares keys; default equality if null.</param>
    /// <exception cref="WorldSpaceMismatchException">The other set belongs to another world space.</exception>
    public UncertainSet<TResult> Join<TInner, TKey, TResult>(
        UncertainSet<TInner> inner, Expression<Func<T, TKey>> outerKeySelector, Expression<Func<TInner, TKey>> innerKeySelector,
        Expression<Func<T, TInner, TResult>> resultSelector, IEqualityComparer<TKey>? comparer = null) =>
        new(new JoinNode<TInner, TKey, TResult>(
            new JoinInputs<T, TInner, TKey>(Node, inner, outerKeySelector, innerKeySelector, comparer, nameof(Join)), resultSelector));

    private sealed class JoinNode<TInner, TKey, TResult>(
        JoinInputs<T, TInner, TKey> sides, Expression<Func<T, TInner, TResult>> resultSelector)
        : PlanNode<TResult>(sides.Outer.Worlds, sides.Outer, sides.Inner)
    {
        private readonly JoinInputs<T, TInner, TKey> _sides = sides;
        private readonly Lambda<T, TInner, TResult> _result = new(resultSelector, nameof(Join));

        public override string Describe() => $"join {_sides.Describe()}{PlanText.Into(_result.Tree)}";

        public override Flow<TResult> Start(QueryRun run)
        {
            HashIndex<TKey, TInner> index = _sides.Index(run);
            Flow<T> outer = _sides.Outer.Start(run);
            LineageForm form = LineageForm.Both(outer.Lineages, index.Records.Form);
            return outer.Then<TResult>(form, addsNodes: !form.IsTerm, next => new JoinSink(
                _sides.Matcher(index, run),
                index,
                new PairOutput<T, TInner, TResult>(run, outer.Lineages, index.Records, form, _result, next)));
        }

        public override Conjunction Translate()
        {
            (Conjunction joined, Expression innerValue) = _sides.Translate();
            return joined with { Value = Substitution.Apply(_result.Tree, joined.Value, innerValue) };
        }

        private sealed class JoinSink(
            Matcher<T, TInner, TKey> matcher, HashIndex<TKey, TInner> index, PairOutput<T, TInner, TResult> output) : Sink<T>
        {
            public override void Take(Batch<T> batch)
            {
                ReadOnlySpan<int> first = matcher.First(batch);
                output.Begin(batch);
                for (int i = 0; i < first.Length; i++)
                {
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
