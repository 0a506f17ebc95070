using System.Linq.Expressions;
using System.Text.RegularExpressions;

namespace Uncertain.Planning;

/// <summary>Expressions and types as plans print them: short and the same in every run.</summary>
internal static partial class PlanText
{
    private const int MaxLength = 120;

    /// <summary>A lambda's body, with captured variables shown by their names.</summary>
    public static string Body(LambdaExpression lambda) => Clean(lambda.Body.ToString());

    /// <summary>A lambda as 'parameter => body'.</summary>
    public static string Lambda(LambdaExpression lambda) =>
        Clean($"{string.Join(", ", lambda.Parameters.Select(parameter => parameter.Name))} => {lambda.Body}");

    /// <summary>Any expression.</summary>
    public static string Of(Expression expression) => Clean(expression.ToString());

    public static string TypeName(Type type) => type switch
    {
        { Name: var name } when name.StartsWith("<>", StringComparison.Ordinal) => "anonymous type",
        { IsGenericType: true } => $"{type.Name[..Math.Max(1, type.Name.IndexOf('`', StringComparison.Ordinal))]}<"
            + $"{string.Join(", ", type.GetGenericArguments().Select(TypeName))}>",
        _ => type.Name,
    };

    private static string Clean(string text)
    {
        text = Closure().Replace(text, "");
        text = Transparent().Replace(text, "t$1");
        text = AnonymousType().Replace(text, "new (");
        return text.Length <= MaxLength ? text : string.Concat(text.AsSpan(0, MaxLength - 1), "…");
    }

    // value(Some.Class+<>c__DisplayClass1_0).bulletin: the variable's name says it all.
    [GeneratedRegex(@"value\([^()]*\)\.")]
    private static partial Regex Closure();

    // <>h__TransparentIdentifier0: the compiler's name for the row so far.
    [GeneratedRegex(@"<>h__TransparentIdentifier(\d+)")]
    private static partial Regex Transparent();

    [GeneratedRegex(@"new <>f__AnonymousType\d+`\d+\(")]
    private static partial Regex AnonymousType();
}
