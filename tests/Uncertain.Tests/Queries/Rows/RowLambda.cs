using System.Linq.Expressions;
using System.Runtime.CompilerServices;

namespace Uncertain.Tests.Queries.Rows;

/// <summary>
/// A lambda on a row, written once in C#: it runs on <see cref="Row"/> in the oracle and is rewritten to the row type under test for
/// the library.
/// </summary>
public sealed class RowLambda<TResult>
{
    private readonly Expression<Func<Row, TResult>> _tree;

    public RowLambda(Expression<Func<Row, TResult>> tree, [CallerArgumentExpression(nameof(tree))] string text = "")
    {
        _tree = tree;
        Text = text;
        Run = tree.Compile();
    }

    public string Text { get; }

    public Func<Row, TResult> Run { get; }

    public Expression<Func<TRow, TResult>> For<TRow>(Shape<TRow> shape)
    {
        ParameterExpression row = Expression.Parameter(typeof(TRow), _tree.Parameters[0].Name);
        return Expression.Lambda<Func<TRow, TResult>>(On(shape, row), row);
    }

    /// <summary>The lambda's body on an expression of the row type under test.</summary>
    public Expression On(Shape shape, Expression row) => new RowRewriter(shape, _tree.Parameters, [row]).Visit(_tree.Body);

    /// <summary>The body's text with another name for the parameter.</summary>
    public string BodyText(string parameter)
    {
        string name = _tree.Parameters[0].Name!;
        string body = Text[(Text.IndexOf("=>", StringComparison.Ordinal) + 2)..].Trim();
        return body.Replace($"{name}.", $"{parameter}.", StringComparison.Ordinal);
    }

    public override string ToString() => Text;
}
