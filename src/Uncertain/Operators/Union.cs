using Uncertain.Execution;
using Uncertain.Planning;
using Uncertain.Planning.Calculus;

namespace Uncertain;

/// <content>Union.</content>
public sealed partial class UncertainSet<T>
{
    /// <summary>The elements that are in this set or in the other one, in the worlds of either. Linear.</summary>
    /// <param name="other">The other set, of the same world space.</param>
    /// <exception cref="WorldSpaceMismatchException">The other set belongs to another world space.</exception>
    public UncertainSet<T> Union(UncertainSet<T> other)
    {
        ArgumentNullException.ThrowIfNull(other);
        return new UncertainSet<T>(new UnionNode(Node, SameWorlds.Require(Worlds, other, nameof(Union))));
    }

    private sealed class UnionNode(PlanNode<T> left, PlanNode<T> right) : PlanNode<T>(left.Worlds, left, right)
    {
        private readonly PlanNode<T> _left = left;
        private readonly PlanNode<T> _right = right;

        public override string Describe() => "union";

        public override IEnumerable<Batch<T>> Run(QueryRun run) => _left.Run(run).Concat(_right.Run(run));

        public override Conjunction Translate()
        {
            Conjunction left = _left.Translate();
            Conjunction right = _right.Translate();
            return SameSource.Union(left, right) ?? UnionAtom.Of(left, right, typeof(T));
        }
    }
}
