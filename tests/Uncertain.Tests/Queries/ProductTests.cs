using System.Globalization;

namespace Uncertain.Tests.Queries;

/// <summary>Products that run as joins, and what queries and plans do at their edges.</summary>
public sealed class ProductTests
{
    private sealed record Part(string Lot);

    private sealed record Slip(int Number, Part? Part);

    private readonly WorldSpace _worlds = new();

    [Fact]
    public void Where_EqualityBehindGuards_IsNotComputedForWhatTheyRefuse()
    {
        Slip[] slips = [new(1, new Part("L7")), new(2, null)];
        var left = _worlds.Independent(slips, _ => 0.5, name: "left");
        var right = _worlds.Independent(slips, _ => 0.5, name: "right");
        var query = from l in left
                    from r in right
                    where l.Part != null && r.Part != null && l.Part.Lot == r.Part.Lot
                    select l.Number + r.Number;

        Answer<int> answer = Assert.Single(query.Evaluate(Evaluators.Compilation));

        Assert.Equal(2, answer.Value);
        Assert.Equal(0.25, answer.Probability.Value, 1e-15);
        Assert.Contains("join on", query.Plan.ToString(), StringComparison.Ordinal);
    }

    [Fact]
    public void Union_OfTenThousandSets_IsRefusedAndNotACrash()
    {
        UncertainSet<int> all = _worlds.Certain([0], name: "first");

        InvalidInputException refusal = Assert.Throws<InvalidInputException>(() =>
        {
            for (int i = 0; i < 10_000; i++)
            {
                all = all.Union(all);
            }
        });

        Assert.Contains("1,000", refusal.Message, StringComparison.Ordinal);
    }

    [Fact]
    public void Plan_InAnotherCulture_IsTheSame()
    {
        var query = _worlds.Certain([1, 2], name: "numbers").Where(number => number * 0.5 > 0.25);
        string expected = query.Plan.ToString();
        CultureInfo culture = CultureInfo.CurrentCulture;
        try
        {
            var commas = (CultureInfo)CultureInfo.InvariantCulture.Clone();
            commas.NumberFormat.NumberDecimalSeparator = ",";
            CultureInfo.CurrentCulture = commas;

            Assert.Equal(expected, query.Plan.ToString());
            Assert.Contains("0.25", expected, StringComparison.Ordinal);
        }
        finally
        {
            CultureInfo.CurrentCulture = culture;
        }
    }
}
