using Uncertain.Execution;
using Uncertain.Planning;
using Uncertain.Planning.Calculus;

namespace Uncertain.Operators;

/// <summary>Yes, where the input has any element.</summary>
internal sealed class AnyNode<T>(PlanNode<T> input) : PlanNode<bool>(input.Worlds, input)
{
    private readonly PlanNode<T> _input = input;

    public override string Describe() => "is there any";

    public override IEnumerable<Batch<bool>> Run(QueryRun run)
    {
        var merge = new Merge<bool>();
        foreach (Batch<T> batch in _input.Run(run))
        {
            for (int i = 0; i < batch.Count; i++)
            {
                merge.Add(true, batch.Lineages[i]);
            }
        }

        return merge.Batches(run);
    }

    public override Conjunction Translate() =>
        _input.Translate() with { Value = System.Linq.Expressions.Expression.Constant(true) };
}
