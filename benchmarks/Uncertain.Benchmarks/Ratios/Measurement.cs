using System.Globalization;

namespace Uncertain.Benchmarks.Ratios;

/// <summary>Two figures of one run, in the same unit.</summary>
/// <param name="Ours">What the library took or reached.</param>
/// <param name="Baseline">The same for the baseline; for a goal in absolute terms the goal itself.</param>
/// <param name="Unit">For example <c>s</c>.</param>
public readonly record struct Measurement(double Ours, double Baseline, string Unit = "s")
{
    public double Ratio => Ours / Baseline;

    /// <summary>A figure with its unit, in three digits.</summary>
    public string Text(double figure) => Unit == "s"
        ? figure switch
        {
            < 1e-3 => Digits(figure * 1e6) + " us",
            < 1 => Digits(figure * 1e3) + " ms",
            _ => Digits(figure) + " s",
        }
        : Digits(figure) + " " + Unit;

    private static string Digits(double figure) => figure switch
    {
        >= 1000 => figure.ToString("N0", CultureInfo.InvariantCulture),
        >= 100 => figure.ToString("F0", CultureInfo.InvariantCulture),
        >= 10 => figure.ToString("F1", CultureInfo.InvariantCulture),
        _ => figure.ToString("F2", CultureInfo.InvariantCulture),
    };
}
