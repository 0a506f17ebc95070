using System.Linq.Expressions;

namespace Uncertain.Inference.Safe.Codes;

/// <summary>
/// Gives each distinct value of a variable a dense number from 0, so that joins and groupings work on integers whatever the type.
/// </summary>
internal abstract class Encoder
{
    /// <summary>The code of a null that must not join.</summary>
    public const int Dropped = -1;

    public static Encoder For(Type type) => (Encoder)Activator.CreateInstance(typeof(Encoder<>).MakeGenericType(type))!;

    /// <summary>Codes of one field for the chosen rows of a source.</summary>
    public abstract void Encode<TRow>(TRow[] rows, ReadOnlySpan<int> chosen, LambdaExpression field, bool dropNulls, Span<int> codes);

    /// <summary>An expression that gives the value back for a code.</summary>
    public abstract Expression Decode(Expression code);
}
