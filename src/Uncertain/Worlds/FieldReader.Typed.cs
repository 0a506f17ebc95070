using System.Collections.Concurrent;
using System.Linq.Expressions;
using System.Reflection;
using System.Runtime.CompilerServices;
using Uncertain.Execution;
using Uncertain.Planning.Calculus;

namespace Uncertain.Worlds;

/// <summary>
/// Reads a field into an array of its type. A plain field is compiled into one loop over the records; another one is called record by
/// record.
/// </summary>
internal sealed class FieldReader<TRow, TValue>(TRow[] records, Expression<Func<TRow, TValue>> field, string operatorName) : FieldReader
{
    /// <summary>At most so many values are read at a time.</summary>
    public const int Chunk = 2048;

    // For fewer records the delegate does, which is compiled once for each shape of lambda.
    private const int LeastRecords = 4096;

    // Loops that read one member, which most fields do: the same for all sources, so a query that is built anew compiles nothing.
    private static readonly ConcurrentDictionary<MemberInfo, Loop> s_memberLoops = new();

    [ThreadStatic]
    private static TValue[]? t_values;

    private readonly Lambda<TRow, TValue> _lambda = new(field, operatorName);
    private Loop? _loop;

    private delegate void Loop(TRow[] records, int[]? chosen, int start, int count, TValue[] values);

    public override bool IsPlain { get; } = PlainExpression.Is(field.Body);

    public override Encoder NewEncoder() => Encoder<TValue>.Create();

    public override void ReadCodes(
        Encoder encoder, bool dropNulls, int[]? chosen, int start, Span<int> codes, CancellationToken cancellationToken)
    {
        var typed = (Encoder<TValue>)encoder;

        // Taken out while in use: a field may run a query of its own.
        TValue[] values = Interlocked.Exchange(ref t_values, null) ?? new TValue[Chunk];
        for (int done = 0; done < codes.Length; done += Chunk)
        {
            int count = Math.Min(Chunk, codes.Length - done);
            Read(chosen, start + done, count, values, cancellationToken);
            typed.Encode(values.AsSpan(0, count), dropNulls, codes.Slice(done, count));
        }

        if (RuntimeHelpers.IsReferenceOrContainsReferences<TValue>())
        {
            // The array outlives the run; what the caller gave must not.
            Array.Clear(values, 0, Math.Min(Chunk, codes.Length));
        }

        t_values = values;
    }

    /// <summary>Reads the values of neighbouring rows.</summary>
    public void Read(int[]? chosen, int start, int count, TValue[] values, CancellationToken cancellationToken)
    {
        if (!IsPlain || records.Length < LeastRecords)
        {
            _lambda.InvokeAll(records, chosen, start, values.AsSpan(0, count), cancellationToken);
            return;
        }

        cancellationToken.ThrowIfCancellationRequested();
        try
        {
            (_loop ??= CompileLoop())(records, chosen, start, count, values);
        }
        catch (Exception exception) when (LambdaFailure.IsCallers(exception))
        {
            // Once more, one by one, to name the record.
            _lambda.InvokeAll(records, chosen, start, values.AsSpan(0, count), cancellationToken);
            throw;
        }
    }

    private Loop CompileLoop() => field.Body is MemberExpression { Expression: ParameterExpression } member
        ? s_memberLoops.GetOrAdd(member.Member, _ => Compile(field))
        : Compile(field);

    // for (i = 0; i < count; i++) values[i] = field(records[chosen is null ? start + i : chosen[start + i]])
    private static Loop Compile(Expression<Func<TRow, TValue>> field)
    {
        ParameterExpression rows = Expression.Parameter(typeof(TRow[]));
        ParameterExpression chosen = Expression.Parameter(typeof(int[]));
        ParameterExpression start = Expression.Parameter(typeof(int));
        ParameterExpression count = Expression.Parameter(typeof(int));
        ParameterExpression values = Expression.Parameter(typeof(TValue[]));
        ParameterExpression i = Expression.Variable(typeof(int));
        Expression place = Expression.Add(start, i);
        Expression all = Over(place);
        Expression some = Over(Expression.ArrayIndex(chosen, place));
        return Expression.Lambda<Loop>(
            Expression.Block(
                [i],
                Expression.IfThenElse(Expression.ReferenceEqual(chosen, Expression.Constant(null, typeof(int[]))), all, some)),
            rows, chosen, start, count, values).Compile();

        Expression Over(Expression record)
        {
            LabelTarget end = Expression.Label();
            Expression value = Substitution.Apply(field, Expression.ArrayIndex(rows, record));
            return Expression.Block(
                Expression.Assign(i, Expression.Constant(0)),
                Expression.Loop(
                    Expression.IfThenElse(
                        Expression.LessThan(i, count),
                        Expression.Block(
                            Expression.Assign(Expression.ArrayAccess(values, i), value),
                            Expression.PreIncrementAssign(i)),
                        Expression.Break(end)),
                    end));
        }
    }
}
