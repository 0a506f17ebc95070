using Uncertain.Lineages;

namespace Uncertain.Execution;

/// <summary>
/// How the records of a flow carry their lineages: as terms, which are conjunctions of up to <see cref="MostLiterals"/> literals that no
/// arena has to know, or as one reference each.
/// </summary>
/// <param name="Width">References a record.</param>
/// <param name="IsTerm">Whether all of them are literals or constants.</param>
/// <param name="HasNegations">Whether there may be negated literals; without them and without alternatives no term contradicts itself.</param>
internal readonly record struct LineageForm(int Width, bool IsTerm, bool HasNegations)
{
    /// <summary>As wide as conjunctions are kept flat in an arena.</summary>
    public const int MostLiterals = LineageArena.FlattenLimit;

    /// <summary>One reference each, to anything.</summary>
    public static LineageForm Any => new(1, false, true);

    /// <summary>Always there.</summary>
    public static LineageForm Certain => new(0, true, false);

    /// <summary>The form of 'both': a term if it is not too wide.</summary>
    public static LineageForm Both(LineageForm left, LineageForm right) =>
        left.IsTerm && right.IsTerm && left.Width + right.Width <= MostLiterals
            ? new LineageForm(left.Width + right.Width, true, left.HasNegations || right.HasNegations)
            : Any;

    /// <summary>The form of the records of both.</summary>
    public static LineageForm Either(LineageForm left, LineageForm right) =>
        left.IsTerm && right.IsTerm
            ? new LineageForm(Math.Max(left.Width, right.Width), true, left.HasNegations || right.HasNegations)
            : Any;

    /// <summary>The narrowest form of given lineages.</summary>
    public static LineageForm Of(ReadOnlySpan<LineageRef> lineages)
    {
        bool isCertain = true;
        bool hasNegations = false;
        foreach (LineageRef lineage in lineages)
        {
            if (lineage.IsNode)
            {
                return Any;
            }

            isCertain &= lineage == LineageRef.True;
            hasNegations |= lineage.IsLiteral && lineage.IsNegated;
        }

        return isCertain ? Certain : new LineageForm(1, true, hasNegations);
    }
}
