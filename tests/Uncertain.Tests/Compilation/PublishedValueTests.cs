namespace Uncertain.Tests.Compilation;

/// <summary>Values from outside the project; the source stands beside each.</summary>
public sealed class PublishedValueTests
{
    private readonly WorldSpace _worlds = new();

    [Theory]
    [InlineData(2, 7)]
    [InlineData(3, 63)]
    [InlineData(5, 55447)]
    [InlineData(8, 660647962955)]
    public void IndependentSets_OfAGrid_AreThePublishedNumber(int n, double sets)
    {
        // OEIS A006506: independent vertex sets of the n x n grid.
        Lineage[] v = Halves(n * n);
        var clauses = new List<Lineage>();
        for (int i = 0; i < n * n; i++)
        {
            if (i % n < n - 1)
            {
                clauses.Add(!(v[i] & v[i + 1]));
            }

            if (i + n < n * n)
            {
                clauses.Add(!(v[i] & v[i + n]));
            }
        }

        AssertRelative(sets / Math.Pow(2, n * n), Value(Lineage.All([.. clauses])));
    }

    [Theory]
    [InlineData(4, 2)]
    [InlineData(6, 4)]
    [InlineData(8, 92)]
    public void Queens_OnABoard_AreThePublishedNumber(int n, double placements)
    {
        // OEIS A000170: ways to place n queens that do not attack each other.
        Lineage[] q = Halves(n * n);
        var clauses = new List<Lineage>();
        for (int line = 0; line < n; line++)
        {
            clauses.Add(Lineage.Any([.. Enumerable.Range(0, n).Select(i => q[(line * n) + i])]));
            clauses.Add(Lineage.Any([.. Enumerable.Range(0, n).Select(i => q[(i * n) + line])]));
        }

        for (int a = 0; a < n * n; a++)
        {
            for (int b = a + 1; b < n * n; b++)
            {
                (int rows, int columns) = ((b / n) - (a / n), (b % n) - (a % n));
                if (rows == 0 || columns == 0 || Math.Abs(rows) == Math.Abs(columns))
                {
                    clauses.Add(!(q[a] & q[b]));
                }
            }
        }

        AssertRelative(placements / Math.Pow(2, n * n), Value(Lineage.All([.. clauses])));
    }

    [Fact]
    public void ThreeColourings_OfAGrid_AreThePublishedNumber()
    {
        // OEIS A068253: a(3) = 82 is a third of the proper 3-colourings of the 3 x 3 grid.
        IReadOnlyList<Lineage>[] colour =
            [.. Enumerable.Range(0, 9).Select(i => (IReadOnlyList<Lineage>)_worlds.Choice($"v{i}", [1.0 / 3, 1.0 / 3, 1.0 / 3]))];
        var clashes = new List<Lineage>();
        for (int i = 0; i < 9; i++)
        {
            for (int c = 0; c < 3; c++)
            {
                if (i % 3 < 2)
                {
                    clashes.Add(colour[i][c] & colour[i + 1][c]);
                }

                if (i < 6)
                {
                    clashes.Add(colour[i][c] & colour[i + 3][c]);
                }
            }
        }

        AssertRelative(3 * 82 / Math.Pow(3, 9), Value(!Lineage.Any([.. clashes])));
    }

    [Fact]
    public void Derangements_OfFive_AreThePublishedNumber()
    {
        // OEIS A000166: D(5) = 44 of the 120 permutations have no fixed point.
        IReadOnlyList<Lineage>[] place =
            [.. Enumerable.Range(0, 5).Select(i => (IReadOnlyList<Lineage>)_worlds.Choice($"p{i}", [0.2, 0.2, 0.2, 0.2, 0.2]))];
        Lineage permutation = Lineage.All(
            [.. Enumerable.Range(0, 5).Select(value => Lineage.Exactly(1, [.. place.Select(p => p[value])]))]);
        Lineage noFixedPoint = !Lineage.Any([.. Enumerable.Range(0, 5).Select(i => place[i][i])]);

        AssertRelative(44.0 / 120, Value(permutation & noFixedPoint) / Value(permutation));
    }

