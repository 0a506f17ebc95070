using System.Linq.Expressions;
using Uncertain.Planning;
using Uncertain.Planning.Calculus;

namespace Uncertain.Inference.Safe.Analysis;

/// <summary>
/// An expression over one row that matters to the query: it is compared, projected or tested. Fields that are compared for equality
/// are one variable.
/// </summary>
internal sealed class Field(Expression expression, ParameterExpression row, int number)
{
    private Field? _same;

    public Expression Expression { get; } = expression;

    public ParameterExpression Row { get; } = row;

    /// <summary>Its number among the query's fields, from 0.</summary>
    public int Number { get; } = number;

    /// <summary>Null here means that the row joins with nothing.</summary>
    public bool DropsNulls { get; set; }

    /// <summary>The field that stands for all that are equal to this one.</summary>
    public Field Representative => _same is null ? this : _same = _same.Representative;

    /// <summary>Short name for people: the last member, else the expression.</summary>
    public string Name => Expression switch
    {
        MemberExpression member => member.Member.Name,
        ParameterExpression whole => $"{whole.Name} record",
        _ => PlanText.Of(Expression),
    };

    /// <exception cref="NoSafePlanException">The fields are of different types, for example a class and one derived from it.</exception>
    public void MakeSame(Field other)
    {
        if (Expression.Type != other.Expression.Type)
        {
            throw new NoSafePlanException(
                $"{Name} and {other.Name} are compared, and are of different types ({PlanText.TypeName(Expression.Type)} and "
                + $"{PlanText.TypeName(other.Expression.Type)}); a safe plan needs equal ones");
        }

        Field left = Representative;
        Field right = other.Representative;
        if (left != right)
        {
            right._same = left;
        }
    }
}
