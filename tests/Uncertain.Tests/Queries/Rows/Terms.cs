namespace Uncertain.Tests.Queries.Rows;

/// <summary>What random queries compute in their lambdas; the first of each list is the simplest.</summary>
public static class Terms
{
    private static readonly List<int> s_listed = [0, 2];

    public static IReadOnlyList<RowLambda<int?>> A { get; } =
    [
        new(x => x.A),
        new(x => null),
        new(x => x.B),
        new(x => 1),
        new(x => x.A == 2 ? null : x.A),
    ];

    public static IReadOnlyList<RowLambda<int>> B { get; } =
    [
        new(x => x.B),
        new(x => 1),
        new(x => x.A ?? 0),
        new(x => x.B % 2),
        new(x => 2 - x.B),
    ];

    public static IReadOnlyList<RowLambda<string?>> C { get; } =
    [
        new(x => x.C),
        new(x => "a"),
        new(x => x.C == null ? null : x.C.ToUpperInvariant()),
    ];

    public static IReadOnlyList<RowLambda<bool>> Conditions { get; } =
    [
        new(x => true),
        new(x => x.B == 1),
        new(x => x.B != 0),
        new(x => x.A == 1),
        new(x => x.A == null),
        new(x => x.A == x.B),
        new(x => x.A < x.B),
        new(x => x.C == "a"),
        new(x => x.C == null || x.C == "A"),
        new(x => x.B == 1 || x.C == "b"),
        new(x => x.A >= 1 && x.B <= 1),
        new(x => s_listed.Contains(x.B)),
        new(x => !(x.A != null && x.B == 2)),
        new(x => false),
    ];

    public static IReadOnlyList<RowLambda<IEnumerable<int>>> Items { get; } =
    [
        new(x => Enumerable.Range(0, Math.Max(0, x.B))),
        new(x => new[] { x.B, x.B % 2 }),
        new(x => s_listed),
    ];

    public static IReadOnlyList<RowLambda<object?>> Keys { get; } =
    [
        new(x => x.B),
        new(x => x.C),
        new(x => new { x.B, x.C }),
        new(x => new { x.A, x.B, x.C }),
        new(x => new ValueTuple<int, string?>(x.B, x.C)),
    ];
}
