using System.Linq.Expressions;

namespace Uncertain.Tests.Queries.Rows;

/// <summary>One way to write a <see cref="Row"/> as a C# type, so that the same query is tried on all kinds of row types.</summary>
public abstract class Shape
{
    public static IReadOnlyList<Shape> All { get; } =
    [
        new Shape<RowRecord>("record"),
        new Shape<RowClass>("class"),
        new Shape<RowStruct>("struct"),
        new Shape<RowRecordStruct>("record struct"),
        new Shape<(int? A, int B, string? C)>("value tuple"),
        new Shape<Tuple<int?, int, string?>>("tuple"),
        Anonymous(new { A = (int?)0, B = 0, C = (string?)"" }),
    ];

    public abstract string Name { get; }

    /// <summary>Whether the type's default is null, not a row.</summary>
    public abstract bool IsReference { get; }

    public abstract Expression Get(Expression row, string column);

    public abstract Expression Make(Expression a, Expression b, Expression c);

    public abstract IBuiltQuery Build(TestCase test);

    public sealed override string ToString() => Name;

    private static Shape Anonymous<TRow>(TRow example)
    {
        _ = example;
        return new Shape<TRow>("anonymous type");
    }
}
