using Uncertain.Planning.Calculus;

namespace Uncertain.Inference.Safe.Analysis;

/// <summary>Rows that come out of at least one of two scopes.</summary>
internal sealed class UnionPart(UnionAtom atom, Scope left, Scope right, FieldTable table) : Part
{
    private HashSet<Field>? _variables;

    public UnionAtom Atom { get; } = atom;

    public Scope Left { get; } = left;

    public Scope Right { get; } = right;

    /// <summary>The fields of the union's rows that matter.</summary>
    public IEnumerable<Field> Fields => Atom.Fields.SelectMany(own => table.OfRow(own.Row));

    public override IReadOnlySet<Field> Variables => _variables ??= Fields.Select(candidate => candidate.Representative).ToHashSet();

    public override IEnumerable<SourcePart> Chancy => Left.Chancy.Concat(Right.Chancy);

    public override bool ProducesRows => true;
}
