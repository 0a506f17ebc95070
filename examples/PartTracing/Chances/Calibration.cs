using PartTracing.Input;

namespace PartTracing.Chances;

/// <summary>
/// Turns raw scores into chances, as learnt from the clerk's sample. Readings that are in no closed list cannot be right and
/// get no chance. The listed ones of a field compete with each other and with 'none of them' in a multinomial logistic model,
/// so that their chances never sum to more than 1.
/// </summary>
/// <remarks>
/// The model is kept simple: three weights for all fields. It treats the fields of a slip as independent, although wear is
/// shared by them, and knows nothing of how common a lot is.
/// </remarks>
internal sealed class Calibration
{
    // Pulls the weights towards 0, so that even a sample without any error gives no chance of 1. Of 0.03, 0.1, 0.3 and 1 it
    // has the lowest cross-validated log loss on the sample.
    private const double Ridge = 0.1;
    private const int Steps = 2000;

    private readonly ClosedLists _lists;
    private readonly double[] _weights;

    private Calibration(ClosedLists lists, double[] weights) => (_lists, _weights) = (lists, weights);

    /// <summary>Learns the weights that make the sample most likely, by accelerated gradient ascent (Y. Nesterov, 1983).</summary>
    public static Calibration Fit(IEnumerable<LabelledReading> sample, ClosedLists lists)
    {
        (double[][] Alternatives, int Right)[] fields = [.. sample
            .Where(labelled => lists.Lists(labelled.Reading))
            .GroupBy(labelled => (labelled.Reading.DocumentId, labelled.Reading.Field))
            .Select(field => (Features(field.Select(labelled => labelled.Reading)), field.ToList().FindIndex(l => l.IsCorrect)))];

        // All features are in [0, 1], so the curvature is at most this; it is at least the ridge.
        double curvature = Ridge + (3.0 * fields.Length);
        double momentum = (1 - Math.Sqrt(Ridge / curvature)) / (1 + Math.Sqrt(Ridge / curvature));
        double[] weights = [0, 0, 0];
        double[] ahead = [0, 0, 0];
        for (int step = 0; step < Steps; step++)
        {
            double[] gradient = [.. ahead.Select(weight => -Ridge * weight)];
            foreach ((double[][] alternatives, int right) in fields)
            {
                AddGradient(gradient, alternatives, right, ahead);
            }

            for (int i = 0; i < weights.Length; i++)
            {
                double next = ahead[i] + (gradient[i] / curvature);
                ahead[i] = next + (momentum * (next - weights[i]));
                weights[i] = next;
            }
        }

        return new Calibration(lists, weights);
    }

    /// <summary>The listed readings with the chance that each is right.</summary>
    public IEnumerable<CalibratedReading> Apply(IEnumerable<Reading> readings) => readings
        .Where(_lists.Lists)
        .GroupBy(reading => (reading.DocumentId, reading.Field))
        .SelectMany(field => field.Zip(Chances(Features(field), _weights), (reading, chance) => new CalibratedReading(reading, chance)));

    public override string ToString() =>
        $"log-odds against none = {_weights[0]:0.00} {_weights[1]:+ 0.00;- 0.00} score/100 "
        + $"{_weights[2]:+ 0.00;- 0.00} if not the best reading";

    private static double[][] Features(IEnumerable<Reading> alternatives) =>
        [.. alternatives.Select(reading => (double[])[1, reading.RawScore / 100, reading.AlternativeNo > 1 ? 1 : 0])];

    private static double[] Chances(double[][] alternatives, double[] weights)
    {
        // First the odds of each alternative against 'none of them'.
        var chances = new double[alternatives.Length];
        double total = 1;
        for (int a = 0; a < chances.Length; a++)
        {
            double[] x = alternatives[a];
            chances[a] = Math.Exp((weights[0] * x[0]) + (weights[1] * x[1]) + (weights[2] * x[2]));
            total += chances[a];
        }

        for (int a = 0; a < chances.Length; a++)
        {
            chances[a] /= total;
        }

        return chances;
    }

    private static void AddGradient(double[] gradient, double[][] alternatives, int right, double[] weights)
    {
        double[] chances = Chances(alternatives, weights);
        for (int a = 0; a < chances.Length; a++)
        {
            for (int i = 0; i < gradient.Length; i++)
            {
                gradient[i] += ((a == right ? 1 : 0) - chances[a]) * alternatives[a][i];
            }
        }
    }
}
