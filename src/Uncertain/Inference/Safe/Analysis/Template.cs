using System.Linq.Expressions;
using Uncertain.Execution.Lambdas;
using Uncertain.Planning;
using Uncertain.Worlds;

namespace Uncertain.Inference.Safe.Analysis;

/// <summary>An expression over fields, to be computed from their codes.</summary>
internal sealed record Template(Expression Body, IReadOnlyList<(ParameterExpression Parameter, Field Field)> Fields)
{
    public IEnumerable<Field> Variables => Fields.Select(use => use.Field.Representative).Distinct();

    /// <summary>Whether it runs no code of the caller's.</summary>
    public bool IsPlain => PlainExpression.Is(Body);

    /// <summary>A function of the encoders and codes of the given variables, each in their order.</summary>
    public Func<Encoder[], int[], TResult> Compile<TResult>(IReadOnlyList<Field> variables)
    {
        if (Fields is [var only] && Body == only.Parameter && Body.Type == typeof(TResult))
        {
            int index = IndexOf(variables, only.Field.Representative);
            return (encoders, codes) => ((Encoder<TResult>)encoders[index]).ValueOf(codes[index]);
        }

        ParameterExpression encoders = Expression.Parameter(typeof(Encoder[]), "encoders");
        ParameterExpression codes = Expression.Parameter(typeof(int[]), "codes");
        var decoder = new Decoder(Fields.ToDictionary(
            field => field.Parameter,
            Expression (field) => ValueOf(encoders, codes, IndexOf(variables, field.Field.Representative), field.Parameter.Type)));
        return DelegateCache.Of(Expression.Lambda<Func<Encoder[], int[], TResult>>(decoder.Visit(Body), encoders, codes));
    }

    private static MethodCallExpression ValueOf(Expression encoders, Expression codes, int index, Type type)
    {
        Type encoder = typeof(Encoder<>).MakeGenericType(type);
        return Expression.Call(
            Expression.Convert(Expression.ArrayIndex(encoders, Expression.Constant(index)), encoder),
            encoder.GetMethod(nameof(Encoder<>.ValueOf))!,
            Expression.ArrayIndex(codes, Expression.Constant(index)));
    }

    /// <summary>The expression for people, with the fields as they were written.</summary>
    public override string ToString() =>
        PlanText.Of(new Decoder(Fields.ToDictionary(use => use.Parameter, use => use.Field.Expression)).Visit(Body));

    private static int IndexOf(IReadOnlyList<Field> variables, Field variable)
    {
        for (int i = 0; i < variables.Count; i++)
        {
            if (variables[i] == variable)
            {
                return i;
            }
        }

        throw new InvalidOperationException($"The variable '{variable.Name}' has no column here.");
    }

    private sealed class Decoder(Dictionary<ParameterExpression, Expression> values) : ExpressionVisitor
    {
        protected override Expression VisitParameter(ParameterExpression node) => values.GetValueOrDefault(node, node);
    }
}
