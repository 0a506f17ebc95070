using System.Runtime.InteropServices;
using Uncertain.Lineages;
using Uncertain.Planning;

namespace Uncertain.Execution;

/// <summary>
/// Set semantics: collects records and gives each distinct value once, in order of first appearance, with the disjunction of
/// its lineages. Linear in the records.
/// </summary>
internal sealed class Merge<T>
{
    // Fewer are sorted faster than a thread starts.
    private const int FewRecords = 50_000;

    private readonly QueryRun _run;
    private readonly LineageForm _form;
    private readonly T[] _values;
    private readonly int[] _counts;
    private MergeSegment[] _segments;

    private Merge(Flow<T> flow, QueryRun run)
    {
        _run = run;
        _form = flow.Lineages;
        MergeSink<T>[] sinks = flow.Run(
            run.Threads, worker => new MergeSink<T>(run, worker, _form.Width), (sink, range) => sink.Begin(range));
        foreach (MergeSink<T> sink in sinks)
        {
            sink.End();
        }

        _segments = [.. sinks.SelectMany(sink => sink.Segments).OrderBy(segment => segment.Range)];
        (_values, _counts) = sinks.Length == 1 ? CountOf(sinks[0].Values) : Renumber([.. sinks.Select(sink => sink.Values)]);
    }

    /// <summary>The distinct values in order of first appearance.</summary>
    public T[] Values => _values;

    public static Merge<T> All(PlanNode<T> input, QueryRun run) => new(input.Start(run), run);

    /// <summary>The values' lineages for the next operator: all parts are hashed, so that equal ones are one.</summary>
    public LineageRef[] Shared()
    {
        int width = _form.Width;
        int[] next = Starts();
        var grouped = new LineageRef[checked((long)_segments.Sum(segment => (long)(segment.End - segment.Start)) * width)];
        foreach (MergeSegment segment in _segments)
        {
            _run.Checkpoint(0);
            for (int i = segment.Start; i < segment.End; i++)
            {
                int place = next[segment.Chunk.Groups[i]]++;
                segment.Chunk.TermsOf(i, i + 1).CopyTo(grouped.AsSpan(place * width));
            }
        }

        Release();
        var lineages = new LineageRef[_values.Length];
        for (int group = 0; group < lineages.Length; group++)
        {
            _run.Cancellation.ThrowIfCancellationRequested();
            int start = next[group] - _counts[group];
            lineages[group] = width == 1
                ? _run.Arena.Or(grouped.AsSpan(start, _counts[group]))
                : Disjunction(grouped.AsSpan(start * width, _counts[group] * width), _counts[group]);
        }

        return lineages;
    }

    /// <summary>
    /// The values' lineages for the caller: the terms of each are neighbours in the arena, not hashed, see <see cref="TermBlock"/>.
    /// </summary>
    public LineageRef[] ForAnswers()
    {
        if (!_form.IsTerm || _form.Width < 2)
        {
            return Shared();
        }

        var block = new TermBlock(_run.Arena, _form.Width, _counts);
        _run.Checkpoint(0);
        var lineages = new LineageRef[_values.Length];
        var rests = new SortedDictionary<int, List<LineageRef>>();
        int[] ends = Parts();
        Workers.Run(_run.Threads, ends.Length, (_, part) =>
            Finish(block, lineages, rests, part == 0 ? 0 : ends[part - 1], ends[part]));
        Release();
        foreach ((int group, List<LineageRef> rest) in rests)
        {
            lineages[group] = _run.Arena.Or(CollectionsMarshal.AsSpan(rest));
        }

        return lineages;
    }

    /// <summary>The distinct values as records, for the next operator.</summary>
    public Flow<T> Flow() => new RecordList<T>(_values, Worlds.LineageColumn.Given(Shared())).Flow(_run);

    /// <summary>The distinct values with their lineages, to be looked up.</summary>
    public LineageLookup<T> Lookup() => new(_values, Shared());

