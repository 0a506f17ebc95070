using System.Numerics;
using Uncertain.Inference.Safe.Analysis;
using Uncertain.Inference.Safe.Codes;
using Uncertain.Worlds;

namespace Uncertain.Inference.Safe.Steps;

/// <summary>
/// One run of a safe plan in one number type, or one part of it where the run is split by a variable of the answers.
/// </summary>
internal sealed class SafeRun<TNumber>
    where TNumber : unmanaged, IAdditionOperators<TNumber, TNumber, TNumber>, IMultiplyOperators<TNumber, TNumber, TNumber>,
        IAdditiveIdentity<TNumber, TNumber>, IMultiplicativeIdentity<TNumber, TNumber>
{
    // A power of two: the clock is looked at every so many rows.
    private const int RowsBetweenChecks = 4096;

    private readonly SafeRun<TNumber> _whole;
    private readonly RunInput _input;
    private readonly int _part;

    // What is the same for all parts; null in a run that is not split.
    private readonly Dictionary<SafeStep, CodeTable<TNumber>>? _shared;
    private readonly Dictionary<SafeStep, JoinIndex>? _indexes;

    /// <summary>A whole run. If it will be split, computes what all parts share.</summary>
    public SafeRun(SafeStep root, RunInput input)
    {
        _whole = this;
        _input = input;
        Workspace = input.Workspace;
        if (input.Split is not null)
        {
            _shared = [];
            _indexes = [];
            ComputeShared(root);
        }
    }

    private SafeRun(SafeRun<TNumber> whole, int part, Workspace workspace)
    {
        _whole = whole;
        _input = whole._input;
        _shared = whole._shared;
        _indexes = whole._indexes;
        _part = part;
        Workspace = workspace;
    }

    /// <summary>The chances.</summary>
    public VariableTable Table => _input.Table;

    /// <summary>Memory of the run or part.</summary>
    public Workspace Workspace { get; }

    public RunControl Control => _input.Control;

    public CancellationToken Cancellation => Control.Cancellation;

    /// <summary>One part of a split run.</summary>
    public SafeRun<TNumber> Part(int part, Workspace workspace) => new(this, part, workspace);

    public Encoder[] EncodersOf(IReadOnlyList<Field> variables) => _input.EncodersOf(variables);

    /// <summary>The result of a step that is the same for all parts, or null.</summary>
    public CodeTable<TNumber>? Shared(SafeStep step) => _shared?.GetValueOrDefault(step);

    /// <summary>The rows of a scan, or those of them that belong to this part.</summary>
    public ScanRows RowsOf(ScanStep scan) => _input.Split is { } split && split.Splits(scan)
        ? split.Rows(scan, _part, Workspace)
        : _input.ReaderOf(scan).ReadAll(Workspace);

    /// <summary>An index of a step's result; made once for all parts where the result is.</summary>
    /// <remarks>One step is joined by one other, on one set of variables.</remarks>
    public JoinIndex IndexOf(SafeStep step, CodeTable<TNumber> table, IReadOnlyList<Field> variables)
    {
        if (!table.IsShared)
        {
            return JoinIndex.Of(table, variables, Workspace);
        }

        lock (_indexes!)
        {
            // Not in the part's workspace, which the next part writes over.
            return _indexes.TryGetValue(step, out JoinIndex? index)
                ? index
                : _indexes[step] = JoinIndex.Of(table, variables, _whole.Workspace);
        }
    }

    /// <summary>
    /// To be called for every row: looks at the token each time, since a caller's lambda may be slow, and at the deadline now and then.
    /// </summary>
    public void Tick(int row)
    {
        Cancellation.ThrowIfCancellationRequested();
        if ((row & (RowsBetweenChecks - 1)) == 0)
        {
            Control.Checkpoint();
        }
    }

    private void ComputeShared(SafeStep step)
    {
        if (!_input.Split!.Splits(step))
        {
            _shared!.Add(step, step.Run(this) with { IsShared = true });
            return;
        }

        foreach (SafeStep input in step.Inputs)
        {
            ComputeShared(input);
        }
    }
}
