using System.Linq.Expressions;
using System.Runtime.CompilerServices;
using Uncertain.Execution.Lambdas;

namespace Uncertain.Tests.Execution;

/// <summary>Delegates shared by shape: each lambda must do what it does when it is compiled by itself.</summary>
public sealed class DelegateCacheTests
{
    private sealed record Reading(string Slip, int Lot, int Page)
    {
        public List<int> Marks { get; init; } = [Lot];

        public int? Repeat => Lot > 2 ? Lot : null;
    }

    private sealed record Slip(string Name, int Lot, int Page);

    private sealed class Held;

    private static readonly Reading[] s_readings = [new("S1", 1, 9), new("S2", 3, 2), new("S3", 7, 7)];

    [Fact]
    public void Of_SameShape_IsOneDelegateWithOwnValues()
    {
        Func<int, Func<Reading, bool>> make = limit => DelegateCache.Of<Reading, bool>(reading => reading.Lot > limit);

        Func<Reading, bool> above0 = make(0);
        Func<Reading, bool> above5 = make(5);

        Assert.Equal([true, true, true], s_readings.Select(above0));
        Assert.Equal([false, false, true], s_readings.Select(above5));
    }

    [Fact]
    public void Of_LambdaWithoutValues_IsTheSameDelegateEachTime()
    {
        Func<Func<Reading, int>> make = () => DelegateCache.Of<Reading, int>(reading => reading.Page - reading.Lot);

        Assert.Same(make(), make());
    }

    [Fact]
    public void Of_CapturedVariable_IsReadWhenTheDelegateRuns()
    {
        int limit = 5;
        Func<Reading, bool> above = DelegateCache.Of<Reading, bool>(reading => reading.Lot > limit);
        Assert.False(above(s_readings[1]));

        limit = 2;

        Assert.True(above(s_readings[1]));
    }

    [Fact]
    public void Of_ConstantsOfTreesMadeByHand_AreOwn()
    {
        ParameterExpression row = Expression.Parameter(typeof(Reading), "row");
        Expression lot = Expression.Property(row, nameof(Reading.Lot));

        for (int i = 0; i < 10; i++)
        {
            Func<Reading, int> sum = DelegateCache.Of(Expression.Lambda<Func<Reading, int>>(Expression.Add(lot, Expression.Constant(i)), row));
            Assert.Equal(3 + i, sum(s_readings[1]));
        }
    }

    [Fact]
    public void Of_SameTextOverOtherTypes_IsAnotherDelegate()
    {
        Assert.Equal(4, Add<int>((x, y) => x + y)(1, 3));
        Assert.Equal(4.5, Add<double>((x, y) => x + y)(1, 3.5));
        Assert.Equal(7, DelegateCache.Of<Reading, int>(x => x.Lot)(s_readings[2]));
        Assert.Equal(8, DelegateCache.Of<Slip, int>(x => x.Lot)(new Slip("a", 8, 1)));

        static Func<T, T, T> Add<T>(Expression<Func<T, T, T>> add) => DelegateCache.Of(add);
    }

    [Fact]
    public void Of_GenericMethods_KeepTheirTypes()
    {
        Assert.True(IsOne(1)(1));
        Assert.True(IsOne("1")("1"));
        Assert.True(IsOne(1L)(1L));
        Assert.False(IsOne("2")("1"));
        Assert.False(IsOne<object>("1")(1));

        static Func<T, bool> IsOne<T>(T one) => DelegateCache.Of<T, bool>(value => EqualityComparer<T>.Default.Equals(value, one));
    }

