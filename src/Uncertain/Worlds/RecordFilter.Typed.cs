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

    public override int[]? Choose(int threads, int leastRecords, CancellationToken cancellationToken)
    {
        if (_conditions.Length == 0 && _lineages.AllPossible)
        {
            return null;
        }

        int ranges = Array.TrueForAll(_conditions, condition => condition.IsPlain) ? Workers.Ranges(threads, _records, leastRecords) : 1;
        var chosen = new List<int>[ranges];
        Workers.Run(threads, ranges, (_, range) => chosen[range] = ChooseRange(
            Workers.Start(_records, ranges, range), Workers.Start(_records, ranges, range + 1), cancellationToken));
        return [.. chosen.SelectMany(part => part)];
    }

    private List<int> ChooseRange(int from, int to, CancellationToken cancellationToken)
    {
        var result = new List<int>();
        int[] left = new int[Math.Min(to - from, FieldReader<T, bool>.Chunk)];
        bool[] holds = new bool[left.Length];
        for (int start = from; start < to; start += left.Length)
        {
            cancellationToken.ThrowIfCancellationRequested();
            int count = 0;
            for (int record = start; record < Math.Min(to, start + left.Length); record++)
            {
                if (_lineages[record] != LineageRef.False)
                {
                    left[count++] = record;
                }
            }

            // Each condition only sees what the ones before it let pass.
            foreach (FieldReader<T, bool> condition in _conditions)
            {
                condition.Read(left, 0, count, holds, cancellationToken);
                int kept = 0;
                for (int i = 0; i < count; i++)
                {
                    left[kept] = left[i];
                    kept += holds[i] ? 1 : 0;
                }

                count = kept;
            }

            result.AddRange(left.AsSpan(0, count));
        }

        return result;
    }
}
