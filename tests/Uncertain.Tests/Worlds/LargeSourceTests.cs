using System.Collections.Immutable;

namespace Uncertain.Tests.Worlds;

/// <summary>Sources that are read in pieces by several threads.</summary>
public sealed class LargeSourceTests
{
    private const int Records = 300_000;

    private readonly WorldSpace _worlds = new();

    [Fact]
    public void Independent_ManyRecords_KeepsEachChance()
    {
        // Slots before and between, so that pages of chances begin inside the sources.
        _worlds.Event("first", 0.125);
        UncertainSet<int> left = _worlds.Independent([.. Enumerable.Range(0, Records)], ChanceOf);
        _worlds.Event("second", 0.25);
        UncertainSet<int> right = _worlds.Independent([.. Enumerable.Range(Records, Records)], ChanceOf);
        Lineage third = _worlds.Event("third", 0.375);

        foreach (UncertainSet<int> set in new[] { left, right })
        {
            Assert.All(set.Evaluate(), answer => Assert.Equal(ChanceOf(answer.Value), answer.Probability.Value));
            Assert.All(
                set.Derive().Where(record => record.Value % 997 == 0),
                record => Assert.Equal(ChanceOf(record.Value), record.Lineage.Evaluate().Value));
        }

        Assert.Equal(0.375, third.Evaluate().Value);
        Assert.Equal((2 * Records) + 3, _worlds.VariableCount);
    }

    [Theory]
    [InlineData(double.NaN)]
    [InlineData(1.5)]
    [InlineData(-1e-300)]
    public void Independent_BadChancesInSeveralPieces_NamesTheFirst(double bad)
    {
        double[] chances = [.. Enumerable.Repeat(0.5, Records)];
        chances[Records - 5] = bad;
        chances[123_456] = bad;
        chances[123_457] = double.PositiveInfinity;

        InvalidInputException refusal = Assert.Throws<InvalidInputException>(() => _worlds.Independent(chances, chance => chance));

        Assert.Contains("record 123456 of chances", refusal.Message, StringComparison.Ordinal);
        Assert.Equal(0, _worlds.VariableCount);
    }

    [Fact]
    public void Independent_LambdaThatCounts_IsCalledInOrderOnOneThread()
    {
        int calls = 0;

        UncertainSet<int> set = _worlds.Independent([.. Enumerable.Range(0, Records)], i => i == calls++ ? 0.5 : 0.25);

        Assert.Equal(Records, calls);
        Assert.All(set.Evaluate(), answer => Assert.Equal(0.5, answer.Probability.Value));
    }

    [Fact]
    public void Independent_ArraysAndListsChangedLater_KeepWhatTheyRead()
    {
        int[] array = [.. Enumerable.Range(0, Records)];
        List<int> list = [.. array];
        UncertainSet<int>[] sets =
        [
            _worlds.Independent(array, _ => 0.5), _worlds.Independent(list, _ => 0.5), _worlds.Certain(array), _worlds.Certain(list),
            _worlds.Independent(array.ToImmutableArray(), _ => 0.5),
        ];

        Array.Clear(array);
        list.Clear();

        Assert.All(sets, set => Assert.Equal(Enumerable.Range(0, Records), set.Evaluate().Select(answer => answer.Value)));
    }

    private static double ChanceOf(int record) => (record + 1) / (2.0 * Records + 2);
}
