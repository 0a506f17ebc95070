using System.Globalization;

namespace Uncertain.ReferenceCheck;

/// <summary>One line of the report.</summary>
/// <param name="Id">Name of the case.</param>
/// <param name="Expected">The expected figures; <c>-</c> for none.</param>
/// <param name="Got">The computed figures; <c>-</c> for none.</param>
/// <param name="RelativeError">The largest relative error; null for none.</param>
/// <param name="Seconds">Time, building of lineages included.</param>
/// <param name="Outcome">How it ended.</param>
/// <param name="Remark">More about that; may be empty.</param>
internal sealed record CaseResult(
    string Id, string Expected, string Got, double? RelativeError, double Seconds, Outcome Outcome, string Remark)
{
    /// <summary>Whether the run must be reported as a failure.</summary>
    public bool IsFault => Outcome is Outcome.Wrong or Outcome.Malformed or Outcome.Failed;

    public string Verdict => NameOf(Outcome) + (Remark.Length == 0 ? "" : $": {Remark}");

    public static string NameOf(Outcome outcome) => outcome switch
    {
        Outcome.WithinBounds => "ok within bounds",
        Outcome.NotSolved => "not solved",
        _ => outcome.ToString().ToLowerInvariant(),
    };

    /// <summary>The tab-separated line.</summary>
    public override string ToString() => string.Join('\t', ((string[])[
        Id, Expected, Got, RelativeError?.ToString("0.0E+0", CultureInfo.InvariantCulture) ?? "-",
        Seconds.ToString("0.000", CultureInfo.InvariantCulture), Verdict]).Select(OneLine));

    private static string OneLine(string text) => string.Join(' ', text.Split(['\t', '\r', '\n'], StringSplitOptions.RemoveEmptyEntries));
}
