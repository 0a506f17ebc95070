namespace Uncertain.Inference.Safe.Analysis;

/// <summary>No row of a scope is there with the same bound variables.</summary>
internal sealed class AbsencePart(Scope of, IReadOnlyList<(Field Outer, Field Inner)> binding) : Part
{
    private HashSet<Field>? _variables;

    public Scope Of { get; } = of;

    /// <summary>The fields compared: of the rows that are kept, and of those that must be absent.</summary>
    public IReadOnlyList<(Field Outer, Field Inner)> Binding { get; } = binding;

    public override IReadOnlySet<Field> Variables => _variables ??= Binding.Select(pair => pair.Outer.Representative).ToHashSet();

    public override IEnumerable<SourcePart> Chancy => Of.Chancy;

    public override bool ProducesRows => false;
}
