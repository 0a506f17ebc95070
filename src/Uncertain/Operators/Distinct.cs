using Uncertain.Execution;
using Uncertain.Planning;
using Uncertain.Planning.Calculus;

namespace Uncertain;

/// <content>Merging of equal elements.</content>
public partial class UncertainSet<T>
{
    /// <summary>
    /// The same set, with equal elements merged at this step. A set has no repeats anyway; merging before a join saves derivations
    /// where many elements are equal. Linear.
    /// </summary>
    public UncertainSet<T> Distinct() => new(new DistinctNode(Node));

    private sealed class DistinctNode(PlanNode<T> input) : PlanNode<T>(input.Worlds, input)
    {
        private readonly PlanNode<T> _input = input;

        public override string Describe() => "distinct";

        public override Flow<T> Start(QueryRun run) => Merge<T>.All(_input, run).Flow();

        public override Conjunction Translate() => _input.Translate();
    }
}
