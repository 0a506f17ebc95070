using Uncertain.Tests.Oracles;
using Uncertain.Tests.Queries.Rows;

namespace Uncertain.Tests.Queries.Cases;

/// <summary>One piece of evidence: a formula over the model's variables, or one of the query's answers.</summary>
/// <param name="Formula">The formula; null for an answer.</param>
/// <param name="Answer">The number of the answer among those that the query derives, modulo their number.</param>
/// <param name="IsRefuted">Whether the opposite was found.</param>
public sealed record EvidencePiece(Formula? Formula, int Answer, bool IsRefuted)
{
    /// <summary>In which worlds the piece holds.</summary>
    public bool[] Holds(Expectation expected, IBuiltQuery built)
    {
        bool[]? inWorld = null;
        if (Formula is null && built.Derive() is { Count: > 0 } records)
        {
            inWorld = expected.Answers.GetValueOrDefault(records[Answer % records.Count].Answer)?.InWorld ?? new bool[expected.Worlds.Count];
        }

        Formula formula = Formula ?? new ConstantFormula(false);
        return [.. expected.Worlds.Select((world, i) => (inWorld?[i] ?? formula.Holds(world.Outcomes)) != IsRefuted)];
    }

    public Lineage Build(IBuiltQuery built, IReadOnlyList<IReadOnlyList<Lineage>> outcomes)
    {
        Lineage lineage = Formula is not null
            ? Formula.Build(built.Worlds, outcomes)
            : built.Derive() is { Count: > 0 } records ? records[Answer % records.Count].Lineage : built.Worlds.Never;
        return IsRefuted ? !lineage : lineage;
    }

    public IEnumerable<EvidencePiece> Shrink() => Formula?.Shrink().Select(smaller => this with { Formula = smaller }) ?? [];

    public override string ToString() => (IsRefuted ? "!" : "") + (Formula?.ToString() ?? $"answer {Answer}");
}
