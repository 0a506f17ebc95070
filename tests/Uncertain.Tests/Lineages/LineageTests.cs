using System.Collections.Immutable;
using Uncertain.Tests.Oracles;

namespace Uncertain.Tests.Lineages;

public sealed class LineageTests
{
    private readonly WorldSpace _worlds = new();
    private readonly Lineage _page;
    private readonly Lineage _feed;
    private readonly Lineage _clerk;

    public LineageTests()
    {
        _page = _worlds.Event("page", 0.5);
        _feed = _worlds.Event("feed", 0.5);
        _clerk = _worlds.Event("clerk", 0.5);
    }

    [Fact]
    public void Operators_Constants_AreSimplified()
    {
        Assert.Equal(_page, _page & _worlds.Always);
        Assert.Equal(_worlds.Never, _page & _worlds.Never);
        Assert.Equal(_page, _page | _worlds.Never);
        Assert.Equal(_worlds.Always, _page | _worlds.Always);
        Assert.Equal(!_page, _page ^ _worlds.Always);
        Assert.Equal(_worlds.Never, !_worlds.Always);
    }

    [Fact]
    public void Operators_RepeatsAndContradictions_AreSimplified()
    {
        Assert.Equal(_page, _page & _page);
        Assert.Equal(_page, _page | _page);
        Assert.Equal(_worlds.Never, _page & !_page);
        Assert.Equal(_worlds.Always, _page | !_page);
        Assert.Equal(_page, !!_page);
        Assert.Equal(_worlds.Never, (_page & _feed) & !(_page & _feed));
        Assert.Equal(_worlds.Always, (_page | _feed) | !(_page | _feed));
    }

    [Fact]
    public void Operators_OrderOfOperands_DoesNotMatter()
    {
        Assert.Equal(_page & _feed, _feed & _page);
        Assert.Equal((_page & _feed) & _clerk, _page & (_feed & _clerk));
        Assert.Equal(Lineage.Any(_page, _feed, _clerk), Lineage.Any(_clerk, _page, _feed));
    }

    [Fact]
    public void Kind_EachForm_IsTold()
    {
        Assert.Equal(LineageKind.True, _worlds.Always.Kind);
        Assert.Equal(LineageKind.False, _worlds.Never.Kind);
        Assert.Equal(LineageKind.Literal, _page.Kind);
        Assert.Equal(LineageKind.Negation, (!_page).Kind);
        Assert.Equal(LineageKind.Conjunction, (_page & _feed).Kind);
        Assert.Equal(LineageKind.Disjunction, (_page | _feed).Kind);
        Assert.Equal(LineageKind.Disjunction, (!(_page & _feed)).Kind);
    }

    [Fact]
    public void Operands_NegatedConjunction_AreNegated() => Assert.Equal([!_page, !_feed], (!(_page & _feed)).Operands.ToArray());

    [Fact]
    public void Variable_NotALiteral_IsRefused()
    {
        InvalidOperationException exception = Assert.Throws<InvalidOperationException>(() => (_page & _feed).Variable);

        Assert.Equal("Only a literal has a variable, an outcome and a source; this lineage is a Conjunction.", exception.Message);
        Assert.Throws<InvalidOperationException>(() => (!_page).Outcome);
    }

    [Fact]
    public void ChanceOf_OutcomeThatIsNotThere_IsRefused()
    {
        ImmutableArray<Lineage> reading = _worlds.Choice("reading", 0.5, 0.25);

        Assert.Equal(0.25, reading[0].Variable.ChanceOf(1));
        Assert.Throws<ArgumentOutOfRangeException>(() => reading[0].Variable.ChanceOf(2));
        Assert.Throws<ArgumentOutOfRangeException>(() => reading[0].Variable.ChanceOf(-1));
    }

    [Theory]
    [InlineData(-1, "true")]
    [InlineData(0, "true")]
    [InlineData(3, "page ∧ feed ∧ clerk")]
    [InlineData(4, "false")]
    public void AtLeast_Bounds_AreConstants(int count, string expected) => Assert.Equal(
        expected, Lineage.AtLeast(count, _page, _feed, _clerk).ToString());

    [Fact]
    public void Exactly_OutsideTheRange_IsNever()
    {
        Assert.Equal(_worlds.Never, Lineage.Exactly(-1, _page, _feed));
        Assert.Equal(_worlds.Never, Lineage.Exactly(3, _page, _feed));
    }

    [Fact]
    public void AtLeastAndExactly_EveryCount_HoldInTheRightWorlds()
    {
        ImmutableArray<Lineage> reading = _worlds.Choice("reading", 0.5, 0.25);
        Lineage[] operands = [_page, !_feed, reading[0], reading[1], _page & _clerk];
        Formula[] formulas = [.. operands.Select(LineageReader.Read)];
        for (int count = -1; count <= operands.Length + 1; count++)
        {
            Formula atLeast = LineageReader.Read(Lineage.AtLeast(count, operands));
            Formula exactly = LineageReader.Read(Lineage.Exactly(count, operands));
            for (int world = 0; world < 24; world++)
            {
                // -1 is 'none of them': the three events have one outcome each, the reading has two.
                int[] outcomes = [(world & 1) - 1, (world >> 1 & 1) - 1, (world >> 2 & 1) - 1, (world >> 3) - 1];
                int hold = formulas.Count(formula => formula.Holds(outcomes));

                Assert.Equal(hold >= count, atLeast.Holds(outcomes));
                Assert.Equal(hold == count, exactly.Holds(outcomes));
            }
        }
    }

    [Fact]
    public void All_NoOperands_IsRefused()
    {
        ArgumentException exception = Assert.Throws<ArgumentException>(() => Lineage.All());

        Assert.StartsWith(
            "At least one lineage is needed to know the world space. Start from WorldSpace.Always or WorldSpace.Never.",
            exception.Message, StringComparison.Ordinal);
        Assert.Throws<ArgumentException>(() => Lineage.Any());
        Assert.Throws<ArgumentException>(() => Lineage.AtLeast(0));
    }

    [Fact]
    public void All_OneOperand_IsTheOperand()
    {
        Assert.Equal(_page, Lineage.All(_page));
        Assert.Equal(_page, Lineage.Any(_page));
    }

    [Fact]
    public void AtLeast_ManyOperands_MakesAtMostThreeNodesForEachStep()
    {
        Lineage[] events = [.. Enumerable.Range(0, 300).Select(i => _worlds.Event($"e{i}", 0.5))];
        int before = _page.Arena.Count;

        Lineage.AtLeast(20, events);

        Assert.InRange(_page.Arena.Count - before, 1, 3 * 20 * 300);
    }

    [Fact]
    public void ToString_MaxLength_CutsWithAnEllipsis()
    {
        Assert.Equal("page ∧ feed", (_page & _feed).ToString(11));
        Assert.Equal("page ∧ fee…", (_page & _feed).ToString(10));
        Assert.Throws<ArgumentOutOfRangeException>(() => _page.ToString(0));
    }

    [Fact]
    public void GetHashCode_EqualLineages_AreEqual()
    {
        Lineage derived = Assert.Single(_worlds.WithLineage([1], _ => (_page & _feed) | _clerk).Derive()).Lineage;

        Assert.Equal((_page & _feed) | _clerk, derived);
        Assert.Equal(((_page & _feed) | _clerk).GetHashCode(), derived.GetHashCode());
        Assert.True(derived == ((_page & _feed) | _clerk));
        Assert.True(derived != _clerk);
        Assert.False(derived.Equals((object)"page"));
    }
}
