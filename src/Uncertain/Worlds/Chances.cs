using System.Globalization;

namespace Uncertain.Worlds;

/// <summary>The checks that every chance passes at the door.</summary>
internal static class Chances
{
    public static void Check(double chance, string of)
    {
        if (!(chance >= 0 && chance <= 1))
        {
            throw Refused(chance, of);
        }
    }

    public static InvalidInputException Refused(double chance, string of) => new(string.Create(
        CultureInfo.InvariantCulture,
        $"The chance of {of} is {chance:R}; a chance is a number in [0, 1]. Raw scores are not chances: calibrate them first."));

    /// <summary>Refuses a group whose chances exceed 1 by more than their rounding.</summary>
    public static void CheckSum(double sum, string of)
    {
        if (sum > 1 + VariableTable.SumTolerance)
        {
            throw new InvalidInputException(string.Create(
                CultureInfo.InvariantCulture,
                $"The chances of {of} add up to {sum:R}; exclusive alternatives may add up to at most 1. "
                + $"Calibrate or normalise the scores of each group first."));
        }
    }
}
