using System.Globalization;
using System.Linq.Expressions;
using System.Text.RegularExpressions;

namespace Uncertain.Planning;

/// <summary>Expressions and types as plans print them: short and the same in every run.</summary>
internal static partial class PlanText
{
    private const int MaxLength = 120;

    /// <summary>A lambda's body, with captured variables shown by their names.</summary>
    public static string Body(LambdaExpression lambda) => Of(lambda.Body);

    /// <summary>A lambda as 'parameter => body'; only its body where the parameter is the row that query syntax builds up.</summary>
    public static string Lambda(LambdaExpression lambda) => Clean(lambda.Parameters is [var row] && IsRowSoFar(row.Name)
        ? Text(lambda.Body)
        : $"{string.Join(", ", lambda.Parameters.Select(parameter => parameter.Name))} => {Text(lambda.Body)}");

    /// <summary>' into result', or nothing where the result only pairs what was joined, as query syntax does between clauses.</summary>
    public static string Into(LambdaExpression result) =>
        result.Body is NewExpression pair && pair.Arguments.SequenceEqual(result.Parameters)
            ? ""
            : $" into {Clean(string.Join(", ", result.Parameters.Select(p => IsRowSoFar(p.Name) ? "_" : p.Name)) + " => " + Text(result.Body))}";

    /// <summary>Any expression.</summary>
    public static string Of(Expression expression) => Clean(Text(expression));

    public static string TypeName(Type type) => type switch
    {
        { Name: var name } when name.StartsWith("<>", StringComparison.Ordinal) => "anonymous type",
        { IsGenericType: true } => $"{type.Name[..Math.Max(1, type.Name.IndexOf('`', StringComparison.Ordinal))]}<"
            + $"{string.Join(", ", type.GetGenericArguments().Select(TypeName))}>",
        _ => type.Name,
    };

    private static bool IsRowSoFar(string? parameter) => parameter?.StartsWith("<>h__", StringComparison.Ordinal) == true;

    // Constants in an expression print by the thread's culture.
    private static string Text(Expression expression)
    {
        CultureInfo culture = CultureInfo.CurrentCulture;
        try
        {
            CultureInfo.CurrentCulture = CultureInfo.InvariantCulture;
            return expression.ToString();
        }
        finally
        {
            CultureInfo.CurrentCulture = culture;
        }
    }

    private static string Clean(string text)
    {
        text = Conversion().Replace(Closure().Replace(text, ""), "$1");
        text = RowSoFar().Replace(text, "");
        text = text.Replace(" AndAlso ", " and ", StringComparison.Ordinal).Replace(" OrElse ", " or ", StringComparison.Ordinal);
        text = AnonymousType().Replace(text, "new (");
        text = Tuple().Replace(text, "(");
        return text.Length <= MaxLength ? text : string.Concat(text.AsSpan(0, MaxLength - 1), "…");
    }

    // value(Some.Class+<>c__DisplayClass1_0).bulletin: the variable's name says it all.
    [GeneratedRegex(@"value\([^()]*\)\.")]
    private static partial Regex Closure();

    // Convert(note.Id, Object): boxing and the like are the compiler's.
    [GeneratedRegex(@"Convert\(([^(),]*), [\w`]+\)")]
    private static partial Regex Conversion();

    // <>h__TransparentIdentifier0.card: the compiler's name for the row so far adds nothing to the range variable's.
    [GeneratedRegex(@"<>h__TransparentIdentifier\d+\.")]
    private static partial Regex RowSoFar();

    [GeneratedRegex(@"new ValueTuple`\d+\(")]
    private static partial Regex Tuple();

    [GeneratedRegex(@"new <>f__AnonymousType\d+`\d+\(")]
    private static partial Regex AnonymousType();
}
