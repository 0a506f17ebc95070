using System.Collections.ObjectModel;
using System.Linq.Expressions;
using System.Reflection;

namespace Uncertain.Planning.Calculus;

/// <summary>
/// Structural equality of expressions over the same rows: member access, calls, operators, constants and constructions. Other kinds
/// of expressions are equal only if they are the same object, which is always safe: they then count as different fields.
/// </summary>
internal sealed class ExpressionComparer : IEqualityComparer<Expression>
{
    public static ExpressionComparer Instance { get; } = new();

    public bool Equals(Expression? x, Expression? y)
    {
        if (ReferenceEquals(x, y))
        {
            return true;
        }

        if (x is null || y is null || x.NodeType != y.NodeType || x.Type != y.Type)
        {
            return false;
        }

        return (x, y) switch
        {
            (MemberExpression a, MemberExpression b) => SameMember(a.Member, b.Member) && Equals(a.Expression, b.Expression),
            (ConstantExpression a, ConstantExpression b) => Equals(a.Value, b.Value),
            (UnaryExpression a, UnaryExpression b) => a.Method == b.Method && Equals(a.Operand, b.Operand),
            (BinaryExpression a, BinaryExpression b) =>
                a.Method == b.Method && Equals(a.Left, b.Left) && Equals(a.Right, b.Right),
            (MethodCallExpression a, MethodCallExpression b) =>
                a.Method == b.Method && Equals(a.Object, b.Object) && AllEqual(a.Arguments, b.Arguments),
            (NewExpression a, NewExpression b) => a.Constructor == b.Constructor && AllEqual(a.Arguments, b.Arguments),
            (ConditionalExpression a, ConditionalExpression b) =>
                Equals(a.Test, b.Test) && Equals(a.IfTrue, b.IfTrue) && Equals(a.IfFalse, b.IfFalse),
            _ => false,
        };
    }

    public int GetHashCode(Expression obj) => obj switch
    {
        MemberExpression member => HashCode.Combine(obj.NodeType, member.Member.Name, member.Expression is null ? 0 : GetHashCode(member.Expression)),
        MethodCallExpression call => HashCode.Combine(obj.NodeType, call.Method, call.Arguments.Count),
        ParameterExpression => System.Runtime.CompilerServices.RuntimeHelpers.GetHashCode(obj),
        _ => HashCode.Combine(obj.NodeType, obj.Type),
    };

    private static bool SameMember(MemberInfo a, MemberInfo b) => a.MetadataToken == b.MetadataToken && a.Module == b.Module
        && a.DeclaringType == b.DeclaringType;

    private bool AllEqual(ReadOnlyCollection<Expression> a, ReadOnlyCollection<Expression> b) =>
        a.Count == b.Count && a.Zip(b).All(pair => Equals(pair.First, pair.Second));
}
