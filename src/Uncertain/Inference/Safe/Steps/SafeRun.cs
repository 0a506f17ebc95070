using System.Numerics;
using Uncertain.Execution;
using Uncertain.Inference.Safe.Analysis;
using Uncertain.Inference.Safe.Codes;

namespace Uncertain.Inference.Safe.Steps;

/// <summary>One run of a safe plan in one number type.</summary>
internal sealed class SafeRun<TNumber>(
    ChanceReader<TNumber> chances, EvaluationOptions options, CancellationToken cancellationToken)
    where TNumber : struct, IAdditionOperators<TNumber, TNumber, TNumber>, IMultiplyOperators<TNumber, TNumber, TNumber>,
        IAdditiveIdentity<TNumber, TNumber>, IMultiplicativeIdentity<TNumber, TNumber>
{
    // A power of two: the clock is looked at every so many rows.
    private const int RowsBetweenChecks = 4096;

    private readonly Dictionary<Field, Encoder> _encoders = [];
    private readonly ProgressReporter _progress = new(options);
    private readonly long _start = options.Clock.GetTimestamp();

    public ChanceReader<TNumber> Chances { get; } = chances;

    /// <summary>Rows that steps have produced so far.</summary>
    public long Rows { get; private set; }

    public Encoder EncoderOf(Field variable)
    {
        if (!_encoders.TryGetValue(variable, out Encoder? encoder))
        {
            _encoders.Add(variable, encoder = Encoder.For(variable.Expression.Type));
        }

        return encoder;
    }

    /// <summary>For each variable a number that all its codes are smaller than, as far as they are known now.</summary>
    public int[] RangesOf(IEnumerable<Field> variables) => [.. variables.Select(variable => EncoderOf(variable).Count)];

    /// <summary>
    /// To be called for every row: looks at the token each time, since a caller's lambda may be slow, and at the deadline now and then.
    /// </summary>
    public void Tick(int row)
    {
        cancellationToken.ThrowIfCancellationRequested();
        if ((row & (RowsBetweenChecks - 1)) == 0)
        {
            Checkpoint();
        }
    }

    public void Checkpoint()
    {
        cancellationToken.ThrowIfCancellationRequested();
        if (options.Clock.GetElapsedTime(_start) > options.Deadline)
        {
            throw new EvaluationRefusedException(
                $"The safe plan did not end within the deadline of {options.Deadline}. Give it more time, or filter the sources first: "
                + "no faster exact evaluator exists for such a query.");
        }
    }

    /// <summary>Counts a step's rows and reports progress.</summary>
    public CodeTable<TNumber> Done(CodeTable<TNumber> table)
    {
        Checkpoint();
        Rows += table.Count;
        _progress.Report(EvaluationStage.Evaluating, Rows, null);
        return table;
    }
}
