using System.Linq.Expressions;

namespace Uncertain.Planning.Calculus;

/// <summary>
/// A row that comes out of at least one of two conjunctions. Its value is split into fields as far as both sides construct it
/// alike, so that the fields can be joined and projected one by one.
/// </summary>
internal sealed class UnionAtom : Atom
{
    private UnionAtom(Conjunction left, Conjunction right)
    {
        Left = left;
        Right = right;
    }

    public Conjunction Left { get; }

    public Conjunction Right { get; }

    /// <summary>The fields: a row parameter for each, and what it is on either side.</summary>
    public List<(ParameterExpression Row, Expression Left, Expression Right)> Fields { get; } = [];

    /// <param name="left">One side.</param>
    /// <param name="right">The other side.</param>
    /// <param name="type">The type of the union's values; those of the sides may be derived from it.</param>
    public static Conjunction Of(Conjunction left, Conjunction right, Type type)
    {
        var union = new UnionAtom(left, right);
        return new Conjunction(union.Split(left.Value, right.Value, type)) { Atoms = [union] };
    }

    private Expression Split(Expression left, Expression right, Type type)
    {
        if (Structure.Parts(left) is { } leftParts
            && Structure.Parts(right) is { } rightParts
            && left is NewExpression created
            && created.Constructor == ((NewExpression)right).Constructor)
        {
            return created.Update(leftParts.Zip(rightParts).Zip(
                created.Constructor!.GetParameters(), (pair, parameter) => Split(pair.First, pair.Second, parameter.ParameterType)));
        }

        ParameterExpression row = Expression.Parameter(type, $"union{Fields.Count}");
        Fields.Add((row, Structure.WithType(left, type), Structure.WithType(right, type)));
        return row;
    }
}
