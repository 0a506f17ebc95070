using Uncertain.Inference.Sampling;
using Uncertain.Lineages;

namespace Uncertain.Inference.Posteriors;

/// <summary>
/// Lineages given evidence as lineages without: in a world space of its own, where chances are those given what is known of single
/// variables, known slots are gone, and what depends on a part of the evidence is asked together with it.
/// </summary>
internal sealed class ConditionedFormulas
{
    private readonly Findings _findings;
    private readonly LineageArena _arena;
    private readonly Dictionary<LineageArena, LineageImport> _imports = [];
    private readonly HashSet<EvidencePart> _touched = [];

    public ConditionedFormulas(Findings findings)
    {
        _findings = findings;
        Space = new WorldSpace(findings.OpenChances, findings.Worlds.Names);
        _arena = Space.Arena;
    }

    public WorldSpace Space { get; }

    /// <summary>The parts of the evidence that any formula so far depends on.</summary>
    public IReadOnlyCollection<EvidencePart> Touched => _touched;

    /// <summary>
    /// The formula whose probability is asked; or, where it depends on evidence over several variables, that formula and the evidence,
    /// and the evidence without the formula.
    /// </summary>
    public (LineageRef With, LineageRef? Without) Of(LineageArena arena, LineageRef lineage)
    {
        LineageRef formula = Take(arena, lineage, _findings.Known);
        if (_findings.Parts.Count == 0 || formula.IsConstant)
        {
            return (formula, null);
        }

        var cone = new Cone(_arena);
        cone.Add(formula);
        EvidencePart[] parts = PartsOf(cone);
        if (parts.Length == 0)
        {
            return (formula, null);
        }

        _touched.UnionWith(parts);
        formula = Apart.From(_arena, formula, cone, variable => _findings.PartOf(variable) is not null);
        LineageRef evidence = _arena.And([.. parts.Select(part => Take(part.Arena, part.Formula, null))]);
        return (_arena.And(formula, evidence), _arena.And(!formula, evidence));
    }

    private EvidencePart[] PartsOf(Cone cone) =>
    [
        .. cone.Slots.Select(slot => _findings.PartOf(Space.Variables.VariableOf(slot))).OfType<EvidencePart>().Distinct()
            .OrderBy(part => part.Variables[0]),
    ];

    private LineageRef Take(LineageArena from, LineageRef formula, IReadOnlyDictionary<int, LineageRef>? known)
    {
        if (!_imports.TryGetValue(from, out LineageImport? import))
        {
            _imports.Add(from, import = new LineageImport(from, _arena, known));
        }

        return import.Copy(formula);
    }
}
