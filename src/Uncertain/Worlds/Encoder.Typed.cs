namespace Uncertain.Worlds;

/// <summary>The encoder for values of one type, by their default equality.</summary>
internal abstract class Encoder<TValue> : Encoder
{
    public static Encoder<TValue> Create() => DirectEncoder<TValue>.Takes ? DirectEncoder<TValue>.Instance : new LearningEncoder<TValue>();

    /// <summary>The codes of some values.</summary>
    /// <param name="values">The values.</param>
    /// <param name="dropNulls">Whether a null gets <see cref="Encoder.Dropped"/>.</param>
    /// <param name="codes">Takes the codes; may be the same memory as the values.</param>
    public abstract void Encode(ReadOnlySpan<TValue> values, bool dropNulls, Span<int> codes);

    /// <summary>The value of a code.</summary>
    public abstract TValue ValueOf(int code);
}
