namespace Uncertain.Execution.Lambdas;

/// <summary>One fact about a lambda's shape: a node's kind, a count or flags, and the type or member that goes with them.</summary>
/// <param name="Number">Kind, count, flags or place of a parameter; the place in the sequence says which.</param>
/// <param name="Member">A type, constructor, method, property or field; or null.</param>
internal readonly record struct ShapeToken(int Number, System.Reflection.MemberInfo? Member);
