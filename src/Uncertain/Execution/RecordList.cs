using Uncertain.Lineages;
using Uncertain.Planning;
using Uncertain.Worlds;

namespace Uncertain.Execution;

/// <summary>Records that lie in memory, to be read more than once: those of a source as they are, or what a step gave.</summary>
internal sealed class RecordList<T>
{
    private readonly LineageColumn _column;
    private readonly LineageRef[]? _terms;

    /// <summary>Records with one lineage each, of the run's arena.</summary>
    public RecordList(T[] values, LineageColumn lineages)
    {
        Values = values;
        Count = values.Length;
        _column = lineages;
        Form = lineages.Form;
    }

    private RecordList(T[] values, int count, LineageRef[] terms, LineageForm form)
    {
        Values = values;
        Count = count;
        _terms = terms;
        Form = form;
    }

    /// <summary>The values; there may be room behind them.</summary>
    public T[] Values { get; }

    public int Count { get; }

    public LineageForm Form { get; }

    public static RecordList<T> Read(PlanNode<T> input, QueryRun run)
    {
        Flow<T> flow = input.Start(run);
        if (flow.Table is { } table)
        {
            return table;
        }

        var collector = new Collector(flow.Lineages.Width);
        flow.Connect(collector)(0, flow.Rows);
        return new RecordList<T>(collector.Values, collector.Count, collector.Terms, flow.Lineages);
    }

    /// <summary>Whether a record is in any world.</summary>
    public bool IsPossible(int position) => _terms is not null || _column.AllPossible || _column[position] != LineageRef.False;

    /// <summary>Writes the references whose conjunction is a record's lineage.</summary>
    public void CopyTerm(int position, Span<LineageRef> to)
    {
        if (_terms is not null)
        {
            _terms.AsSpan(position * Form.Width, Form.Width).CopyTo(to);
        }
        else if (Form.Width == 1)
        {
            to[0] = _column[position];
        }
    }

    /// <summary>The records in their order.</summary>
    public Flow<T> Flow(QueryRun run) => new(Count, Form, isParallel: true, sink => Feed(run, sink)) { Table = this };

    private Feed Feed(QueryRun run, Sink<T> sink)
    {
        var batch = new Batch<T>(Form.Width);
        return (from, to) =>
        {
            batch.Reserve(Math.Min(Batch<T>.Capacity, to - from));
            for (int position = from; position < to; position += Batch<T>.Capacity)
            {
                Fill(batch, position, Math.Min(to, position + Batch<T>.Capacity));
                run.Checkpoint(batch.Count);
                sink.Take(batch);
            }
        };
    }

    private void Fill(Batch<T> batch, int from, int to)
    {
        batch.Count = 0;
        for (int position = from; position < to; position++)
        {
            if (IsPossible(position))
            {
                CopyTerm(position, batch.Terms.AsSpan(batch.Count * Form.Width, Form.Width));
                batch.Values[batch.Count++] = Values[position];
            }
        }
    }

    private sealed class Collector(int width) : Sink<T>
    {
        private readonly Batch<T> _all = new(width);

        public T[] Values => _all.Values;

        public LineageRef[] Terms => _all.Terms;

        public int Count => _all.Count;

        public override void Take(Batch<T> batch)
        {
            int needed = _all.Count + batch.Count;
            _all.Reserve(needed <= _all.Values.Length ? needed : Math.Max(needed, 2 * _all.Count));
            batch.Values.AsSpan(0, batch.Count).CopyTo(_all.Values.AsSpan(_all.Count));
            batch.Terms.AsSpan(0, batch.Count * width).CopyTo(_all.Terms.AsSpan(_all.Count * width));
            _all.Count = needed;
        }
    }
}
