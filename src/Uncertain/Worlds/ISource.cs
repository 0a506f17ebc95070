using System.Linq.Expressions;
using Uncertain.Lineages;

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

    int RecordCount { get; }

    /// <summary>The records that are in some world and satisfy all filters, by number; null for all records.</summary>
    int[]? Choose(IReadOnlyList<LambdaExpression> filters, CancellationToken cancellationToken);

    /// <summary>The slot of record 0, where record i has slot FirstSlot + i; else -1.</summary>
    int FirstSlot { get; }

    /// <summary>Codes of a field for chosen records.</summary>
    void Encode(Encoder encoder, LambdaExpression field, int[]? chosen, bool dropNulls, int[] codes, CancellationToken cancellationToken);

    /// <summary>A record's lineage; in sources without given lineages it is true or a positive literal.</summary>
    LineageRef LineageOf(int record);
}
