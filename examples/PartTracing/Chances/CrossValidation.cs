using PartTracing.Input;

namespace PartTracing.Chances;

/// <summary>How good the chances are on readings that the calibration has not seen: ten folds of the clerk's sample.</summary>
internal static class CrossValidation
{
    private const int Folds = 10;

    /// <summary>Each listed reading of the sample with the chance from the nine other folds, and whether it was right.</summary>
    public static IEnumerable<(double Chance, bool IsRight)> Run(IReadOnlyList<LabelledReading> sample, ClosedLists lists)
    {
        // All fields of a slip are in one fold.
        foreach (IGrouping<int, LabelledReading> heldOut in sample
            .GroupBy(labelled => labelled.Reading.DocumentId)
            .SelectMany((slip, i) => slip.Select(labelled => (fold: i % Folds, labelled)))
            .GroupBy(pair => pair.fold, pair => pair.labelled))
        {
            var calibration = Calibration.Fit(sample.Except(heldOut), lists);
            HashSet<Reading> right = [.. heldOut.Where(labelled => labelled.IsCorrect).Select(labelled => labelled.Reading)];
            foreach (CalibratedReading calibrated in calibration.Apply(heldOut.Select(labelled => labelled.Reading)))
            {
                yield return (calibrated.Chance, right.Contains(calibrated.Reading));
            }
        }
    }
}
