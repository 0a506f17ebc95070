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

    public static Conjunction Of(Conjunction left, Conjunction right)
    {
        var union = new UnionAtom(left, right);
        return new Conjunction(union.Split(left.Value, right.Value)) { Atoms = [union] };
    }

    private Expression Split(Expression left, Expression right)
    {
        if (Structure.Parts(left) is { } leftParts
            && Structure.Parts(right) is { } rightParts
            && left is NewExpression created
            && created.Constructor == ((NewExpression)right).Constructor)
        {
            return created.Update(leftParts.Zip(rightParts, Split));
        }

        ParameterExpression row = Expression.Parameter(left.Type, $"union{Fields.Count}");
        Fields.Add((row, left, right));
        return row;
    }
}
