using System.Linq.Expressions;
using System.Runtime.InteropServices;
using Uncertain.Execution;

namespace Uncertain.Inference.Safe.Codes;

/// <summary>The encoder for values of one type, by their default equality.</summary>
internal sealed class Encoder<TValue> : Encoder
{
    private readonly Dictionary<ValueTuple<TValue>, int> _codes = new(new KeyComparer<TValue>(null));
    private readonly List<TValue> _values = [];

    public override void Encode<TRow>(
        TRow[] rows, ReadOnlySpan<int> chosen, LambdaExpression field, bool dropNulls, Span<int> codes)
    {
        var lambda = new Lambda<TRow, TValue>((Expression<Func<TRow, TValue>>)field, "a field");
        for (int i = 0; i < chosen.Length; i++)
        {
            TValue value = lambda.Invoke(rows[chosen[i]]);
            codes[i] = value is null && dropNulls ? Dropped : CodeOf(value);
        }
    }

    public override Expression Decode(Expression code) =>
        Expression.Property(Expression.Constant(_values), "Item", code);

    private int CodeOf(TValue value)
    {
        ref int code = ref CollectionsMarshal.GetValueRefOrAddDefault(_codes, new(value), out bool exists);
        if (!exists)
        {
            code = _values.Count;
            _values.Add(value);
        }

        return code;
    }
}
