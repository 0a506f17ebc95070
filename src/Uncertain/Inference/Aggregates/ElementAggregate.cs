using Uncertain.Execution;
using Uncertain.Lineages;
using Uncertain.Planning;

namespace Uncertain.Inference.Aggregates;

/// <summary>An aggregate of a number, or another field, of each element.</summary>
/// <param name="input">The step whose elements are aggregated.</param>
/// <param name="field">The field; null for aggregates that need none.</param>
/// <param name="name">The aggregate's name as it is called.</param>
/// <param name="build">Makes the problem from lineages and fields.</param>
internal sealed class ElementAggregate<T, TField, TValue>(
    PlanNode<T> input, Lambda<T, TField>? field, string name, Func<LineageRef[], TField[], QueryRun, AggregateProblem<TValue>> build)
    : AggregateDefinition<TValue>(input)
{
    private readonly PlanNode<T> _input = input;

    public override string Describe() => field is null ? name : $"{name} of {PlanText.Lambda(field.Tree)}";

    public override AggregateProblem<TValue> Prepare(QueryRun run)
    {
        var lineages = new List<LineageRef>();
        var fields = new List<TField>();
        Merge<T> merge = Merge<T>.All(_input, run);
        LineageRef[] merged = merge.Shared();
        for (int i = 0; i < merged.Length; i++)
        {
            run.Cancellation.ThrowIfCancellationRequested();
            (T value, LineageRef lineage) = (merge.Values[i], merged[i]);
            if (lineage == LineageRef.False)
            {
                continue;
            }

            TField? own = field is null ? default : field.Invoke(value);

            // As in System.Linq, what has no value of the field does not count.
            if (field is null || own is not null)
            {
                Check(value, own);
                lineages.Add(lineage);
                fields.Add(own!);
            }
        }

        return build([.. lineages], [.. fields], run);
    }

    private void Check(T element, TField? own)
    {
        if (own is double.NaN or float.NaN)
        {
            throw new InvalidInputException(
                $"{name} met NaN at the element '{element}': it has no place in an order and no amount. Filter such elements out before, "
                + "or select null for them, which does not count.");
        }
    }
}
