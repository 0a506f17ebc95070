using System.Linq.Expressions;

namespace Uncertain.Tests.Queries.Rows;

/// <summary>A new row from two rows: each column by a term on the first or on the second.</summary>
/// <param name="Columns">The terms.</param>
/// <param name="FromSecond">Bit i is set where column i is taken from the second row.</param>
public sealed record PairProjection(Projection Columns, int FromSecond)
{
    /// <summary>What stands in for the columns of a second row that is null.</summary>
    private static readonly Row s_missing = new(-1, -1, "missing");

    /// <summary>The row of a pair; <paramref name="second"/> is null where a left join has no match of a reference type.</summary>
    public Row Run(Row first, Row? second) => new(
        !Second(0) ? Columns.A.Run(first) : second is { } a ? Columns.A.Run(a) : s_missing.A,
        !Second(1) ? Columns.B.Run(first) : second is { } b ? Columns.B.Run(b) : s_missing.B,
        !Second(2) ? Columns.C.Run(first) : second is { } c ? Columns.C.Run(c) : s_missing.C);

    public Expression<Func<TRow, TRow, TRow>> For<TRow>(Shape<TRow> shape, bool secondMayBeNull = false)
    {
        ParameterExpression first = Expression.Parameter(typeof(TRow), "x");
        ParameterExpression second = Expression.Parameter(typeof(TRow), "y");
        return Expression.Lambda<Func<TRow, TRow, TRow>>(On(shape, first, second, secondMayBeNull && shape.IsReference), first, second);
    }

    public Expression On(Shape shape, Expression first, Expression second, bool secondMayBeNull = false)
    {
        return shape.Make(
            Second(0) ? Guard(Columns.A.On(shape, second), s_missing.A) : Columns.A.On(shape, first),
            Second(1) ? Guard(Columns.B.On(shape, second), s_missing.B) : Columns.B.On(shape, first),
            Second(2) ? Guard(Columns.C.On(shape, second), s_missing.C) : Columns.C.On(shape, first));

        Expression Guard(Expression value, object? missing) => !secondMayBeNull
            ? value
            : Expression.Condition(
                Expression.ReferenceEqual(second, Expression.Constant(null, second.Type)),
                Expression.Constant(missing, value.Type),
                value);
    }

    public string Text(string first, string second)
    {
        string a = Columns.A.BodyText(Second(0) ? second : first);
        string b = Columns.B.BodyText(Second(1) ? second : first);
        string c = Columns.C.BodyText(Second(2) ? second : first);
        return $"new Row({a}, {b}, {c})";
    }

    public IEnumerable<PairProjection> Simpler()
    {
        foreach (Projection columns in Columns.Simpler())
        {
            yield return this with { Columns = columns };
        }

        for (int column = 0; column < 3; column++)
        {
            if (Second(column))
            {
                yield return this with { FromSecond = FromSecond & ~(1 << column) };
            }
        }
    }

    private bool Second(int column) => (FromSecond >> column & 1) != 0;
}
