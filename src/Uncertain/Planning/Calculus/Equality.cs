using System.Linq.Expressions;

namespace Uncertain.Planning.Calculus;

/// <summary>Two expressions have equal values by the default comparer of their type.</summary>
/// <param name="Left">One side.</param>
/// <param name="Right">The other side, of the same type.</param>
/// <param name="NullsMatch">Whether two nulls are equal; join keys that are null never match.</param>
internal sealed record Equality(Expression Left, Expression Right, bool NullsMatch);
