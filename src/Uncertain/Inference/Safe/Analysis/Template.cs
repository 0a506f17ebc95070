using System.Linq.Expressions;
using Uncertain.Execution.Lambdas;
using Uncertain.Planning;
using Uncertain.Worlds;

namespace Uncertain.Inference.Safe.Analysis;

/// <summary>An expression over fields, to be computed from their codes.</summary>
internal sealed record Template(Expression Body, IReadOnlyList<(ParameterExpression Parameter, Field Field)> Fields)
{
    public IEnumerable<Field> Variables => Fields.Select(use => use.Field.Representative).Distinct();

    /// <summary>A function of the codes of the given variables, in their order.</summary>
    public Func<int[], TResult> Compile<TResult>(IReadOnlyList<Field> variables, Func<Field, Encoder> encoderOf)
    {
        ParameterExpression codes = Expression.Parameter(typeof(int[]), "codes");
        var decoder = new Decoder(Fields.ToDictionary(
            field => field.Parameter,
            field => encoderOf(field.Field.Representative).Decode(
                Expression.ArrayIndex(codes, Expression.Constant(IndexOf(variables, field.Field.Representative))))));
        return DelegateCache.Of(Expression.Lambda<Func<int[], TResult>>(decoder.Visit(Body), codes));
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
