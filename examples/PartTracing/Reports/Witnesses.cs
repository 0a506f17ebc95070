using System.Collections.Immutable;
using PartTracing.Queries;
using Uncertain;

namespace PartTracing.Reports;

/// <summary>Finds, in an answer's lineage, the readings that most probably make it true, and names them.</summary>
internal sealed class Witnesses
{
    private readonly Dictionary<Lineage, (int Order, string Slip, string Text)> _readings = [];

    public Witnesses(Archive archive)
    {
        // A source's record has its own literal as lineage, so the sources tell which reading a literal stands for.
        Add(archive.CardLots, r => (r.SlipId, r.Lot));
        Add(archive.CardDepots, r => (r.SlipId, r.Depot));
        Add(archive.CardVessels, r => (r.SlipId, r.Vessel));
        Add(archive.NoteLots, r => (r.SlipId, r.Lot));
        Add(archive.NoteDepots, r => (r.SlipId, r.Depot));
    }

    /// <summary>
    /// The derivation with the greatest chance to be right in a world where the answer holds, for example
    /// <c>0.996 CA00512 + NA00031: DU-M4232, Ulvsund</c>.
    /// </summary>
    public string StrongestOf(Finding finding)
    {
        Lineage answer = finding.Lineage();
        Lineage[] derivations = Derivations(answer);
        if (derivations.Length == 0)
        {
            return answer.Kind == LineageKind.True ? "certain" : "none";
        }

        (Lineage strongest, double chance) = derivations
            .Select(derivation => (derivation, Chance: (derivation & answer).Evaluate().Value))
            .MaxBy(pair => pair.Chance);
        var readings = LiteralsOf(strongest).Select(literal => _readings[literal]).Order().ToList();
        return $"{Figures.Of(chance)} {string.Join(" + ", readings.Select(r => r.Slip).Distinct())}: "
            + string.Join(", ", readings.Select(r => r.Text).Distinct().Where(text => text != finding.Value));
    }

    private void Add<T>(UncertainSet<T> source, Func<T, (string, string)> describe)
    {
        foreach (Record<T> record in source.Derive())
        {
            (string slip, string text) = describe(record.Value);
            _readings[record.Lineage] = (_readings.Count, slip, text);
        }
    }

    /// <summary>The ways to make a lineage true, by the readings that must be right; what must not be right is left out.</summary>
    private static Lineage[] Derivations(Lineage lineage) => lineage.Kind switch
    {
        LineageKind.Literal => [lineage],
        LineageKind.Disjunction => [.. lineage.Operands.SelectMany(Derivations)],
        LineageKind.Conjunction => lineage.Operands
            .Select(Derivations)
            .Where(ways => ways.Length > 0)
            .DefaultIfEmpty([])
            .Aggregate((some, others) => [.. from one in some from other in others select one & other]),
        _ => [],
    };

    private static ImmutableArray<Lineage> LiteralsOf(Lineage derivation) =>
        derivation.Kind == LineageKind.Literal ? [derivation] : derivation.Operands;
}
