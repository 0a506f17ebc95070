using System.Linq.Expressions;
using System.Runtime.CompilerServices;

namespace Uncertain.Tests.Queries.Rows;

/// <summary>A condition on two rows, written once in C#; see <see cref="RowLambda{TResult}"/>.</summary>
public sealed class PairLambda
{
    private readonly Expression<Func<Row, Row, bool>> _tree;

    public PairLambda(Expression<Func<Row, Row, bool>> tree, [CallerArgumentExpression(nameof(tree))] string text = "")
    {
        _tree = tree;
        Text = text;
        Run = tree.Compile();
    }

    public static IReadOnlyList<PairLambda> All { get; } =
    [
        new((x, y) => x.B == y.B),
        new((x, y) => x.A == y.A),
        new((x, y) => x.C == y.C),
        new((x, y) => x.A == y.B),
        new((x, y) => x.B == y.B && x.C == y.C),
        new((x, y) => x.B < y.B),
        new((x, y) => x.B == y.B || x.A == 1),
        new((x, y) => x.B == y.B && y.B > 0),
    ];

    public string Text { get; }

    public string BodyText => Text[(Text.IndexOf("=>", StringComparison.Ordinal) + 2)..].Trim();

    public Func<Row, Row, bool> Run { get; }

    public Expression On(Shape shape, Expression first, Expression second) =>
        new RowRewriter(shape, _tree.Parameters, [first, second]).Visit(_tree.Body);
}
