using System.Linq.Expressions;

namespace Uncertain.Planning.Calculus;

/// <summary>One place in a conjunction that a row must fill: a source, or a union of two conjunctions.</summary>
internal abstract class Atom(Type rowType, string name)
{
    /// <summary>The row, as expressions of the conjunction refer to it; no two atoms share one.</summary>
    public ParameterExpression Row { get; } = Expression.Parameter(rowType, name);
}
