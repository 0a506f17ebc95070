namespace Uncertain.Tests.Queries.Certain;

/// <summary>
/// Where '==' means something else than the default comparer, conditions and keys must not be taken for each other, whichever way
/// a query is run: compared with System.Linq on certain data.
/// </summary>
public sealed class EqualityTests
{
    private readonly WorldSpace _worlds = new();

    [Fact]
    public void Equality_NotANumber_IsEqualAsAKeyOnly()
    {
        double[] values = [double.NaN, 0.0, -0.0, 1];

        CheckConditionAndKey(values, values, pairs => pairs.Where(p => p.X == p.Y), pairs => pairs.Where(p => p.X == p.Y));
    }

    [Fact]
    public void Equality_NullableNotANumber_IsEqualAsAKeyOnly()
    {
        double?[] values = [double.NaN, null, 1];

        CheckConditionAndKey(values, values, pairs => pairs.Where(p => p.X == p.Y), pairs => pairs.Where(p => p.X == p.Y));
    }

    [Fact]
    public void Equality_NullStrings_AreEqualInConditionsOnly()
    {
        string?[] values = [null, "a", "A"];

        CheckConditionAndKey(values, values, pairs => pairs.Where(p => p.X == p.Y), pairs => pairs.Where(p => p.X == p.Y));
    }

    [Fact]
    public void Equality_NullableNumbers_AreEqualInConditionsOnly()
    {
        int?[] values = [null, 1, 2];

        CheckConditionAndKey(values, values, pairs => pairs.Where(p => p.X == p.Y), pairs => pairs.Where(p => p.X == p.Y));
    }

    [Fact]
    public void Equality_ClassWithEqualsButNoOperator_IsIdentityInConditions()
    {
        Label[] left = [new("a"), new("b")];
        Label[] right = [left[0], new("a"), new("b")];

        CheckConditionAndKey(left, right, pairs => pairs.Where(p => p.X == p.Y), pairs => pairs.Where(p => p.X == p.Y));
    }

    [Fact]
    public void Equality_OperatorOfItsOwn_IsUsedInConditions()
    {
        Degrees[] values = [new(0), new(360), new(90)];

        CheckConditionAndKey(values, values, pairs => pairs.Where(p => p.X == p.Y), pairs => pairs.Where(p => p.X == p.Y));
    }

    [Fact]
    public void Equality_Enumerations_AreEqualBothWays()
    {
        DayOfWeek[] values = [DayOfWeek.Monday, DayOfWeek.Friday];

        CheckConditionAndKey(values, values, pairs => pairs.Where(p => p.X == p.Y), pairs => pairs.Where(p => p.X == p.Y));
    }

    [Fact]
    public void Equality_MixedTypes_AreConverted()
    {
        int[] left = [1, 2];
        long[] right = [1, 3];

        Check(
            from x in left from y in right where x == y select (x, y),
            from x in _worlds.Certain(left) from y in _worlds.Certain(right) where x == y select new ValueTuple<int, long>(x, y));
    }

    [Fact]
    public void Equality_DecimalsOfDifferentScale_AreEqual()
    {
        decimal[] left = [1.0m, 2.50m];
        decimal[] right = [1.00m, 2.5m];

        CheckConditionAndKey(left, right, pairs => pairs.Where(p => p.X == p.Y), pairs => pairs.Where(p => p.X == p.Y));
    }

    private void CheckConditionAndKey<T>(
        T[] left, T[] right, Func<IEnumerable<(T X, T Y)>, IEnumerable<(T X, T Y)>> byLinq,
        Func<UncertainSet<Pair<T>>, UncertainSet<Pair<T>>> bySet)
    {
        UncertainSet<T> first = _worlds.Certain(left);
        UncertainSet<T> second = _worlds.Certain(right);

        Check(
            byLinq(left.SelectMany(x => right, (x, y) => (x, y))).Select(pair => new Pair<T>(pair.X, pair.Y)),
            bySet(first.SelectMany(x => second, (x, y) => new Pair<T>(x, y))));
        Check(
            left.Join(right, x => x, y => y, (x, y) => new Pair<T>(x, y)),
            first.Join(second, x => x, y => y, (x, y) => new Pair<T>(x, y)));
        Check(left.Intersect(right), first.Intersect(second));
        Check(left.Except(right), first.Except(second));
    }

    private static void Check<T>(IEnumerable<T> expected, UncertainSet<T> actual)
    {
        T[] wanted = [.. expected.Distinct()];

        Assert.Equal(wanted, actual.Derive().Select(record => record.Value));
        Assert.Equal(wanted, actual.Evaluate().Select(answer => answer.Value));
    }
}
