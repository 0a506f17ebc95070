namespace Uncertain.Tests.Queries.Certain;

/// <summary>'==' takes 0 and 360 degrees for the same; as a key they differ.</summary>
#pragma warning disable CS0660, CS0661, CA2231 // That the operator and Equals differ is the point.
internal readonly struct Degrees(int value)
{
    public int Value { get; } = value;

    public static bool operator ==(Degrees left, Degrees right) => left.Value % 360 == right.Value % 360;

    public static bool operator !=(Degrees left, Degrees right) => !(left == right);
}
