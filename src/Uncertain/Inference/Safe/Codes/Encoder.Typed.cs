using System.Linq.Expressions;
using System.Runtime.InteropServices;
using Uncertain.Execution;

namespace Uncertain.Inference.Safe.Codes;

#pragma warning disable CS8714 // Nulls never reach the dictionary: they have a code of their own.

/// <summary>The encoder for values of one type, by their default equality.</summary>
internal sealed class Encoder<TValue> : Encoder
{
    private readonly Dictionary<TValue, int> _codes = [];
    private readonly List<TValue> _values = [];
    private int _nullCode = Dropped;

    public override int Count => _values.Count;

    public override void Encode<TRow>(
        TRow[] rows, int[]? chosen, LambdaExpression field, bool dropNulls, int[] codes, Action<int> tick)
    {
        var lambda = new Lambda<TRow, TValue>((Expression<Func<TRow, TValue>>)field, "a field");
        for (int i = 0; i < codes.Length; i++)
        {
            tick(i);
            TValue value = lambda.Invoke(rows[chosen is null ? i : chosen[i]]);
            codes[i] = value is not null ? CodeOf(value) : dropNulls ? Dropped : NullCode();
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
