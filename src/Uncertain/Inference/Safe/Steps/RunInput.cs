using Uncertain.Inference.Safe.Analysis;
using Uncertain.Worlds;

namespace Uncertain.Inference.Safe.Steps;

/// <summary>What a run reads, whatever its number type: encoders, sources made ready, and their rows split into parts.</summary>
internal sealed class RunInput : IDisposable
{
    private readonly Dictionary<Field, Encoder> _encoders = [];
    private readonly Dictionary<ScanStep, ScanReader> _readers = [];

    /// <summary>Makes all sources of a plan ready.</summary>
    public RunInput(SafeStep root, VariableTable table, RunControl control)
    {
        Table = table;
        Control = control;

        // Small ones first: a large one then finds most of its values known.
        List<ScanStep> scans = [.. root.All().OfType<ScanStep>()];
        scans.Sort((left, right) => left.Part.Source.RecordCount.CompareTo(right.Part.Source.RecordCount));
        foreach (ScanStep scan in scans)
        {
            _readers.Add(scan, ScanReader.Open(scan, this));
        }

        Split = SplitRows.TryCreate(root, this);
    }

    /// <summary>The chances: the world space's own, or what evidence makes of them.</summary>
    public VariableTable Table { get; }

    public RunControl Control { get; }

    /// <summary>The rows in parts; null if the run is not split.</summary>
    public SplitRows? Split { get; }

    /// <summary>The encoder of a variable, made on first use.</summary>
    public Encoder EncoderOf(Field variable, FieldReader reader)
    {
        if (!_encoders.TryGetValue(variable, out Encoder? encoder))
        {
            _encoders.Add(variable, encoder = reader.NewEncoder());
        }

        return encoder;
    }

    /// <summary>The encoders of variables that have been read.</summary>
    public Encoder[] EncodersOf(IReadOnlyList<Field> variables)
    {
        var result = new Encoder[variables.Count];
        for (int i = 0; i < result.Length; i++)
        {
            result[i] = _encoders[variables[i]];
        }

        return result;
    }

    public ScanReader ReaderOf(ScanStep scan) => _readers[scan];

    public void Dispose() => Split?.Dispose();
}
