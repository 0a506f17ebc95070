namespace Uncertain.Tests.Queries.Certain;

/// <summary>On certain data every operator is System.Linq's, as a set, and every answer is certain.</summary>
public sealed class CertainDataTests
{
    private readonly WorldSpace _worlds = new();

    public static TheoryData<int, int> Sizes
    {
        get
        {
            var sizes = new TheoryData<int, int>();
            foreach (int left in (int[])[0, 1, 2, 1000])
            {
                foreach (int right in (int[])[0, 1, 2, 1000])
                {
                    sizes.Add(left, right);
                }
            }

            return sizes;
        }
    }

    [Theory]
    [MemberData(nameof(Sizes))]
    public void Where_CertainData_EqualsSystemLinq(int left, int right)
    {
        _ = right;
        Note[] notes = Notes(left);

        Check(notes.Where(n => n.Depot > 3 || n.Lot == null), _worlds.Certain(notes).Where(n => n.Depot > 3 || n.Lot == null));
    }

    [Theory]
    [MemberData(nameof(Sizes))]
    public void Select_CertainData_EqualsSystemLinq(int left, int right)
    {
        _ = right;
        Note[] notes = Notes(left);

        Check(notes.Select(n => new { n.Lot, n.Depot }), _worlds.Certain(notes).Select(n => new { n.Lot, n.Depot }));
        Check(notes.Select(n => (n.Lot, n.Depot)), _worlds.Certain(notes).Select(n => new ValueTuple<string?, int?>(n.Lot, n.Depot)));
        Check(notes.Select(n => n.Depot), _worlds.Certain(notes).Select(n => n.Depot));
    }

    [Theory]
    [MemberData(nameof(Sizes))]
    public void SelectMany_CertainData_EqualsSystemLinq(int left, int right)
    {
        Note[] notes = Notes(left);
        Card[] cards = Cards(Math.Min(right, 50));
        UncertainSet<Note> set = _worlds.Certain(notes);
        UncertainSet<Card> other = _worlds.Certain(cards);

        Check(notes.SelectMany(n => n.Fittings), set.SelectMany(n => n.Fittings));
        Check(notes.SelectMany(n => n.Fittings, (n, f) => new { n.Lot, f }), set.SelectMany(n => n.Fittings, (n, f) => new { n.Lot, f }));
        Check(
            notes.SelectMany(n => cards, (n, c) => new { n.Depot, c.Vessel }),
            set.SelectMany(n => other, (n, c) => new { n.Depot, c.Vessel }));
        Note[] few = [.. notes.Take(50)];
        Check(
            few.SelectMany(n => cards.Where(c => c.Lot == n.Lot), (n, c) => new { n.Id, c.Vessel }),
            _worlds.Certain(few).SelectMany(n => other.Where(c => c.Lot == n.Lot), (n, c) => new { n.Id, c.Vessel }));
    }

    [Theory]
    [MemberData(nameof(Sizes))]
    public void Join_CertainData_EqualsSystemLinq(int left, int right)
    {
        Note[] notes = Notes(left);
        Card[] cards = Cards(right);
        UncertainSet<Note> set = _worlds.Certain(notes);
        UncertainSet<Card> other = _worlds.Certain(cards);

        // Null keys match nothing; composite keys with a null part do.
        Check(
            notes.Join(cards, n => n.Lot, c => c.Lot, (n, c) => new { n.Id, c.Vessel }),
            set.Join(other, n => n.Lot, c => c.Lot, (n, c) => new { n.Id, c.Vessel }));
        Check(
            notes.Join(cards, n => n.Lot, c => c.Lot, (n, c) => new { n.Id, c.Vessel }, StringComparer.OrdinalIgnoreCase),
            set.Join(other, n => n.Lot, c => c.Lot, (n, c) => new { n.Id, c.Vessel }, StringComparer.OrdinalIgnoreCase));
        Check(
            notes.Join(cards, n => new { n.Lot, n.Depot }, c => new { c.Lot, c.Depot }, (n, c) => c.Vessel),
            set.Join(other, n => new { n.Lot, n.Depot }, c => new { c.Lot, c.Depot }, (n, c) => c.Vessel));
    }

