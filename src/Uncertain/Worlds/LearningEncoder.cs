using System.Runtime.InteropServices;

namespace Uncertain.Worlds;

#pragma warning disable CS8714 // Nulls never reach the dictionary: they have a code of their own.

/// <summary>The encoder for all other types: values are numbered from 0 in order of first appearance.</summary>
internal sealed class LearningEncoder<TValue>(LearningEncoder<TValue>? origin = null) : Encoder<TValue>
{
    private readonly Dictionary<TValue, int> _codes = [];
    private readonly List<TValue> _values = [];
    private readonly int _known = origin?.Count ?? 0;
    private int _nullCode = origin?._nullCode ?? Dropped;

    public override bool IsDirect => false;

    private int Count => _known + _values.Count;

    public override void Encode(ReadOnlySpan<TValue> values, bool dropNulls, Span<int> codes)
    {
        for (int i = 0; i < values.Length; i++)
        {
            TValue value = values[i];
            codes[i] = value is not null ? CodeOf(value) : dropNulls ? Dropped : NullCode();
        }
    }

    public override TValue ValueOf(int code) => _values[code];

    public override Encoder Fork() => new LearningEncoder<TValue>(this);

    public override void Absorb(Encoder fork, Span<int> codes)
    {
        var learnt = (LearningEncoder<TValue>)fork;
        int known = learnt._known;
        var codeOf = new int[learnt._values.Count];
        for (int i = 0; i < codeOf.Length; i++)
        {
            codeOf[i] = known + i == learnt._nullCode ? NullCode() : CodeOf(learnt._values[i]);
        }

        foreach (ref int code in codes)
        {
            if (code >= known)
            {
                code = codeOf[code - known];
            }
        }
    }

    private int CodeOf(TValue value)
    {
        if (origin is not null && origin._codes.TryGetValue(value, out int known))
        {
            return known;
        }

        ref int code = ref CollectionsMarshal.GetValueRefOrAddDefault(_codes, value, out bool exists);
        if (!exists)
        {
            code = Count;
            _values.Add(value);
        }

        return code;
    }

    private int NullCode()
    {
        if (_nullCode == Dropped)
        {
            _nullCode = Count;
            _values.Add(default!);
        }

        return _nullCode;
    }
}
