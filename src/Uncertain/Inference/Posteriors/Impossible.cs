using System.Globalization;

namespace Uncertain.Inference.Posteriors;

/// <summary>Evidence that holds in no world: which piece made it so.</summary>
internal static class Impossible
{
    /// <summary>The error for evidence that is known to hold in no world.</summary>
    public static InvalidInputException Because(Evidence evidence, CancellationToken cancellationToken)
    {
        // The first pieces hold together up to some number of them, and beyond it never.
        int possible = 0;
        int impossible = evidence.Pieces.Length;
        while (impossible - possible > 1)
        {
            int middle = possible + ((impossible - possible) / 2);
            (possible, impossible) = IsPossible(evidence, middle, cancellationToken) ? (middle, impossible) : (possible, middle);
        }

        int piece = impossible - 1;
        bool isAlone = piece == 0 || !IsPossible(evidence.Worlds.Given(evidence.Pieces[piece]), 1, cancellationToken);
        return new InvalidInputException(string.Create(
            CultureInfo.InvariantCulture,
            $"The evidence is impossible: piece {piece} of it, {evidence.Pieces[piece]}, {Reason(isAlone, piece)}. "
            + $"Leave it out, or check where it came from; pieces are counted from 0."));
    }

    /// <summary>Refuses evidence that holds in no world.</summary>
    /// <exception cref="InvalidInputException">It holds in none.</exception>
    /// <exception cref="EvaluationRefusedException">A part of it could not be compiled, so that this is not known.</exception>
    public static void Check(Evidence evidence, IEnumerable<EvidencePart> parts, EvaluationOptions options, long start, CancellationToken token)
    {
        foreach (EvidencePart part in parts)
        {
            if (part.IsPossible(evidence.Findings(token).OpenChances, options, start, token, out string? refusal) is not { } isPossible)
            {
                throw new EvaluationRefusedException(
                    $"Whether the evidence is possible at all could not be found out: {refusal}");
            }

            if (!isPossible)
            {
                throw Because(evidence, token);
            }
        }
    }

    private static string Reason(bool isAlone, int piece) => isAlone
        ? "is true in no world"
        : string.Create(CultureInfo.InvariantCulture, $"is true in none of the worlds that the {(piece == 1 ? "piece" : $"{piece:N0} pieces")} before it leave");

    private static bool IsPossible(Evidence evidence, int pieces, CancellationToken cancellationToken)
    {
        Findings? findings = FindingsReader.TryRead(evidence.Worlds, evidence.Pieces.AsSpan()[..pieces], cancellationToken);
        EvaluationOptions options = EvaluationOptions.Default;
        return findings is not null && findings.Parts.All(part => part.IsPossible(
            findings.OpenChances, options, options.Clock.GetTimestamp(), cancellationToken, out _) != false);
    }
}
