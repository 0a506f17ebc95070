using Uncertain.Lineages;

namespace Uncertain.Execution;

/// <summary>
/// Where joins and products put their pairs: those that are in some world go on in batches, each with the value that the caller's lambda
/// gives for it.
/// </summary>
internal sealed class PairOutput<TOuter, TInner, TResult>(
    QueryRun run, LineageForm outerForm, RecordList<TInner> inner, LineageForm form, Lambda<TOuter, TInner, TResult> result,
    Sink<TResult> next)
{
    /// <summary>As the position of the inner record: there is none, the result is computed with <c>default</c>.</summary>
    public const int Alone = -1;

    private const int FirstCapacity = 32;
    private const int PairsPerCheckpoint = 1024;

    private readonly Batch<TResult> _batch = new(form.Width);
    private readonly LineageRef[] _both = new LineageRef[outerForm.Width + inner.Form.Width];
    private readonly bool _mayContradict =
        form.HasNegations || (form.Width > 1 && run.Arena.Worlds.Variables.HasAlternatives);
    private Batch<TOuter> _outer = new(0);
    private int[] _rows = [];
    private int[] _positions = [];
    private int _tried;

    /// <summary>Begins with a batch of outer records.</summary>
    public void Begin(Batch<TOuter> outer) => _outer = outer;

    /// <summary>Adds the pair of an outer record of the batch and an inner one, unless it is in no world.</summary>
    public void Add(int row, int position)
    {
        run.Cancellation.ThrowIfCancellationRequested();
        if ((++_tried & (PairsPerCheckpoint - 1)) == 0)
        {
            run.Checkpoint(0);
        }

        if (form.IsTerm)
        {
            Span<LineageRef> term = Place(row, position);
            _outer.Term(row).CopyTo(term);
            inner.CopyTerm(position, term[outerForm.Width..]);
            if (_mayContradict && run.Arena.Rules.IsContradiction(term))
            {
                _batch.Count--;
            }
        }
        else
        {
            _outer.Term(row).CopyTo(_both);
            inner.CopyTerm(position, _both.AsSpan(outerForm.Width));
            Add(row, position, run.Arena.And(_both));
        }
    }

    /// <summary>Adds a pair with its lineage.</summary>
    public void Add(int row, int position, LineageRef lineage)
    {
        if (lineage != LineageRef.False)
        {
            Place(row, position)[0] = lineage;
        }
    }

    /// <summary>Sends what is there; to be called at the end of each batch.</summary>
    public void Send()
    {
        run.Checkpoint(_batch.Count);
        if (_batch.Count > 0)
        {
            result.InvokeAll(_outer.Values, _rows, inner.Values, _positions, _batch.Values.AsSpan(0, _batch.Count), run.Cancellation);
            next.Take(_batch);
            _batch.Count = 0;
        }
    }

    private Span<LineageRef> Place(int row, int position)
    {
        if (_batch.Count == _rows.Length)
        {
            MakeRoom();
        }

        _rows[_batch.Count] = row;
        _positions[_batch.Count] = position;
        return _batch.Terms.AsSpan(_batch.Count++ * form.Width, form.Width);
    }

    private void MakeRoom()
    {
        if (_batch.Count == Batch<TResult>.Capacity)
        {
            Send();
            return;
        }

        int capacity = Math.Min(Batch<TResult>.Capacity, Math.Max(FirstCapacity, 4 * _batch.Count));
        _batch.Reserve(capacity);
        Array.Resize(ref _rows, capacity);
        Array.Resize(ref _positions, capacity);
    }
}
