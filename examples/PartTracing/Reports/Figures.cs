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

    /// <summary>The figure if it is exact; otherwise with its bounds.</summary>
    public static string Of(Probability probability) => probability.Guarantee.Kind switch
    {
        GuaranteeKind.Exact when probability.Complement is > 0 and < 0.0005 => ">0.999",
        GuaranteeKind.Exact => Of(probability.Value),
        _ => $"{probability.Value:0.000} ({probability.Lower:0.000}-{probability.Upper:0.000})",
    };
}
