using Uncertain.Inference.Safe.Codes;
using Uncertain.Inference.Safe.Steps;

namespace Uncertain.Tests.Safe;

/// <summary>The loops over code columns against System.Linq.</summary>
public sealed class RowKernelTests
{
    public static TheoryData<int, int, int> Shapes => new()
    {
        // Rows, columns, and the range of codes: few and many keys, by position and by hash, products of ranges beyond 64 bits.
        { 0, 1, 5 }, { 1, 1, 1 }, { 1000, 1, 10 }, { 1000, 2, 40 }, { 1000, 2, int.MaxValue }, { 1000, 0, 1 }, { 5000, 3, 12 },
        { 70_000, 1, int.MaxValue }, { 70_000, 2, 300 }, { 3000, 4, int.MaxValue },
    };

    [Theory]
    [MemberData(nameof(Shapes))]
    public void Of_AnyColumns_NumbersCombinationsInOrderOfAppearance(int rows, int columns, int range)
    {
        int[][] codes = Columns(rows, columns, range);
        Workspace workspace = Workspace.Take(new RunControl(EvaluationOptions.Default, default));

        RowKeys keys = RowKeys.Of(codes, rows, workspace, out int[] keyOf);

        var expected = new Dictionary<string, int>();
        var firstRows = new List<int>();
        for (int row = 0; row < rows; row++)
        {
            string combination = Text(codes, row);
            if (expected.TryAdd(combination, expected.Count))
            {
                firstRows.Add(row);
            }

            Assert.Equal(expected[combination], keyOf[row]);
            Assert.Equal(expected[combination], keys.Find(codes, row));
        }

        Assert.Equal(expected.Count, keys.Count);
        Assert.Equal(firstRows, keys.FirstRows(keyOf.AsSpan(0, rows), workspace).ToArray());
        int[][] others = Columns(100, columns, range, seed: 2);
        var found = new int[100];
        keys.FindAll(others, 0, found);
        for (int row = 0; row < found.Length; row++)
        {
            Assert.Equal(expected.GetValueOrDefault(Text(others, row), -1), found[row]);
        }
    }

    [Theory]
    [InlineData(300, 1_000_000)]
    [InlineData(40_000, 20_000)]
    [InlineData(40_000, int.MaxValue)]
    public void Find_FewRepeats_GivesEachWithItsFirstRow(int rows, int range)
    {
        int[][] codes = Columns(rows, 2, range);
        codes[0][rows - 1] = codes[0][3];
        codes[1][rows - 1] = codes[1][3];
        Workspace workspace = Workspace.Take(new RunControl(EvaluationOptions.Default, default));

        RowPairs? repeats = Repeats.Find(codes, rows, workspace, out int most);

        Assert.NotNull(repeats);
        var groups = Enumerable.Range(0, rows).GroupBy(row => Text(codes, row)).ToList();
        (int, int)[] expected = [.. groups.SelectMany(group => group.Skip(1).Select(row => (row, group.First()))).Order()];
        Assert.Equal(expected, repeats.Left.ToArray().Zip(repeats.Right.ToArray()));
        Assert.Equal(groups.Max(group => group.Count()), most);
    }

    [Fact]
    public void Find_ManyRepeats_IsLeftToNumbering()
    {
        Workspace workspace = Workspace.Take(new RunControl(EvaluationOptions.Default, default));

        Assert.Null(Repeats.Find(Columns(1000, 2, 10), 1000, workspace, out _));
    }

    [Fact]
    public void Rent_AfterTakingBack_GivesTheSameArraysWithinTheBudget()
    {
        var control = new RunControl(new EvaluationOptions { MemoryBudget = 10_000_000 }, default);
        Workspace workspace = Workspace.Take(control);
        double[] first = workspace.Rent<double>(300_000);
        double[] second = workspace.Rent<double>(300_000);
        Assert.NotSame(first, second);

        workspace.TakeBackAll();

        Assert.Same(first, workspace.Rent<double>(290_000));
        Assert.Throws<EvaluationRefusedException>(() => workspace.Rent<double>(1_000_000));
    }

    private static int[][] Columns(int rows, int columns, int range, int seed = 1)
    {
        var random = new Random(seed);
        return [.. Enumerable.Range(0, columns).Select(_ =>
            Enumerable.Range(0, rows).Select(_ => range == int.MaxValue ? random.Next(int.MinValue, range) : random.Next(range) - 3).ToArray())];
    }

    private static string Text(int[][] codes, int row) => string.Join(' ', codes.Select(column => column[row]));
}
