using System.Buffers;
using System.Linq.Expressions;
using Uncertain.Execution;
using Uncertain.Lineages;

namespace Uncertain.Worlds;

/// <summary>The filter on records of one type.</summary>
internal sealed class RecordFilter<T> : RecordFilter
{
    private readonly int _records;
    private readonly LineageColumn _lineages;
    private readonly FieldReader<T, bool>[] _conditions;

    public RecordFilter(T[] records, LineageColumn lineages, IReadOnlyList<LambdaExpression> conditions)
    {
        _records = records.Length;
        _lineages = lineages;
        _conditions = [.. conditions.Select(condition => new FieldReader<T, bool>(records, (Expression<Func<T, bool>>)condition, "Where"))];
    }

    public override bool PassesAll => _conditions.Length == 0 && _lineages.AllPossible;

    public override int Choose(int[] chosen, int threads, int leastRecords, CancellationToken cancellationToken)
    {
        int ranges = Array.TrueForAll(_conditions, condition => condition.IsPlain) ? Workers.Ranges(threads, _records, leastRecords) : 1;
        return ranges == 1
            ? ChooseRange(chosen, 0, _records, cancellationToken)
            : ChooseRanges(chosen, threads, ranges, cancellationToken);
    }

    private int ChooseRanges(int[] chosen, int threads, int ranges, CancellationToken cancellationToken)
    {
        // Each range writes where its own numbers would be if all passed; then the gaps are closed.
        var counts = new int[ranges];
        Workers.Run(threads, ranges, (_, range) => counts[range] = ChooseRange(
            chosen, Workers.Start(_records, ranges, range), Workers.Start(_records, ranges, range + 1), cancellationToken));
        int count = counts[0];
        for (int range = 1; range < ranges; range++)
        {
            Array.Copy(chosen, Workers.Start(_records, ranges, range), chosen, count, counts[range]);
            count += counts[range];
        }

        return count;
    }

    // The numbers come to the range's own place.
    private int ChooseRange(int[] chosen, int from, int to, CancellationToken cancellationToken)
    {
        int end = from;
        bool[] holds = ArrayPool<bool>.Shared.Rent(FieldReader<T, bool>.Chunk);
        for (int start = from; start < to; start += FieldReader<T, bool>.Chunk)
        {
            cancellationToken.ThrowIfCancellationRequested();
            int count = 0;
            for (int record = start; record < Math.Min(to, start + FieldReader<T, bool>.Chunk); record++)
            {
                if (_lineages[record] != LineageRef.False)
                {
                    chosen[end + count++] = record;
                }
            }

            // Each condition only sees what the ones before it let pass.
            foreach (FieldReader<T, bool> condition in _conditions)
            {
                condition.Read(chosen, end, count, holds, cancellationToken);
                int kept = 0;
                for (int i = 0; i < count; i++)
                {
                    chosen[end + kept] = chosen[end + i];
                    kept += holds[i] ? 1 : 0;
                }

                count = kept;
            }

            end += count;
        }

        ArrayPool<bool>.Shared.Return(holds);
        return end - from;
    }
}
