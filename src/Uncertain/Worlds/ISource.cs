using System.Linq.Expressions;
using Uncertain.Lineages;

namespace Uncertain.Worlds;

/// <summary>What planning and safe plans need to know of a source, whatever its record type.</summary>
internal interface ISource
{
    string Name { get; }

    SourceKind Kind { get; }

    /// <summary>The group of exclusive alternatives, as a lambda on a record; null for other kinds.</summary>
    LambdaExpression? Group { get; }

    /// <summary>The declared key, as a lambda on a record; null if none.</summary>
    LambdaExpression? Key { get; }

    int RecordCount { get; }

    /// <summary>The slot of record 0, where record i has slot FirstSlot + i; else -1.</summary>
    int FirstSlot { get; }

    /// <summary>A reader for a field, to be held as long as the plan that uses it.</summary>
    FieldReader ReaderOf(LambdaExpression field);

    /// <summary>A filter on records, to be held as long as the plan that uses it.</summary>
    RecordFilter FilterOf(IReadOnlyList<LambdaExpression> conditions);

    /// <summary>A record's lineage; in sources without given lineages it is true or a positive literal.</summary>
    LineageRef LineageOf(int record);

    /// <summary>Chances of records of a source that is certain or independent.</summary>
    /// <param name="table">The chances: the world space's own, or what evidence makes of them.</param>
    /// <param name="chosen">The record of each row; null where row i is record i.</param>
    /// <param name="start">The first row.</param>
    /// <param name="chances">Takes the chances; its length says how many rows.</param>
    void ReadChances(VariableTable table, int[]? chosen, int start, Span<double> chances);
}
