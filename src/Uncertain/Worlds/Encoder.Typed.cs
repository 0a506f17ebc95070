using System.Linq.Expressions;
using System.Runtime.InteropServices;
using Uncertain.Execution;

namespace Uncertain.Worlds;

#pragma warning disable CS8714 // Nulls never reach the dictionary: they have a code of their own.

/// <summary>The encoder for values of one type, by their default equality.</summary>
internal sealed class Encoder<TValue> : Encoder
{
    private readonly Dictionary<TValue, int> _codes = [];
    private readonly List<TValue> _values = [];
    private int _nullCode = Dropped;

    public override int Count => _values.Count;

    public override void Encode<TRow>(
        TRow[] rows, int[]? chosen, LambdaExpression field, bool dropNulls, int[] codes, CancellationToken cancellationToken)
    {
        var lambda = new Lambda<TRow, TValue>((Expression<Func<TRow, TValue>>)field, "a field");
        var values = new TValue[Math.Min(Chunk, codes.Length)];
        for (int start = 0; start < codes.Length; start += Chunk)
        {
            Span<TValue> chunk = values.AsSpan(0, Math.Min(Chunk, codes.Length - start));
            lambda.InvokeAll(rows, chosen, start, chunk, cancellationToken);
            for (int i = 0; i < chunk.Length; i++)
            {
                codes[start + i] = chunk[i] is not null ? CodeOf(chunk[i]) : dropNulls ? Dropped : NullCode();
            }
        }
    }

    public override Expression Decode(Expression code) =>
        Expression.Property(Expression.Constant(_values), "Item", code);

    private int CodeOf(TValue value)
    {
        ref int code = ref CollectionsMarshal.GetValueRefOrAddDefault(_codes, value, out bool exists);
        if (!exists)
        {
            code = _values.Count;
            _values.Add(value);
        }

        return code;
    }

    private int NullCode()
    {
        if (_nullCode == Dropped)
        {
            _nullCode = _values.Count;
            _values.Add(default!);
        }

        return _nullCode;
    }
}
