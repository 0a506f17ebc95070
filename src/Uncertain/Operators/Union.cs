using Uncertain.Execution;
using Uncertain.Planning;
using Uncertain.Planning.Calculus;

namespace Uncertain;

/// <content>Union.</content>
public partial class UncertainSet<T>
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

        public override Flow<T> Start(QueryRun run)
        {
            Flow<T> left = _left.Start(run);
            Flow<T> right = _right.Start(run);
            LineageForm form = LineageForm.Either(left.Lineages, right.Lineages);
            left = WidthSink<T>.Apply(left, form, run);
            right = WidthSink<T>.Apply(right, form, run);
            return new Flow<T>(checked(left.Rows + right.Rows), form, left.IsParallel && right.IsParallel, sink =>
            {
                Feed first = left.Connect(sink);
                Feed second = right.Connect(sink);
                return (from, to) =>
                {
                    if (from < left.Rows)
                    {
                        first(from, Math.Min(to, left.Rows));
                    }

                    if (to > left.Rows)
                    {
                        second(Math.Max(from, left.Rows) - left.Rows, to - left.Rows);
                    }
                };
            });
        }

        public override Conjunction Translate()
        {
            Conjunction left = _left.Translate();
            Conjunction right = _right.Translate();
            return SameSource.Union(left, right) ?? UnionAtom.Of(left, right, typeof(T));
        }
    }
}
