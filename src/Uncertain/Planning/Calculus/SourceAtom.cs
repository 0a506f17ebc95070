using System.Linq.Expressions;
using Uncertain.Worlds;

namespace Uncertain.Planning.Calculus;

/// <summary>A use of a source.</summary>
internal sealed class SourceAtom(ISource source, Type rowType) : Atom
{
    public ISource Source { get; } = source;

    /// <summary>The row, as expressions of the conjunction refer to it; no two atoms share one.</summary>
    public ParameterExpression Row { get; } = Expression.Parameter(rowType, source.Name);
}
