using System.Linq.Expressions;
using System.Reflection;
using System.Runtime.CompilerServices;

namespace Uncertain.Worlds;

/// <summary>
/// Recognises expressions that only read members and compute with the runtime's own types: they run no code of the caller's, so they
/// are quick, and several threads may run them at once.
/// </summary>
internal sealed class PlainExpression : ExpressionVisitor
{
    private static readonly Assembly s_runtime = typeof(object).Assembly;

    private bool _isPlain = true;

    public static bool Is(Expression expression)
    {
        var visitor = new PlainExpression();
        visitor.Visit(expression);
        return visitor._isPlain;
    }

    public override Expression? Visit(Expression? node)
    {
        _isPlain &= node switch
        {
            null or ParameterExpression or ConstantExpression or ConditionalExpression or DefaultExpression => true,
            MemberExpression member => IsRead(member.Member),
            UnaryExpression unary => IsOfRuntime(unary.Method) && unary.NodeType is not (ExpressionType.Quote or ExpressionType.Throw),
            BinaryExpression binary => IsOfRuntime(binary.Method) && binary.Conversion is null,
            MethodCallExpression call => IsOfValue(call.Method),
            NewExpression created => created.Type.Assembly == s_runtime && created.Type.IsValueType,
            _ => false,
        };
        return _isPlain ? base.Visit(node) : node;
    }

    // A property that the compiler wrote only reads its field; those of the runtime's values are quick.
    private static bool IsRead(MemberInfo member) => member is FieldInfo
        || (member is PropertyInfo { GetMethod: { } getter }
            && (getter.IsDefined(typeof(CompilerGeneratedAttribute), inherit: false) || IsOfValue(getter)));

    private static bool IsOfRuntime(MethodInfo? method) => method is null || method.DeclaringType!.Assembly == s_runtime;

    private static bool IsOfValue(MethodInfo method) => method.DeclaringType is { } type && type.Assembly == s_runtime
        && (type == typeof(string) || type == typeof(Math)
            || (type.IsValueType && (type.IsPrimitive || type.Namespace == nameof(System))));
}
