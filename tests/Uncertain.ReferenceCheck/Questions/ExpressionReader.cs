using Uncertain.ReferenceCheck.Cases;

namespace Uncertain.ReferenceCheck.Questions;

/// <summary>Turns an expression of a case into a lineage.</summary>
internal sealed class ExpressionReader(WorldSpace worlds, IReadOnlyDictionary<string, Lineage> names)
{
    // Recursive: the depth of a file is limited where it is parsed.
    public Lineage Read(Field expression)
    {
        if (expression.IsTrue || expression.IsFalse)
        {
            return expression.IsTrue ? worlds.Always : worlds.Never;
        }

        if (expression.IsText)
        {
            return expression.Text switch
            {
                "true" => worlds.Always,
                "false" => worlds.Never,
                string name => names.TryGetValue(name, out Lineage lineage) ? lineage : throw expression.Wrong("a known name"),
            };
        }

        Field[] parts = [.. expression.Items()];
        if (parts.Length == 0)
        {
            throw expression.Wrong("an operator and its operands");
        }

        return parts[0].Text switch
        {
            "and" => Lineage.All([worlds.Always, .. parts[1..].Select(Read)]),
            "or" => Lineage.Any([worlds.Never, .. parts[1..].Select(Read)]),
            "not" when parts.Length == 2 => !Read(parts[1]),
            "xor" => parts[1..].Select(Read).Aggregate(worlds.Never, (odd, operand) => odd ^ operand),
            "atleast" when parts.Length > 1 => Threshold(parts, Lineage.AtLeast),
            "exactly" when parts.Length > 1 => Threshold(parts, Lineage.Exactly),
            _ => throw expression.Wrong("an operator with its operands (and, or, not, xor, atleast, exactly)"),
        };
    }

    // An operand that is never true changes no count, and gives the world space where there is no other.
    private Lineage Threshold(Field[] parts, ThresholdOperator form) =>
        form(parts[1].Integer(int.MinValue, int.MaxValue), [worlds.Never, .. parts[2..].Select(Read)]);

    private delegate Lineage ThresholdOperator(int count, params ReadOnlySpan<Lineage> operands);
}