    [Theory]
    [InlineData(4, 0.771171510219573974609375)]
    [InlineData(8, 0.984769074166088826616319292927)]
    [InlineData(12, 0.999255290640798667046644363594)]
    public void StandardHardPattern_Complete_EqualsClosedForm(int n, double expected)
    {
        // R(x), S(x, y), T(y), all chances 1/2; closed form 1 - sum_ij C(n,i) C(n,j) 2^-2n 2^-ij.
        (Lineage[] r, Lineage[] s, Lineage[] t) = (Halves(n), Halves(n * n), Halves(n));

        AssertRelative(expected, Value(Lineage.Any(
            [.. Enumerable.Range(0, n * n).Select(i => r[i / n] & s[i] & t[i % n])])));
    }

    [Fact]
    public void ConsecutiveFailures_ThreeOfTwenty_EqualsPublishedRecurrence()
    {
        // Consecutive-3-out-of-20:F system at 9/10; recurrence of Chiang and Niu (1981), from memory; value recomputed exactly.
        Lineage[] works = [.. Enumerable.Range(0, 20).Select(i => _worlds.Event($"c{i}", 0.9))];

        AssertRelative(0.98378614525174712901, Value(!Lineage.Any(
            [.. Enumerable.Range(0, 18).Select(i => !works[i] & !works[i + 1] & !works[i + 2])])));
    }

    [Fact]
    public void WetGrass_EqualsWorkedExample()
    {
        // Sprinkler network, K. Murphy's tutorial after Pearl: P(wet) = 0.6471.
        Lineage cloudy = Event("cloudy", 0.5);
        Lineage sprinkler = (cloudy & Event("s_c", 0.1)) | (!cloudy & Event("s_n", 0.5));
        Lineage rain = (cloudy & Event("r_c", 0.8)) | (!cloudy & Event("r_n", 0.2));

        AssertRelative(0.6471, Value((sprinkler & rain & Event("w_sr", 0.99)) | (sprinkler & !rain & Event("w_s", 0.9))
            | (!sprinkler & rain & Event("w_r", 0.9))));
    }

    [Fact]
    public void PressureTank_EqualsRecomputedHandbookTree()
    {
        // NUREG-0492, Fault Tree Handbook (1981), pressure tank example; structure and data from memory, value recomputed.
        Lineage inner = Event("S", 1e-4) & (Event("S1", 3e-5) | Event("K1", 3e-5) | Event("R", 1e-4));

        AssertRelative(0.00003501584875003554958150135, Value(Event("T", 5e-6) | Event("K2", 3e-5) | inner));
    }

    [Fact]
    public void FourOfAKind_InFiveCards_IsThePublishedFrequency()
    {
        // Poker frequencies, textbook: 1/4165. Five cards are five of 52 equally likely ones.
        Lineage[] card = Halves(52);
        Lineage five = Lineage.Exactly(5, card);
        Lineage four = Lineage.Any(
            [.. Enumerable.Range(0, 13).Select(rank => Lineage.All(card[4 * rank], card[(4 * rank) + 1], card[(4 * rank) + 2], card[(4 * rank) + 3]))]);

        AssertRelative(1.0 / 4165, Value(five & four) / Value(five));
    }

    private Lineage Event(string name, double chance) => _worlds.Event(name, chance);

    private Lineage[] Halves(int count)
    {
        int before = _worlds.VariableCount;
        return [.. Enumerable.Range(before, count).Select(i => Event($"h{i}", 0.5))];
    }

    private static double Value(Lineage lineage) => lineage.Compile().Evaluate().Value;

    private static void AssertRelative(double expected, double actual) =>
        Assert.True(Math.Abs(expected - actual) <= 1e-12 * expected, $"expected {expected:R}, got {actual:R}");
}
