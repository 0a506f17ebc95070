namespace Uncertain.Inference.Safe.Analysis;

/// <summary>A conjunction of parts; variables that are not asked for are existentially quantified.</summary>
internal sealed class Scope
{
    public List<Part> Parts { get; } = [];

    public IEnumerable<SourcePart> Chancy => Parts.SelectMany(part => part.Chancy);
}
