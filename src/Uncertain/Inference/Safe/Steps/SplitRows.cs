using Uncertain.Execution;
using Uncertain.Inference.Safe.Analysis;
using Uncertain.Inference.Safe.Codes;

namespace Uncertain.Inference.Safe.Steps;

/// <summary>
/// The rows of a run split by the codes of one variable of the answers. Rows that differ in it never meet, so each part is a run of its
/// own, small enough for the processor's cache, and parts run side by side. What does not depend on the variable is computed once for
/// all.
/// </summary>
internal sealed class SplitRows : IDisposable
{
    private const int MostParts = 1024;
    private const int LeastParts = 4;
    private const int SampleSize = 2048;

    private readonly Dictionary<ScanStep, PartRows> _rows = [];

    private SplitRows(Field variable, int parts)
    {
        Variable = variable;
        Parts = parts;
    }

    public Field Variable { get; }

    public int Parts { get; }

    /// <summary>Splits the rows of a run, or gives null where that would not help.</summary>
    public static SplitRows? TryCreate(SafePlan plan, RunInput input)
    {
        ScanStep largest = plan.Scans[0];
        foreach (ScanStep scan in plan.Scans)
        {
            largest = input.ReaderOf(scan).Count > input.ReaderOf(largest).Count ? scan : largest;
        }

        ScanReader reader = input.ReaderOf(largest);
        int parts = Math.Min(MostParts, reader.Count / input.Control.RowsInPart);
        if (parts < LeastParts
            || plan.Root.Variables.FirstOrDefault(largest.Variables.Contains) is not { } variable
            || plan.Root.All().OfType<ChoiceStep>().Any())
        {
            return null;
        }

        // Rows at equal distances: the same parts for any number of threads.
        var sample = new int[SampleSize];
        int column = largest.ColumnOf(variable);
        for (int i = 0; i < sample.Length; i++)
        {
            reader.ReadColumn(column, Workers.Start(reader.Count, sample.Length, i), sample.AsSpan(i, 1));
        }

        var split = new SplitRows(variable, parts);
        PartOf partOf = PartOf.Sample(sample, parts);
        foreach (ScanStep scan in plan.Scans.Where(scan => scan.Variables.Contains(variable)))
        {
            split._rows.Add(scan, new PartRows(scan, input.ReaderOf(scan), variable, partOf, parts, input.Control));
        }

        return split;
    }

    /// <summary>Whether a step's result differs from part to part.</summary>
    public bool Splits(SafeStep step) => (step is ScanStep scan && _rows.ContainsKey(scan)) || step.Inputs.Any(Splits);

    /// <summary>The rows of a scan that belong to a part.</summary>
    public ScanRows Rows(ScanStep scan, int part, Workspace workspace) => _rows[scan].Rows(part, workspace);

    public void Dispose()
    {
        foreach (PartRows rows in _rows.Values)
        {
            rows.Dispose();
        }
    }
}
