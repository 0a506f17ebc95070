namespace Uncertain.Inference.Sampling;

/// <summary>What a number of worlds said about one lineage.</summary>
/// <param name="Value">The estimate.</param>
/// <param name="Complement">1 minus it.</param>
/// <param name="LogValue">ln of the estimate, which may be below the range of double.</param>
/// <param name="LogComplement">ln of 1 minus it.</param>
/// <param name="Bounds">Bounds that hold except with the chance asked for.</param>
/// <param name="Worlds">Worlds drawn.</param>
/// <param name="IsEnough">Whether the bounds are as near to the estimate as was asked.</param>
internal readonly record struct Tally(
    double Value, double Complement, double LogValue, double LogComplement, Interval Bounds, long Worlds, bool IsEnough = false)
{
    /// <summary>Before the first stage is done: nothing is known.</summary>
    public static Tally Nothing => new(0.5, 0.5, Math.Log(0.5), Math.Log(0.5), Interval.Everything, 0);

    public static Tally Of(long successes, long worlds, BinomialBounds bounds, Accuracy accuracy)
    {
        double value = (double)successes / worlds;
        double complement = (double)(worlds - successes) / worlds;
        var tally = new Tally(value, complement, Math.Log(value), Math.Log(complement), bounds.Of(successes, worlds), worlds);
        return tally with { IsEnough = tally.Meets(accuracy) };
    }

    public static Tally operator !(Tally tally) => new(
        tally.Complement, tally.Value, tally.LogComplement, tally.LogValue, !tally.Bounds, tally.Worlds, tally.IsEnough);

    /// <summary>The same test as <see cref="Accuracy.IsMetBy"/>; of no use where all is below the range of double.</summary>
    public bool Meets(Accuracy accuracy)
    {
        double distance = Math.Max(Bounds.Upper - Value, Value - Bounds.Lower);
        return distance <= (accuracy.IsRelative ? accuracy.Epsilon * Bounds.Lower : accuracy.Epsilon) * (1 + 1e-9);
    }
}
