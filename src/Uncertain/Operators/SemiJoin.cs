using System.Linq.Expressions;
using Uncertain.Execution;
using Uncertain.Lineages;
using Uncertain.Planning;
using Uncertain.Planning.Calculus;

namespace Uncertain;

/// <content>Semi-join.</content>
public partial class UncertainSet<T>
{
    /// <summary>
    /// The elements of this set in the worlds where at least one element of the other set has the same key. Null keys never match.
    /// Linear in both sets and the matches.
    /// </summary>
    /// <param name="inner">The other set, of the same world space.</param>
    /// <param name="outerKeySelector">Key of an element of this set.</param>
    /// <param name="innerKeySelector">Key of an element of the other set.</param>
    /// <param name="comparer">Compares keys; default equality if null.</param>
    /// <exception cref="WorldSpaceMismatchException">The other set belongs to another world space.</exception>
    public UncertainSet<T> SemiJoin<TInner, TKey>(
        UncertainSet<TInner> inner, Expression<Func<T, TKey>> outerKeySelector, Expression<Func<TInner, TKey>> innerKeySelector,
        IEqualityComparer<TKey>? comparer = null) =>
        new(new SemiJoinNode<TInner, TKey>(
            new JoinInputs<T, TInner, TKey>(Node, inner, outerKeySelector, innerKeySelector, comparer, nameof(SemiJoin))));

    private sealed class SemiJoinNode<TInner, TKey>(JoinInputs<T, TInner, TKey> sides)
        : PlanNode<T>(sides.Outer.Worlds, sides.Outer, sides.Inner)
    {
        private readonly JoinInputs<T, TInner, TKey> _sides = sides;

        public override string Describe() => $"semi-join {_sides.Describe()}";

        public override Flow<T> Start(QueryRun run) => _sides.StartCondition(run, isNegated: false);

        public override Conjunction Translate() => _sides.Translate().Joined;
    }
}
