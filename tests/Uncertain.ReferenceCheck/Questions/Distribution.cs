using System.Globalization;
using Uncertain.ReferenceCheck.Cases;
using Uncertain.ReferenceCheck.Solving;

namespace Uncertain.ReferenceCheck.Questions;

/// <summary>What is asked of a random integer whose events are lineages: its distribution, tails and moments.</summary>
/// <param name="Values">All values that it may take, ascending.</param>
/// <param name="Between">The lineage of 'at least the first and at most the second'.</param>
/// <param name="None">The lineage of 'it has no value', where that may be.</param>
/// <param name="Given">A condition; null for none.</param>
internal sealed record Distribution(
    IReadOnlyList<long> Values, Func<long, long, Lineage> Between, Lineage? None = null, Lineage? Given = null)
{
    public IReadOnlyList<Figure> Ask(Field input, Solver solver)
    {
        Field ask = input["ask"];
        switch (ask.Text)
        {
            case "pmf":
                return Probabilities(input.Optional("at"), solver);
            case "cdf":
                return [Chance(long.MinValue, input["x"].Integer(int.MinValue, int.MaxValue), solver)];
            case "tail":
                return [Chance(input["x"].Integer(int.MinValue, int.MaxValue), long.MaxValue, solver)];
            case "mean":
                return [Mean(solver)];
            case "variance":
                return [Variance(solver)];
            default:
                throw ask.Wrong("pmf, cdf, tail, mean or variance");
        }
    }

    private List<Figure> Probabilities(Field? at, Solver solver)
    {
        IEnumerable<long> asked = at is { } list
            ? list.Items().Select(item => (long)item.Integer(int.MinValue, int.MaxValue))
            : Values;
        List<Figure> figures = [.. asked.Select(value =>
            Chance(value, value, solver) with { Key = value.ToString(CultureInfo.InvariantCulture) })];
        if (None is { } none && at is null)
        {
            figures.Add(Chance(none, solver) with { Key = "none" });
        }

        return figures;
    }

    private Figure Mean(Solver solver)
    {
        RequireValue(solver);
        return Values.Aggregate(Figure.Zero, (sum, value) => sum + (value * Chance(value, value, solver)));
    }

    private Figure Variance(Solver solver)
    {
        RequireValue(solver);
        Figure[] chances = [.. Values.Select(value => Chance(value, value, solver))];
        Figure mean = Values.Zip(chances).Aggregate(Figure.Zero, (sum, pair) => sum + (pair.First * pair.Second));
        Figure around = Values.Zip(chances).Aggregate(
            Figure.Zero, (sum, pair) => sum + ((pair.First - mean.Value) * (pair.First - mean.Value) * pair.Second));

        // About any other point than the mean the mean square is larger by the square of the distance.
        double distance = Math.Max(mean.Upper - mean.Value, mean.Value - mean.Lower);
        return around.IsExact ? around : around with { Lower = around.Lower - (distance * distance) };
    }

    private void RequireValue(Solver solver)
    {
        if (None is { } none && !double.IsNegativeInfinity(Chance(none, solver).Log))
        {
            throw new LeftOutException("the moments are not defined where there may be no record");
        }
    }

    private Figure Chance(long least, long most, Solver solver) => Chance(Between(least, most), solver);

    private Figure Chance(Lineage lineage, Solver solver) => Given is { } given ? solver.Chance(lineage, given) : solver.Chance(lineage);
}
