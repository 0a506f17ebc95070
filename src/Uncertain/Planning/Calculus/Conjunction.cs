using System.Collections.Immutable;
using System.Linq.Expressions;

namespace Uncertain.Planning.Calculus;

/// <summary>
/// A query as a formula: rows for all atoms are there, equalities and conditions hold, absences hold; then the value is an answer.
/// What does not occur in the value is existentially quantified. Immutable.
/// </summary>
internal sealed record Conjunction(Expression Value)
{
    public ImmutableList<Atom> Atoms { get; init; } = [];

    public ImmutableList<Equality> Equalities { get; init; } = [];

    public ImmutableList<Expression> Conditions { get; init; } = [];

    public ImmutableList<Absence> Absences { get; init; } = [];

    public static Conjunction Of(SourceAtom atom) => new(atom.Row) { Atoms = [atom] };

    /// <summary>A lambda's body with this conjunction's value for its parameter.</summary>
    public Expression Apply(LambdaExpression lambda) => Substitution.Apply(lambda, Value);

    /// <summary>Both conjunctions at once; the value is still this one's.</summary>
    public Conjunction And(Conjunction other) => this with
    {
        Atoms = Atoms.AddRange(other.Atoms),
        Equalities = Equalities.AddRange(other.Equalities),
        Conditions = Conditions.AddRange(other.Conditions),
        Absences = Absences.AddRange(other.Absences),
    };

    /// <summary>With a further condition, whose equalities between rows become equalities of the conjunction.</summary>
    public Conjunction Where(Expression condition)
    {
        if (AsBoth(condition) is { } both)
        {
            return Where(both.Left).Where(both.Right);
        }

        return AsEquality(condition) is { } equality
            ? this with { Equalities = Equalities.Add(equality) }
            : this with { Conditions = Conditions.Add(condition) };
    }

    /// <summary>Joined with another conjunction on keys; the value is still this one's.</summary>
    public Conjunction JoinedWith(Conjunction inner, Expression outerKey, Expression innerKey, bool nullsMatch) => And(inner) with
    {
        Equalities = Equalities.AddRange(inner.Equalities).AddRange(Structure.Pairs(outerKey, innerKey, nullsMatch)),
    };

    /// <summary>Without the rows for which the other conjunction has one with the same key.</summary>
    public Conjunction Without(Conjunction inner, Expression outerKey, Expression innerKey, bool nullsMatch) => this with
    {
        Absences = Absences.Add(new Absence(inner, [.. Structure.Pairs(outerKey, innerKey, nullsMatch)])),
    };

    /// <summary>The condition as 'left and right', or null.</summary>
    public static BinaryExpression? AsBoth(Expression condition) =>
        condition is BinaryExpression { NodeType: ExpressionType.AndAlso, Method: null } both ? both : null;

    /// <summary>
    /// x == y in a condition, where the operator means the same as the default comparer and the sides come from different rows; or null.
    /// </summary>
    public static Equality? AsEquality(Expression condition) =>
        condition is BinaryExpression { NodeType: ExpressionType.Equal } equal
        && equal.Left.Type == equal.Right.Type
        && Structure.OperatorIsDefaultEquality(equal.Left.Type)
        && Rows.In(equal.Left) is [var left]
        && Rows.In(equal.Right) is [var right]
        && left != right
            ? new Equality(equal.Left, equal.Right, NullsMatch: true)
            : null;
}
