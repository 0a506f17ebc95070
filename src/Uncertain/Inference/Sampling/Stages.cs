namespace Uncertain.Inference.Sampling;

/// <summary>
/// When a running estimate is looked at, and with which part of the error chance: fixed beforehand, so that the bounds hold at
/// whatever stage the sampling stops, for whatever reason (union bound over the stages).
/// </summary>
/// <remarks>
/// <para>Stage k has 1.5 times the worlds of the one before and the part 1/(k(k+1)) of delta; these parts add up to 1.</para>
/// <para>With an absolute epsilon there is a last stage, which takes half of delta, and the others share the other half. By
/// Pinsker's inequality KL(x, p) >= 2 (x - p)^2 the bounds of <see cref="BinomialBounds"/> are at most z/(2 sqrt n) + 1/n from the
/// estimate, with Q(z) = delta/4; the last stage's n makes that epsilon. As Q(z) &lt;= exp(-z^2/2)/2, that n is never more than
/// Hoeffding's ln(2/delta)/(2 epsilon^2), apart from the 1/n: although half of delta pays for stopping earlier.</para>
/// </remarks>
internal sealed class Stages
{
    private const long LeastSize = 512;

    private readonly double _delta;
    private readonly long _lastSize;

    private Stages(double delta, long lastSize)
    {
        _delta = delta;
        _lastSize = lastSize;
        Next(WorldBlock.Worlds);
    }

    /// <summary>Number of the stage, from 1.</summary>
    public int Number { get; private set; }

    /// <summary>Worlds drawn at the end of the stage.</summary>
    public long Worlds { get; private set; }

    /// <summary>Largest chance that the bounds computed at the end of the stage miss.</summary>
    public double Delta { get; private set; }

    public bool IsLast { get; private set; }

    public static Stages For(Accuracy accuracy) =>
        new(accuracy.Delta, accuracy.IsRelative ? long.MaxValue : LastSize(accuracy.Epsilon, accuracy.Delta));

    public void Advance() => Next(Worlds + (Worlds / 2));

    private static long LastSize(double epsilon, double delta)
    {
        // Smallest n with z/(2 sqrt n) + 1/n <= epsilon: a quadratic in sqrt n.
        double z = NormalTail.Quantile(delta / 4);
        double root = (z + Math.Sqrt((z * z) + (16 * epsilon))) / (4 * epsilon);
        return root * root >= 1e18 ? long.MaxValue : Math.Max(LeastSize, (long)Math.Ceiling(root * root));
    }

    private void Next(long size)
    {
        Number++;
        size = (size + WorldBlock.Worlds - 1) / WorldBlock.Worlds * WorldBlock.Worlds;

        // A stage just before the last one would rarely pay for itself.
        IsLast = size >= _lastSize - (_lastSize / 4);
        Worlds = IsLast ? _lastSize : size;
        double share = 1.0 / ((double)Number * (Number + 1));
        Delta = _lastSize == long.MaxValue ? _delta * share
            : !IsLast ? _delta / 2 * share
            : Number == 1 ? _delta : _delta / 2;
    }
}
