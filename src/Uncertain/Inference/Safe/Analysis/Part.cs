namespace Uncertain.Inference.Safe.Analysis;

/// <summary>One conjunct of a scope, in terms of its variables.</summary>
internal abstract class Part
{
    /// <summary>The variables (representatives) that the part talks about.</summary>
    public abstract IReadOnlySet<Field> Variables { get; }

    /// <summary>The uses of sources with chances inside the part.</summary>
    public abstract IEnumerable<SourcePart> Chancy { get; }

    /// <summary>Whether the part can produce rows; conditions and absences only filter those of others.</summary>
    public abstract bool ProducesRows { get; }
}
