using Uncertain.Inference.Safe.Analysis;
using Uncertain.Inference.Safe.Codes;
using Uncertain.Worlds;

namespace Uncertain.Inference.Safe.Steps;

/// <summary>What a run reads, whatever its number type: encoders, sources made ready, and their rows split into parts.</summary>
internal sealed class RunInput : IDisposable
{
    private readonly Encoder?[] _encoders;
    private readonly ScanReader[] _readers;

    /// <summary>Makes all sources of a plan ready.</summary>
    public RunInput(SafePlan plan, VariableTable table, RunControl control)
    {
        Table = table;
        Control = control;
        Workspace = Workspace.Take(control);
        _encoders = new Encoder?[plan.FieldCount];
        _readers = new ScanReader[plan.Scans.Length];
        for (int i = 0; i < _readers.Length; i++)
        {
            _readers[i] = ScanReader.Open(plan.Scans[i], this);
        }

        Split = SplitRows.TryCreate(plan, this);
    }

    /// <summary>The chances: the world space's own, or what evidence makes of them.</summary>
    public VariableTable Table { get; }

    public RunControl Control { get; }

    /// <summary>Memory for what all parts of the run read.</summary>
    public Workspace Workspace { get; }

    /// <summary>The rows in parts; null if the run is not split.</summary>
    public SplitRows? Split { get; }

    /// <summary>The encoder of a variable, made on first use.</summary>
    public Encoder EncoderOf(Field variable, FieldReader reader) => _encoders[variable.Number] ??= reader.NewEncoder();

    /// <summary>The encoders of variables that have been read.</summary>
    public Encoder[] EncodersOf(IReadOnlyList<Field> variables)
    {
        var result = new Encoder[variables.Count];
        for (int i = 0; i < result.Length; i++)
        {
            result[i] = _encoders[variables[i].Number]!;
        }

        return result;
    }

    public ScanReader ReaderOf(ScanStep scan) => _readers[scan.Number];

    public void Dispose()
    {
        Split?.Dispose();
        Workspace.Return();
    }
}
