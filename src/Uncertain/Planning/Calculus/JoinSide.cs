using System.Linq.Expressions;

namespace Uncertain.Planning.Calculus;

/// <summary>One side of a product that is to run as a join.</summary>
/// <param name="Key">The key of an element.</param>
/// <param name="Filter">The condition that an element must satisfy before its key is computed; null if none.</param>
internal sealed record JoinSide(LambdaExpression Key, LambdaExpression? Filter);
