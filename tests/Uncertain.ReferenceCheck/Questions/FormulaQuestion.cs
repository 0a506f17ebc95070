using Uncertain.ReferenceCheck.Cases;
using Uncertain.ReferenceCheck.Solving;

namespace Uncertain.ReferenceCheck.Questions;

/// <summary>P(formula) or P(formula | given) over named events and blocks of alternatives.</summary>
internal static class FormulaQuestion
{
    public static Figure Ask(Field input, Solver solver)
    {
        var worlds = new WorldSpace();
        var names = new Dictionary<string, Lineage>(StringComparer.Ordinal);
        if (input.Optional("variables") is { } variables)
        {
            foreach ((string name, Field chance) in variables.Members())
            {
                Name(names, name, chance, chance.Chance.NewEvent(worlds, name));
            }
        }

        if (input.Optional("blocks") is { } blocks)
        {
            foreach ((string name, Field block) in blocks.Members())
            {
                AddBlock(worlds, names, name, block);
            }
        }

        var reader = new ExpressionReader(worlds, names);
        if (input.Optional("define") is { } definitions)
        {
            foreach (Field definition in definitions.Items())
            {
                Field[] parts = [.. definition.Items()];
                if (parts.Length != 2)
                {
                    throw definition.Wrong("a name and an expression");
                }

                Name(names, parts[0].Text, definition, reader.Read(parts[1]));
            }
        }

        Lineage formula = reader.Read(input["formula"]);
        return input.Optional("given") is { } given ? solver.Chance(formula, reader.Read(given)) : solver.Chance(formula);
    }

    private static void AddBlock(WorldSpace worlds, Dictionary<string, Lineage> names, string block, Field field)
    {
        (string Name, Field Value)[] alternatives = [.. field.Members()];
        var outcomes = Elements.Alternatives(worlds, block, [.. alternatives.Select(alternative => alternative.Value)]);
        for (int i = 0; i < alternatives.Length; i++)
        {
            Name(names, $"{block}={alternatives[i].Name}", alternatives[i].Value, outcomes[i]);
        }
    }

    private static void Name(Dictionary<string, Lineage> names, string name, Field place, Lineage lineage)
    {
        if (!names.TryAdd(name, lineage))
        {
            throw new MalformedCaseException($"{place.Path}: the name '{name}' is given twice");
        }
    }
}
