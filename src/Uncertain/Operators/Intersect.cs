using Uncertain.Execution;
using Uncertain.Lineages;
using Uncertain.Planning;
using Uncertain.Planning.Calculus;

namespace Uncertain;

/// <content>Intersection.</content>
public partial class UncertainSet<T>
{
    /// <summary>The elements that are in this set and in the other one, in the worlds of both. Linear.</summary>
    /// <param name="other">The other set, of the same world space.</param>
    /// <exception cref="WorldSpaceMismatchException">The other set belongs to another world space.</exception>
    public UncertainSet<T> Intersect(UncertainSet<T> other)
    {
        ArgumentNullException.ThrowIfNull(other);
        return new UncertainSet<T>(new IntersectNode(Node, SameWorlds.Require(Worlds, other, nameof(Intersect))));
    }

    private sealed class IntersectNode(PlanNode<T> left, PlanNode<T> right) : PlanNode<T>(left.Worlds, left, right)
    {
        private readonly PlanNode<T> _left = left;
        private readonly PlanNode<T> _right = right;

        public override string Describe() => "intersect";

        public override Flow<T> Start(QueryRun run)
        {
            LineageLookup<T> right = Merge<T>.All(_right, run).Lookup();
            return ConditionSink<T>.Apply(
                _left.Start(run), run, (batch, worlds) => right.Find(batch.Values.AsSpan(0, batch.Count), worlds));
        }

        public override Conjunction Translate()
        {
            Conjunction left = _left.Translate();
            Conjunction right = _right.Translate();
            return SameSource.Intersection(left, right) ?? left.JoinedWith(right, left.Value, right.Value, nullsMatch: true);
        }
    }
}