    // Groups are numbered as the only worker has met them.
    private (T[] Values, int[] Counts) CountOf(KeyTable<T> values)
    {
        var counts = new int[values.Count];
        foreach (MergeSegment segment in _segments)
        {
            foreach (int group in segment.Chunk.Groups.AsSpan(segment.Start, segment.End - segment.Start))
            {
                counts[group]++;
            }

            _run.Checkpoint(0);
        }

        return (values.Keys.ToArray(), counts);
    }

    // Each worker has its own numbers; the segments in their order say in which order the values appear.
    private (T[] Values, int[] Counts) Renumber(KeyTable<T>[] workers)
    {
        int[][] common = [.. workers.Select(worker => new int[worker.Count])];

        // The first worker's table takes the others' values, too.
        KeyTable<T> all = workers[0];
        for (int worker = 0; worker < workers.Length; worker++)
        {
            all.Add(workers[worker].Keys, common[worker]);
        }

        var values = new T[all.Count];
        var counts = new int[all.Count];
        var final = new int[all.Count];
        int found = 0;
        foreach (MergeSegment segment in _segments)
        {
            int[] numbers = common[segment.Worker];
            foreach (ref int group in segment.Chunk.Groups.AsSpan(segment.Start, segment.End - segment.Start))
            {
                int number = numbers[group];
                if (final[number] == 0)
                {
                    values[found] = all.Keys[number];
                    final[number] = ++found;
                }

                group = final[number] - 1;
                counts[group]++;
            }

            _run.Checkpoint(0);
        }

        return (values, counts);
    }

    private void Finish(TermBlock block, LineageRef[] lineages, SortedDictionary<int, List<LineageRef>> rests, int first, int end)
    {
        foreach (MergeSegment segment in _segments)
        {
            _run.Cancellation.ThrowIfCancellationRequested();
            ReadOnlySpan<int> groups = segment.Chunk.Groups.AsSpan(segment.Start, segment.End - segment.Start);
            block.Add(groups, segment.Chunk.TermsOf(segment.Start, segment.End), first, end);
        }

        for (int group = first; group < end; group++)
        {
            _run.Cancellation.ThrowIfCancellationRequested();
            lineages[group] = block.Finish(group, out List<LineageRef>? rest);
            if (rest is not null)
            {
                lock (rests)
                {
                    rests.Add(group, rest);
                }
            }
        }
    }

    /// <summary>Ends of parts of the groups with about as many records each, one for each thread.</summary>
    private int[] Parts()
    {
        long total = _counts.Sum(count => (long)count);
        int threads = total < FewRecords ? 1 : _run.Threads;
        var ends = new int[threads];
        long seen = 0;
        int part = 0;
        for (int group = 0; group < _counts.Length && part < threads - 1; group++)
        {
            seen += _counts[group];
            while (part < threads - 1 && seen * threads >= total * (part + 1))
            {
                ends[part++] = group + 1;
            }
        }

        ends.AsSpan(part).Fill(_counts.Length);
        return ends;
    }

    private LineageRef Disjunction(Span<LineageRef> terms, int count)
    {
        if (_form.Width == 0)
        {
            return LineageRef.True;
        }

        // A term's place takes its reference: those before are no longer needed.
        for (int i = 0; i < count; i++)
        {
            terms[i] = _run.Arena.And(terms.Slice(i * _form.Width, _form.Width));
        }

        return _run.Arena.Or(terms[..count]);
    }

    private int[] Starts()
    {
        var starts = new int[_counts.Length];
        int start = 0;
        for (int group = 0; group < starts.Length; group++)
        {
            starts[group] = start;
            start += _counts[group];
        }

        return starts;
    }

    private void Release()
    {
        _run.Hold(-_segments.Select(segment => segment.Chunk).Distinct().Sum(chunk => chunk.Bytes));
        _segments = [];
    }
}