    // Every kind of node that C# makes, with a captured value and without; each twice, so that the second one meets the first one's entry.
    [Fact]
    public void Of_EveryKindOfLambda_DoesWhatItDoesAlone()
    {
        for (int round = 0; round < 2; round++)
        {
            int number = 3 + round;
            string text = $"S{number}";
            int[] lots = [1, number];
            AssertAlike(x => x.Lot + number);
            AssertAlike(x => checked(x.Lot * number));
            AssertAlike(x => number - x.Lot);
            AssertAlike(x => x.Lot - number);
            AssertAlike(x => (long)x.Lot);
            AssertAlike(x => (object)x.Lot);
            AssertAlike(x => -x.Lot);
            AssertAlike(x => ~x.Lot);
            AssertAlike(x => x.Lot > number ? x.Slip : text);
            AssertAlike(x => x.Lot > number ? text : x.Slip);
            AssertAlike(x => x.Repeat ?? number);
            AssertAlike(x => x.Repeat + number);
            AssertAlike(x => x.Repeat == number);
            AssertAlike(x => x.Lot == number && x.Slip == text);
            AssertAlike(x => x.Lot == number || x.Slip == text);
            AssertAlike(x => x.Slip + text);
            AssertAlike(x => x.Slip.Contains(text, StringComparison.Ordinal));
            AssertAlike(x => string.Concat(text, x.Slip));
            AssertAlike(x => new { x.Lot, number });
            AssertAlike(x => new { x.Lot, x.Page });
            AssertAlike(x => new Slip(text, x.Lot, number));
            AssertAlike(x => new Reading(x.Slip, x.Lot, number) { Marks = new List<int> { x.Lot, number } }.Marks[1]);
            AssertAlike(x => new Reading(x.Slip, x.Lot, x.Page) { Marks = { number } }.Marks.Count);
            AssertAlike(x => new[] { x.Lot, number }.Length);
            AssertAlike(x => new[] { x.Lot, number, x.Page }.Length);
            AssertAlike(x => new int[x.Lot].Length);
            AssertAlike(x => lots[x.Lot % 2]);
            AssertAlike(x => lots.Any(lot => lot == x.Lot));
            AssertAlike(x => lots.Any(lot => lot == x.Page));
            AssertAlike(x => lots.Where(lot => lot > 1).Sum(lot => (lot * x.Lot) + number));
            AssertAlike(x => x.Marks.Count);
            AssertAlike(x => x.Marks[0]);
            AssertAlike(x => (object)x is Reading);
            AssertAlike(x => (object)x is Slip);
            AssertAlike(x => (object)x as Slip == null);
            AssertAlike(x => default(int) + x.Lot);
            AssertAlike(x => Math.Max(x.Lot, number));
            AssertAlike(x => Math.Max(number, x.Lot));
            AssertAlike(x => Math.Min(x.Lot, number));
            AssertAlike(x => new KeyValuePair<int, int>(x.Lot, number).Value);
            AssertAlike(x => new KeyValuePair<int, int>(number, x.Lot).Value);
        }
    }

    [Fact]
    public void Of_QuotedLambda_KeepsItsText()
    {
        int number = 3;
        Func<int, Expression<Func<int, bool>>> quoted = DelegateCache.Of<int, Expression<Func<int, bool>>>(
            Quoting(x => y => y == number));

        Assert.Contains("number", quoted(1).ToString(), StringComparison.Ordinal);
        Assert.DoesNotContain("StrongBox", quoted(1).ToString(), StringComparison.Ordinal);

        static Expression<Func<int, Expression<Func<int, bool>>>> Quoting(Expression<Func<int, Expression<Func<int, bool>>>> tree) => tree;
    }

    [Fact]
    public void Of_ManyShapes_StaysBoundedAndRight()
    {
        ParameterExpression row = Expression.Parameter(typeof(int), "row");
        for (int shape = 0; shape < 3 * DelegateCache.Capacity; shape++)
        {
            // The bits of the shape's number as additions and subtractions.
            Expression body = row;
            int expected = 100;
            for (int bit = 0; bit < 12; bit++)
            {
                bool adds = ((shape >> bit) & 1) == 1;
                body = adds ? Expression.Add(body, row) : Expression.Subtract(row, body);
                expected = adds ? expected + 100 : 100 - expected;
            }

            Assert.Equal(expected, DelegateCache.Of(Expression.Lambda<Func<int, int>>(body, row))(100));
        }

        Assert.InRange(DelegateCache.Count, 1, DelegateCache.Capacity);
    }

    [Fact]
    public void Of_ManyThreads_GivesEachItsOwnValues() => Parallel.For(0, 2_000, i =>
    {
        Assert.Equal(7 * i, DelegateCache.Of<Reading, int>(reading => reading.Lot * i)(s_readings[2]));
        Assert.Equal($"S3 {i}", DelegateCache.Of<Reading, string>(reading => reading.Slip + " " + i)(s_readings[2]));
    });

    [Fact]
    public void Of_CapturedObject_IsNotKept()
    {
        WeakReference captured = Compile();

        for (int i = 0; i < 10 && captured.IsAlive; i++)
        {
            GC.Collect();
            GC.WaitForPendingFinalizers();
        }

        Assert.False(captured.IsAlive);

        [MethodImpl(MethodImplOptions.NoInlining)]
        static WeakReference Compile()
        {
            var held = new Held();
            Assert.True(DelegateCache.Of<Reading, bool>(reading => reading.Lot == 1 && held != null)(s_readings[0]));
            return new WeakReference(held);
        }
    }

    private static void AssertAlike<TResult>(Expression<Func<Reading, TResult>> lambda) =>
        Assert.Equal(s_readings.Select(lambda.Compile()), s_readings.Select(DelegateCache.Of(lambda)));
}
