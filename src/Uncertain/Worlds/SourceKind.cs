namespace Uncertain.Worlds;

/// <summary>How the records of a source depend on each other.</summary>
internal enum SourceKind
{
    /// <summary>Every record is there in every world.</summary>
    Certain,

    /// <summary>Every record has a variable of its own.</summary>
    Independent,

    /// <summary>Records of one group exclude each other; groups are independent.</summary>
    Alternatives,

    /// <summary>Records have lineages of the caller's, over variables that others may share.</summary>
    Formulas,
}