    [Theory]
    [MemberData(nameof(Sizes))]
    public void LeftJoin_CertainData_EqualsSystemLinq(int left, int right)
    {
        Note[] notes = Notes(left);
        Card[] cards = Cards(right);

        Check(
            notes.LeftJoin(cards, n => n.Lot, c => c.Lot, (n, c) => new { n.Id, c.Vessel }),
            _worlds.Certain(notes).LeftJoin(_worlds.Certain(cards), n => n.Lot, c => c.Lot, (n, c) => new { n.Id, c.Vessel }));
        Check(
            cards.LeftJoin(notes, c => c.Depot, n => n.Depot, (c, n) => new { c.Vessel, Lot = n == null ? "none" : n.Lot }),
            _worlds.Certain(cards).LeftJoin(
                _worlds.Certain(notes), c => c.Depot, n => n.Depot, (c, n) => new { c.Vessel, Lot = n == null ? "none" : n.Lot }));
    }

    [Theory]
    [MemberData(nameof(Sizes))]
    public void SemiJoinAndAntiJoin_CertainData_EqualSystemLinq(int left, int right)
    {
        Note[] notes = Notes(left);
        Card[] cards = Cards(right);
        UncertainSet<Note> set = _worlds.Certain(notes);
        UncertainSet<Card> other = _worlds.Certain(cards);
        HashSet<string?> lots = [.. cards.Select(c => c.Lot).Where(lot => lot != null)];
        HashSet<string?> anyCase = new(lots, StringComparer.OrdinalIgnoreCase);

        Check(notes.Where(n => lots.Contains(n.Lot)), set.SemiJoin(other, n => n.Lot, c => c.Lot));
        Check(notes.Where(n => !lots.Contains(n.Lot)), set.AntiJoin(other, n => n.Lot, c => c.Lot));
        Check(
            notes.Where(n => n.Lot != null && anyCase.Contains(n.Lot)),
            set.SemiJoin(other, n => n.Lot, c => c.Lot, StringComparer.OrdinalIgnoreCase));
        Check(
            notes.Where(n => n.Lot == null || !anyCase.Contains(n.Lot)),
            set.AntiJoin(other, n => n.Lot, c => c.Lot, StringComparer.OrdinalIgnoreCase));
    }

    [Theory]
    [MemberData(nameof(Sizes))]
    public void SetOperations_CertainData_EqualSystemLinq(int left, int right)
    {
        string?[] first = [.. Notes(left).Select(n => n.Lot)];
        string?[] second = [.. Cards(right).Select(c => c.Lot)];
        UncertainSet<string?> set = _worlds.Certain(first);
        UncertainSet<string?> other = _worlds.Certain(second);

        Check(first.Distinct(), set.Distinct());
        Check(first.Union(second), set.Union(other));
        Check(first.Intersect(second), set.Intersect(other));
        Check(first.Except(second), set.Except(other));
        Check(second.Except(first), other.Except(set));
    }

    [Theory]
    [MemberData(nameof(Sizes))]
    public void Questions_CertainData_EqualSystemLinq(int left, int right)
    {
        string?[] lots = [.. Notes(left).Select(n => n.Lot)];
        UncertainSet<string?> set = _worlds.Certain(lots);
        string? wanted = right % 2 == 0 ? "lot3" : null;

        Check(lots.Any(), set.Any());
        Check(lots.Any(lot => lot == wanted), set.Any(lot => lot == wanted));
        Check(lots.All(lot => lot != "LOT9"), set.All(lot => lot != "LOT9"));
        Check(lots.Contains(wanted), set.Contains(wanted));
        Check(!lots.Contains(wanted), !set.Contains(wanted));
    }

    private static Note[] Notes(int count) =>
        [.. Enumerable.Range(0, count).Select(i => new Note(
            i, i % 11 == 3 ? null : $"{(i % 2 == 0 ? "lot" : "LOT")}{i % 7}", i % 5 == 4 ? null : i % 6, [i % 3, i % 4]))];

    private static Card[] Cards(int count) =>
        [.. Enumerable.Range(0, count).Select(i => new Card(
            i % 13 == 1 ? null : $"lot{i % 9}", i % 4 == 3 ? null : i % 8, $"vessel{i % 20}"))];

    private static void Check<T>(IEnumerable<T> expected, UncertainSet<T> actual)
    {
        IReadOnlyList<Answer<T>> answers = actual.Evaluate();

        // In order of first appearance wherever System.Linq's is.
        Assert.Equal(expected.Distinct(), answers.Select(answer => answer.Value));
        Assert.All(answers, answer => Assert.Equal((1.0, 0.0), (answer.Probability.Value, answer.Probability.Complement)));
        Assert.All(actual.Derive(), record => Assert.Equal(LineageKind.True, record.Lineage.Kind));
    }

    private static void Check(bool expected, YesNoQuestion actual)
    {
        Probability probability = actual.Evaluate().Probability;

        Assert.Equal(expected ? 1 : 0, probability.Value);
        Assert.Equal(expected ? 0 : 1, probability.Complement);
    }
}
