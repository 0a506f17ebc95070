using System.Numerics;
using Uncertain.Inference.Safe.Analysis;
using Uncertain.Inference.Safe.Codes;
using Uncertain.Numerics;
using Uncertain.Worlds;

namespace Uncertain.Inference.Safe.Steps;

/// <summary>
/// One run of a safe plan in one number type, or one part of it where the run is split by a variable of the answers.
/// </summary>
internal sealed class SafeRun<TNumber>
    where TNumber : struct, IAdditionOperators<TNumber, TNumber, TNumber>, IMultiplyOperators<TNumber, TNumber, TNumber>,
        IAdditiveIdentity<TNumber, TNumber>, IMultiplicativeIdentity<TNumber, TNumber>
{
    // A power of two: the clock is looked at every so many rows.
    private const int RowsBetweenChecks = 4096;

    private readonly RunControl _control;
    private readonly Dictionary<Field, Encoder> _encoders;
    private readonly SplitRun<TNumber>? _split;
    private readonly int _part;

    public SafeRun(ChanceReader<TNumber> chances, RunControl control)
    {
        Chances = chances;
        _control = control;
        _encoders = [];
    }

    private SafeRun(SafeRun<TNumber> whole, SplitRun<TNumber> split, int part)
    {
        Chances = whole.Chances;
        _control = whole._control;
        _encoders = whole._encoders;
        _split = split;
        _part = part;
    }

    public ChanceReader<TNumber> Chances { get; }

    public CancellationToken Cancellation => _control.Cancellation;

    /// <summary>The run of one part of a split; what it encodes has been encoded before.</summary>
    public SafeRun<TNumber> Part(SplitRun<TNumber> split, int part) => new(this, split, part);

    public Encoder EncoderOf(Field variable)
    {
        if (!_encoders.TryGetValue(variable, out Encoder? encoder))
        {
            _encoders.Add(variable, encoder = Encoder.For(variable.Expression.Type));
        }

        return encoder;
    }

    /// <summary>The result of a step that is the same for all parts, or null.</summary>
    public CodeTable<TNumber>? Shared(SafeStep step) => _split?.TableOf(step);

    /// <summary>The rows of a scan that belong to this part, or null if the run is not split.</summary>
    public ScanRows? RowsOf(ScanStep scan) => _split?.RowsOf(scan, _part);

    /// <summary>An index of a step's result; made once for all parts where the result is.</summary>
    public JoinIndex IndexOf(SafeStep step, CodeTable<TNumber> table, IReadOnlyList<Field> variables) =>
        _split is not null && _split.TableOf(step) is not null
            ? _split.IndexOf(step, variables, () => JoinIndex.Of(table, variables))
            : JoinIndex.Of(table, variables);

    /// <summary>Whether a step's result is the same for all parts.</summary>
    public bool IsShared(SafeStep step) => Shared(step) is not null;

    /// <summary>
    /// To be called for every row: looks at the token each time, since a caller's lambda may be slow, and at the deadline now and then.
    /// </summary>
    public void Tick(int row)
    {
        Cancellation.ThrowIfCancellationRequested();
        if ((row & (RowsBetweenChecks - 1)) == 0)
        {
            Checkpoint();
        }
    }

    public void Checkpoint() => _control.Checkpoint();

    /// <summary>Takes note of chances that were read, so that their products are known to stay in range or not.</summary>
    public void Observe(ReadOnlySpan<double> chances) => _control.Observe(chances);

    /// <summary>Counts a step's rows and reports progress.</summary>
    public CodeTable<TNumber> Done(CodeTable<TNumber> table)
    {
        _control.Done(table.Count);
        return table;
    }
}
