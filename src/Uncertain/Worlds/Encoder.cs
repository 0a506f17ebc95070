using System.Linq.Expressions;

namespace Uncertain.Worlds;

/// <summary>
/// Gives each distinct value of a variable a small number from 0, so that joins and groupings work on integers whatever the type.
/// </summary>
internal abstract class Encoder
{
    /// <summary>Rows whose values are computed before they are encoded.</summary>
    protected const int Chunk = 4096;

    /// <summary>The code of a null that must not join.</summary>
    public const int Dropped = -1;

    /// <summary>All codes are smaller than this.</summary>
    public abstract int Count { get; }

    public static Encoder For(Type type) => type == typeof(int)
        ? new IntegerEncoder()
        : (Encoder)Activator.CreateInstance(typeof(Encoder<>).MakeGenericType(type))!;

    /// <summary>Codes of one field for chosen rows of a source, or for all rows if <paramref name="chosen"/> is null.</summary>
    public abstract void Encode<TRow>(TRow[] rows, int[]? chosen, LambdaExpression field, bool dropNulls, int[] codes, CancellationToken cancellationToken);

    /// <summary>An expression that gives the value back for a code.</summary>
    public abstract Expression Decode(Expression code);
}
