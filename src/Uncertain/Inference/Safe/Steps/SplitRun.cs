using System.Collections.Concurrent;
using System.Numerics;
using Uncertain.Inference.Safe.Analysis;
using Uncertain.Inference.Safe.Codes;

namespace Uncertain.Inference.Safe.Steps;

/// <summary>
/// A run split by the codes of one variable of the answers. Rows that differ in it never meet, so each part is a run of its own, small
/// enough for the processor's cache, and parts run side by side. What does not depend on the variable is computed once for all.
/// </summary>
internal sealed class SplitRun<TNumber>
    where TNumber : struct, IAdditionOperators<TNumber, TNumber, TNumber>, IMultiplyOperators<TNumber, TNumber, TNumber>,
        IAdditiveIdentity<TNumber, TNumber>, IMultiplicativeIdentity<TNumber, TNumber>
{
    // A part's codes, chances and hash table then take about 1 MB.
    private const int RowsInPart = 32_768;
    private const int MostParts = 1024;

    private readonly Dictionary<SafeStep, CodeTable<TNumber>> _tables = [];
    private readonly Dictionary<ScanStep, ScanRows[]> _rows = [];
    private readonly ConcurrentDictionary<SafeStep, (IReadOnlyList<Field> Variables, JoinIndex Index)> _indexes = [];

    private SplitRun(int parts) => Parts = parts;

    public int Parts { get; }

    /// <summary>Splits a run, or gives null where that would not help.</summary>
    public static SplitRun<TNumber>? TryCreate(SafeStep root, SafeRun<TNumber> run)
    {
        List<SafeStep> steps = [root];
        for (int i = 0; i < steps.Count; i++)
        {
            steps.AddRange(steps[i].Inputs);
        }

        ScanStep largest = steps.OfType<ScanStep>().MaxBy(scan => scan.Part.Source.RecordCount)!;
        Field? variable = root.Variables.FirstOrDefault(largest.Variables.Contains);
        int parts = Math.Min(MostParts, largest.Part.Source.RecordCount / RowsInPart);
        if (variable is null || parts < 4 || steps.OfType<ChoiceStep>().Any())
        {
            return null;
        }

        var split = new SplitRun<TNumber>(parts);
        var scans = steps.OfType<ScanStep>().Where(scan => scan.Variables.Contains(variable))
            .Select(scan => (Scan: scan, Rows: scan.Read(run))).ToList();
        foreach ((ScanStep scan, ScanRows rows) in scans)
        {
            int column = scan.Variables.ToList().IndexOf(variable);
            split._rows.Add(scan, rows.Split(column, run.EncoderOf(variable).Count, parts, scan.ChancesOf(rows, run)));
        }

        split.ComputeShared(root, run);
        return split;
    }

    public CodeTable<TNumber>? TableOf(SafeStep step) => _tables.GetValueOrDefault(step);

    public ScanRows? RowsOf(ScanStep scan, int part) => _rows.TryGetValue(scan, out ScanRows[]? parts) ? parts[part] : null;

    public JoinIndex IndexOf(SafeStep step, IReadOnlyList<Field> variables, Func<JoinIndex> create)
    {
        // One step is joined by one other, on one set of variables; a second one would make its own index.
        (IReadOnlyList<Field> Variables, JoinIndex Index) entry = _indexes.GetOrAdd(step, _ => (variables, create()));
        return entry.Variables.SequenceEqual(variables) ? entry.Index : create();
    }

    private void ComputeShared(SafeStep step, SafeRun<TNumber> run)
    {
        if (!DependsOnParts(step))
        {
            _tables.TryAdd(step, step.Run(run));
            return;
        }

        foreach (SafeStep input in step.Inputs)
        {
            ComputeShared(input, run);
        }
    }

    private bool DependsOnParts(SafeStep step) =>
        (step is ScanStep scan && _rows.ContainsKey(scan)) || step.Inputs.Any(DependsOnParts);
}
