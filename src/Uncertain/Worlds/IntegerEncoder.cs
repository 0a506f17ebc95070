using System.Runtime.CompilerServices;
using System.Linq.Expressions;
using Uncertain.Execution;

namespace Uncertain.Worlds;

/// <summary>
/// The encoder for 32-bit integers. Where the first values lie close together their code is the distance from the smallest one, which
/// needs no look-up; values outside that range get codes behind it.
/// </summary>
internal sealed class IntegerEncoder : Encoder
{
    // A range this many times wider than the number of values still costs less memory than a hash table of them.
    private const int Spread = 4;

    private readonly Dictionary<int, int> _others = [];
    private readonly List<int> _otherValues = [];
    private bool _hasRange;
    private int _low;
    private int _width;

    public override int Count => _width + _otherValues.Count;

    [MethodImpl(MethodImplOptions.AggressiveOptimization)]
    public override void Encode<TRow>(
        TRow[] rows, int[]? chosen, LambdaExpression field, bool dropNulls, int[] codes, CancellationToken cancellationToken)
    {
        var lambda = new Lambda<TRow, int>((Expression<Func<TRow, int>>)field, "a field");
        for (int start = 0; start < codes.Length; start += Chunk)
        {
            lambda.InvokeAll(rows, chosen, start, codes.AsSpan(start, Math.Min(Chunk, codes.Length - start)), cancellationToken);
        }

        if (!_hasRange && codes.Length > 0)
        {
            SetRange(codes);
        }

        for (int i = 0; i < codes.Length; i++)
        {
            uint distance = (uint)codes[i] - (uint)_low;
            codes[i] = distance < (uint)_width ? (int)distance : CodeOfOther(codes[i]);
        }
    }

    public override Expression Decode(Expression code) =>
        Expression.Call(Expression.Constant(this), ((Func<int, int>)Value).Method, code);

    private int Value(int code) => code < _width ? _low + code : _otherValues[code - _width];

    private void SetRange(int[] values)
    {
        _hasRange = true;
        int low = values.Min();
        long width = (long)values.Max() - low + 1;
        if (width <= ((long)values.Length * Spread) + 1024 && width <= Array.MaxLength)
        {
            (_low, _width) = (low, (int)width);
        }
    }

    private int CodeOfOther(int value)
    {
        if (!_others.TryGetValue(value, out int code))
        {
            code = Count;
            _others.Add(value, code);
            _otherValues.Add(value);
        }

        return code;
    }
}
