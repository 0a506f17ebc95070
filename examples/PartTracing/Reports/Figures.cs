using Uncertain;

namespace PartTracing.Reports;

/// <summary>Numbers as they are printed. A probability that is not 1 never shows as 1, nor one that is not 0 as 0.</summary>
internal static class Figures
{
    public static string Of(double probability) => probability switch
    {
        0 => "0",
        1 => "1",
        < 0.0005 => "<0.001",
        > 0.9995 => ">0.999",
        _ => $"{probability:0.000}",
    };

    /// <summary>The figure, with its bounds if it is not exact.</summary>
    public static string Of(Probability probability)
    {
        string value = probability.Complement is > 0 and < 0.0005 ? ">0.999" : Of(probability.Value);
        return probability.Guarantee.Kind == GuaranteeKind.Exact
            ? value
            : $"{value} ({probability.Lower:0.000}-{probability.Upper:0.000})";
    }
}
