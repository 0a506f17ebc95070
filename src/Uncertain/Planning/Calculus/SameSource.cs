using System.Linq.Expressions;

namespace Uncertain.Planning.Calculus;

/// <summary>
/// Set operations on two selections of one and the same source reduce to one selection: the rows of the source that satisfy
/// either, both, or only the first condition. Null where the operands are not of that form.
/// </summary>
internal static class SameSource
{
    public static Conjunction? Union(Conjunction left, Conjunction right) => Match(left, right, needsRow: false) is { } conditions
        ? left with { Conditions = [Expression.OrElse(conditions.Left, conditions.Right)] }
        : null;

    public static Conjunction? Intersection(Conjunction left, Conjunction right) => Match(left, right, needsRow: true) is { } conditions
        ? left with { Conditions = [Expression.AndAlso(conditions.Left, conditions.Right)] }
        : null;

    public static Conjunction? Difference(Conjunction left, Conjunction right) => Match(left, right, needsRow: true) is { } conditions
        ? left with { Conditions = [Expression.AndAlso(conditions.Left, Expression.Not(conditions.Right))] }
        : null;

    // For intersection and difference the value must be the row itself: a projected value may come from several rows.
    private static (Expression Left, Expression Right)? Match(Conjunction left, Conjunction right, bool needsRow)
    {
        if (left is not { Atoms: [SourceAtom leftAtom], Equalities: [], Absences: [] }
            || right is not { Atoms: [SourceAtom rightAtom], Equalities: [], Absences: [] }
            || leftAtom.Source != rightAtom.Source
            || !Structure.EqualValuesHaveEqualMembers(leftAtom.Row.Type))
        {
            return null;
        }

        LambdaExpression Rename(Expression body) => Expression.Lambda(body, rightAtom.Row);
        Expression rightValue = Substitution.Apply(Rename(right.Value), leftAtom.Row);
        if (!ExpressionComparer.Instance.Equals(left.Value, rightValue) || (needsRow && left.Value != leftAtom.Row))
        {
            return null;
        }

        return (All(left.Conditions), Substitution.Apply(Rename(All(right.Conditions)), leftAtom.Row));
    }

    private static Expression All(IEnumerable<Expression> conditions) =>
        conditions.Aggregate((Expression)Expression.Constant(true), Expression.AndAlso);
}
