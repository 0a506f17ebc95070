using System.Collections.Immutable;
using Uncertain.ReferenceCheck.Cases;

namespace Uncertain.ReferenceCheck.Questions;

/// <summary>The independent events of a case.</summary>
internal static class Elements
{
    private const double SmallRest = 1e-3;

    /// <summary>One event for each element, with the common chance or those of a list.</summary>
    public static Lineage[] Events(WorldSpace worlds, string name, int count, Field input, string common, string? list)
    {
        Chance[] chances = list is not null && input.Optional(list) is { } field
            ? Chances(field, count)
            : [.. Enumerable.Repeat(input[common].Chance, count)];
        return [.. chances.Select((chance, i) => chance.NewEvent(worlds, $"{name} {i}"))];
    }

    /// <summary>Exclusive alternatives with the probabilities of some fields.</summary>
    public static ImmutableArray<Lineage> Alternatives(WorldSpace worlds, string name, IReadOnlyList<Field> chances)
    {
        Rational rest = chances.Aggregate(Rational.One, (left, chance) => left - chance.Probability);
        double none = rest.ToDouble();
        double[] alternatives = [.. chances.Select(chance => chance.Chance.Value)];

        // 1 minus a sum close to 1 would have lost digits of the chance of none, so that it becomes an alternative of its own.
        return none is > 0 and < SmallRest
            ? worlds.Choice(name, [.. alternatives, none])[..^1]
            : worlds.Choice(name, alternatives);
    }

    /// <summary>A list of probabilities, or one for all.</summary>
    public static Chance[] Chances(Field field, int count)
    {
        if (!field.IsList)
        {
            return [.. Enumerable.Repeat(field.Chance, count)];
        }

        Chance[] chances = [.. field.Items().Select(item => item.Chance)];
        return chances.Length == count ? chances : throw field.Wrong($"a list of {count} probabilities");
    }
}
