using Uncertain.Execution;
using Uncertain.Lineages;
using Uncertain.Planning;
using Uncertain.Planning.Calculus;

namespace Uncertain;

/// <content>Difference.</content>
public partial class UncertainSet<T>
{
    /// <summary>The elements of this set in the worlds where they are not in the other one. Linear.</summary>
    /// <param name="other">The other set, of the same world space.</param>
    /// <exception cref="WorldSpaceMismatchException">The other set belongs to another world space.</exception>
    public UncertainSet<T> Except(UncertainSet<T> other)
    {
        ArgumentNullException.ThrowIfNull(other);
        return new UncertainSet<T>(new ExceptNode(Node, SameWorlds.Require(Worlds, other, nameof(Except))));
    }

    private sealed class ExceptNode(PlanNode<T> left, PlanNode<T> right) : PlanNode<T>(left.Worlds, left, right)
    {
        private readonly PlanNode<T> _left = left;
        private readonly PlanNode<T> _right = right;

        public override string Describe() => "except";

        public override Flow<T> Start(QueryRun run)
        {
            LineageLookup<T> right = Merge<T>.All(_right, run).Lookup();
            return ConditionSink<T>.Apply(_left.Start(run), run, (batch, worlds) =>
            {
                right.Find(batch.Values.AsSpan(0, batch.Count), worlds);
                LineageRef.NegateAll(worlds);
            });
        }

        public override Conjunction Translate()
        {
            Conjunction left = _left.Translate();
            Conjunction right = _right.Translate();
            return SameSource.Difference(left, right) ?? left.Without(right, left.Value, right.Value, nullsMatch: true);
        }
    }
}
