using System.Globalization;

namespace Uncertain.ReferenceCheck.Lineages;

/// <summary>
/// 'The values of the present records add up to something from least to most', and, if asked, 'exactly so many are present'.
/// The state is what is still missing.
/// </summary>
/// <param name="records">For each record its exclusive values, each with its lineage.</param>
/// <param name="least">Smallest sum.</param>
/// <param name="most">Largest sum.</param>
/// <param name="count">Number of present records; null for any.</param>
internal sealed class SumSweep(
    IReadOnlyList<IReadOnlyList<(long Value, Lineage Lineage)>> records, long least, long most, int? count = null) : StateSweep
{
    // What the records from each one on may add at least and at most.
    private readonly (long Least, long Most)[] _rest = Rests(records);

    protected override int StepCount => records.Count;

    protected override string Start => Judge(0, least, most, count ?? 0);

    protected override IReadOnlyList<Lineage> Ways(int step) =>
        [.. records[step].Select(value => value.Lineage), !Lineage.Any([.. records[step].Select(value => value.Lineage)])];

    protected override string Next(int step, string state, int way)
    {
        string[] parts = state.Split(' ');
        (long from, long to, int missing) = (Number(parts[0]), Number(parts[1]), (int)Number(parts[2]));
        return way == records[step].Count
            ? Judge(step + 1, from, to, missing)
            : Judge(step + 1, from - records[step][way].Value, to - records[step][way].Value, missing - (count is null ? 0 : 1));
    }

    private static long Number(string text) => long.Parse(text, CultureInfo.InvariantCulture);

    private static (long Least, long Most)[] Rests(IReadOnlyList<IReadOnlyList<(long Value, Lineage Lineage)>> records)
    {
        var rests = new (long Least, long Most)[records.Count + 1];
        for (int i = records.Count - 1; i >= 0; i--)
        {
            IEnumerable<long> values = records[i].Select(value => value.Value).Append(0);
            rests[i] = (rests[i + 1].Least + values.Min(), rests[i + 1].Most + values.Max());
        }

        return rests;
    }

    private string Judge(int step, long from, long to, int missing)
    {
        (long restLeast, long restMost) = _rest[step];
        if (restMost < from || restLeast > to || missing < 0 || missing > records.Count - step)
        {
            return No;
        }

        return restLeast >= from && restMost <= to && (count is null || step == records.Count)
            ? Yes
            : string.Create(CultureInfo.InvariantCulture, $"{from} {to} {missing}");
    }
}
