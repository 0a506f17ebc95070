using System.Linq.Expressions;

namespace Uncertain.Worlds;

/// <summary>Reads one field of a source's records; compiled once, may be held and used by several runs at a time.</summary>
internal abstract class FieldReader
{
    /// <summary>Whether several threads may read at once: the field runs none of the caller's code.</summary>
    public abstract bool IsPlain { get; }

    /// <summary>A reader for <paramref name="field"/>, a lambda on a record.</summary>
    /// <param name="records">The source's records.</param>
    /// <param name="field">The field.</param>
    /// <param name="operatorName">Whose lambda it is, for messages.</param>
    public static FieldReader Of<TRow>(TRow[] records, LambdaExpression field, string operatorName) =>
        (FieldReader)Activator.CreateInstance(
            typeof(FieldReader<,>).MakeGenericType(typeof(TRow), field.ReturnType), records, field, operatorName)!;

    /// <summary>An encoder for the field's values.</summary>
    public abstract Encoder NewEncoder();

    /// <summary>Codes of the field for neighbouring rows.</summary>
    /// <param name="encoder">Of the field's type.</param>
    /// <param name="dropNulls">Whether a null gets <see cref="Encoder.Dropped"/>.</param>
    /// <param name="chosen">The record of each row; null where row i is record i.</param>
    /// <param name="start">The first row.</param>
    /// <param name="codes">Takes the codes; its length says how many rows.</param>
    /// <param name="cancellationToken">Looked at for each record where the caller's code may be slow.</param>
    public abstract void ReadCodes(
        Encoder encoder, bool dropNulls, int[]? chosen, int start, Span<int> codes, CancellationToken cancellationToken);
}
