using Uncertain.Lineages;

namespace Uncertain.Execution;

/// <summary>Gives records the wider form of lineages that another set beside theirs has.</summary>
internal sealed class WidthSink<T>(int width, LineageForm form, QueryRun run, Sink<T> next) : Sink<T>
{
    private readonly Output<T> _output = new(run, form.Width, next);

    public static Flow<T> Apply(Flow<T> input, LineageForm form, QueryRun run) => input.Lineages.Width == form.Width
        ? input
        : input.Then<T>(form, addsNodes: !form.IsTerm, next => new WidthSink<T>(input.Lineages.Width, form, run, next));

    public override void Take(Batch<T> batch)
    {
        for (int i = 0; i < batch.Count; i++)
        {
            Span<LineageRef> term = _output.Add(batch.Values[i]);
            if (form.IsTerm)
            {
                batch.Term(i).CopyTo(term);
                term[width..].Fill(LineageRef.True);
            }
            else
            {
                term[0] = run.Arena.And(batch.Term(i));
            }
        }

        _output.Send();
    }
}
