using System.Linq.Expressions;
using System.Reflection;

namespace Uncertain.Tests.Queries.Rows;

/// <summary>A shape of type <typeparamref name="TRow"/>: reads and makes rows as the C# compiler would write it in a lambda.</summary>
public sealed class Shape<TRow> : Shape
{
    private static readonly string[] s_columns = ["A", "B", "C"];
    private static readonly ConstructorInfo? s_constructor =
        typeof(TRow).GetConstructor([typeof(int?), typeof(int), typeof(string)]);

    private readonly Func<Row, TRow> _from;
    private readonly Func<TRow, Row> _to;

    public Shape(string name)
    {
        Name = name;
        ParameterExpression row = Expression.Parameter(typeof(Row), "row");
        _from = Expression.Lambda<Func<Row, TRow>>(
            Make(Expression.Property(row, "A"), Expression.Property(row, "B"), Expression.Property(row, "C")), row).Compile();
        ParameterExpression value = Expression.Parameter(typeof(TRow), "value");
        _to = Expression.Lambda<Func<TRow, Row>>(
            Expression.New(typeof(Row).GetConstructor([typeof(int?), typeof(int), typeof(string)])!, s_columns.Select(c => Get(value, c))),
            value).Compile();
    }

    public override string Name { get; }

    public override bool IsReference => !typeof(TRow).IsValueType;

    public TRow From(Row row) => _from(row);

    public Row To(TRow row) => _to(row);

    public override Expression Get(Expression row, string column) => Expression.MakeMemberAccess(row, MemberOf(column));

    public override Expression Make(Expression a, Expression b, Expression c)
    {
        Expression[] values = [a, b, c];
        if (s_constructor is null)
        {
            return Expression.MemberInit(
                Expression.New(typeof(TRow)), s_columns.Select((column, i) => Expression.Bind(MemberOf(column), values[i])));
        }

        // As the compiler does, members are named for anonymous types only.
        return typeof(TRow).Name.StartsWith("<>", StringComparison.Ordinal)
            ? Expression.New(s_constructor, values, s_columns.Select(MemberOf))
            : Expression.New(s_constructor, values);
    }

    public override IBuiltQuery Build(TestCase test) => BuiltQuery<TRow>.Of(test, this);

    private static MemberInfo MemberOf(string column)
    {
        string item = $"Item{Array.IndexOf(s_columns, column) + 1}";
        return typeof(TRow).GetMember(column).Concat(typeof(TRow).GetMember(item)).First();
    }
}
