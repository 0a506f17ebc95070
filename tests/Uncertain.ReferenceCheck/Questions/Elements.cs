using Uncertain.ReferenceCheck.Cases;

namespace Uncertain.ReferenceCheck.Questions;

/// <summary>The independent events of a case.</summary>
internal static class Elements
{
    /// <summary>One event for each element, with the common chance or those of a list.</summary>
    public static Lineage[] Events(WorldSpace worlds, string name, int count, Field input, string common, string? list)
    {
        Chance[] chances = list is not null && input.Optional(list) is { } field
            ? Chances(field, count)
            : [.. Enumerable.Repeat(input[common].Chance, count)];
        return [.. chances.Select((chance, i) => chance.NewEvent(worlds, $"{name} {i}"))];
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
