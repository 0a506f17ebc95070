using Uncertain.Lineages;

namespace Uncertain.Execution;

/// <summary>Passes the records of its input on, each in the worlds where a condition of its own holds too.</summary>
internal sealed class ConditionSink<T>(Condition<T> condition, QueryRun run, int width, Sink<T> next) : Sink<T>
{
    private readonly LineageRef[] _conditions = new LineageRef[Batch<T>.Capacity];
    private readonly LineageRef[] _both = new LineageRef[width + 1];
    private readonly Output<T> _output = new(run, LineageForm.Any.Width, next);

    /// <summary>A flow's records with a condition.</summary>
    public static Flow<T> Apply(Flow<T> input, QueryRun run, Condition<T> condition) => input.Then<T>(
        LineageForm.Any, addsNodes: true, next => new ConditionSink<T>(condition, run, input.Lineages.Width, next));

    public override void Take(Batch<T> batch)
    {
        condition(batch, _conditions.AsSpan(0, batch.Count));
        for (int i = 0; i < batch.Count; i++)
        {
            run.Cancellation.ThrowIfCancellationRequested();
            batch.Term(i).CopyTo(_both);
            _both[width] = _conditions[i];
            LineageRef lineage = run.Arena.And(_both);
            if (lineage != LineageRef.False)
            {
                _output.Add(batch.Values[i])[0] = lineage;
            }
        }

        _output.Send();
    }
}
