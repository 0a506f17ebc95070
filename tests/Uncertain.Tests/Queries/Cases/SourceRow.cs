using System.Globalization;
using Uncertain.Tests.Oracles;
using Uncertain.Tests.Queries.Rows;

namespace Uncertain.Tests.Queries.Cases;

/// <summary>A row of a source with its chance or its lineage, whichever the source uses.</summary>
public sealed record SourceRow(Row Value, double Chance, Formula Lineage)
{
    public IEnumerable<SourceRow> Simpler(SourceForm form)
    {
        if (form == SourceForm.WithLineage)
        {
            foreach (Formula smaller in Lineage.Shrink())
            {
                yield return this with { Lineage = smaller };
            }
        }
        else if (form is not SourceForm.Certain && Chance is not (1 or 0.5))
        {
            yield return this with { Chance = 0.5 };
        }

        if (Value.A != 0)
        {
            yield return this with { Value = Value with { A = 0 } };
        }

        if (Value.B != 0)
        {
            yield return this with { Value = Value with { B = 0 } };
        }

        if (Value.C != "a")
        {
            yield return this with { Value = Value with { C = "a" } };
        }
    }

    public string Text(SourceForm form) => form switch
    {
        SourceForm.Certain => $"{Value}",
        SourceForm.WithLineage => $"{Value} if {Lineage}",
        _ => string.Create(CultureInfo.InvariantCulture, $"{Value} with {Chance:R}"),
    };
}
