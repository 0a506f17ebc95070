using System.Linq.Expressions;

namespace Uncertain.Tests.Queries.Rows;

/// <summary>A new row from a row, each column by a term.</summary>
public sealed record Projection(RowLambda<int?> A, RowLambda<int> B, RowLambda<string?> C)
{
    public static Projection Identity { get; } = new(Terms.A[0], Terms.B[0], Terms.C[0]);

    public Row Run(Row row) => new(A.Run(row), B.Run(row), C.Run(row));

    public Expression<Func<TRow, TRow>> For<TRow>(Shape<TRow> shape)
    {
        ParameterExpression row = Expression.Parameter(typeof(TRow), "x");
        return Expression.Lambda<Func<TRow, TRow>>(shape.Make(A.On(shape, row), B.On(shape, row), C.On(shape, row)), row);
    }

    public string Text(string parameter) => $"new Row({A.BodyText(parameter)}, {B.BodyText(parameter)}, {C.BodyText(parameter)})";

    public IEnumerable<Projection> Simpler()
    {
        if (A != Terms.A[0])
        {
            yield return this with { A = Terms.A[0] };
        }

        if (B != Terms.B[0])
        {
            yield return this with { B = Terms.B[0] };
        }

        if (C != Terms.C[0])
        {
            yield return this with { C = Terms.C[0] };
        }
    }
}
