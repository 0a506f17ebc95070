using System.Linq.Expressions;

namespace Uncertain.Worlds;

/// <summary>What planning needs to know of a source, whatever its record type.</summary>
internal interface ISource
{
    string Name { get; }

    SourceKind Kind { get; }

    /// <summary>The group of exclusive alternatives, as a lambda on a record; null for other kinds.</summary>
    LambdaExpression? Group { get; }

    /// <summary>The declared key, as a lambda on a record; null if none.</summary>
    LambdaExpression? Key { get; }
}
