using System.Buffers.Binary;
using System.Linq.Expressions;
using System.Reflection;
using System.Runtime.CompilerServices;

namespace Uncertain.Planning.Calculus;

/// <summary>
/// What is known of composite values: an anonymous type, tuple or positional record built from parts is equal to another one
/// exactly when the parts are, and gives the parts back through its members.
/// </summary>
internal static class Structure
{
    /// <summary>The constructor's arguments, if the expression builds a value that is its parts and nothing else; else null.</summary>
    public static IReadOnlyList<Expression>? Parts(Expression expression) =>
        expression is NewExpression { Constructor: not null, Arguments.Count: > 0 } created && MembersOf(created) is not null
            ? created.Arguments
            : null;

    /// <summary>The part that a member of a just constructed value reads, or null.</summary>
    public static Expression? MemberOf(Expression constructed, MemberInfo member)
    {
        if (constructed is not NewExpression created || MembersOf(created) is not { } members)
        {
            return null;
        }

        int index = Array.IndexOf(members, member.Name);
        return index < 0 ? null : WithType(created.Arguments[index], created.Constructor!.GetParameters()[index].ParameterType);
    }

    /// <summary>
    /// An expression in a place of a given static type. Upcasts are implied there, but what is around it may only make sense for the
    /// place's type: a cast to another class, a comparison by reference.
    /// </summary>
    public static Expression WithType(Expression expression, Type type) =>
        expression.Type == type ? expression : Expression.Convert(expression, type);

    /// <summary>The equality of two values as equalities of their parts, as far as both are constructed alike.</summary>
    public static IEnumerable<Equality> Pairs(Expression left, Expression right, bool nullsMatch)
    {
        if (left.Type == right.Type
            && Parts(left) is { } leftParts
            && Parts(right) is { } rightParts
            && ((NewExpression)left).Constructor == ((NewExpression)right).Constructor)
        {
            // Inside a composite key nulls are compared by the key's Equals, for which two nulls are equal.
            return leftParts.Zip(rightParts, (l, r) => Pairs(l, r, nullsMatch: true)).SelectMany(pairs => pairs);
        }

        return [new Equality(left, right, nullsMatch)];
    }

    /// <summary>Whether == on a type is the same as its default comparer; it is not for floating point (NaN).</summary>
    public static bool OperatorIsDefaultEquality(Type type)
    {
        type = Nullable.GetUnderlyingType(type) ?? type;
        return type.IsEnum
            || type == typeof(string) || type == typeof(decimal) || type == typeof(Guid)
            || type == typeof(DateTime) || type == typeof(DateOnly) || type == typeof(TimeOnly) || type == typeof(TimeSpan)
            || (type.IsPrimitive && type != typeof(double) && type != typeof(float));
    }

    /// <summary>
    /// Whether equal values of a type have equal members: not known where the type's author wrote its own Equals.
    /// </summary>
    public static bool EqualValuesHaveEqualMembers(Type type)
    {
        if (type.IsPrimitive || type.IsEnum || type == typeof(string) || IsTuple(type))
        {
            return true;
        }

        MethodInfo[] equals = [.. type.GetMethods(BindingFlags.Public | BindingFlags.Instance)
            .Where(method => method.Name == nameof(Equals) && method.GetParameters().Length == 1)];
        return equals.All(method => method.DeclaringType == typeof(object)
            || method.DeclaringType == typeof(ValueType)
            || method.IsDefined(typeof(CompilerGeneratedAttribute))
            || IsAnonymous(method.DeclaringType!));
    }

    /// <summary>Whether an expression makes an object that is equal to nothing but itself, so that evaluating it once or twice differs.</summary>
    public static bool MakesIdentity(Expression expression)
    {
        var finder = new IdentityFinder();
        finder.Visit(expression);
        return finder.Found;
    }

    // Names of the members that give the constructor's arguments back, in order; null where that is not known.
    private static string[]? MembersOf(NewExpression created)
    {
        Type type = created.Type;
        ParameterInfo[] parameters = created.Constructor!.GetParameters();
        if (IsAnonymous(type))
        {
            return [.. parameters.Select(parameter => parameter.Name!)];
        }

        if (IsTuple(type))
        {
            return parameters.Length <= 7 ? [.. Enumerable.Range(1, parameters.Length).Select(i => $"Item{i}")] : null;
        }

        return IsPositionalRecord(type, parameters) && StoresArguments(created.Constructor!)
            ? [.. parameters.Select(parameter => parameter.Name!)]
            : null;
    }

    private static bool IsAnonymous(Type type) =>
        type.IsDefined(typeof(CompilerGeneratedAttribute), inherit: false) && type.Name.Contains("AnonymousType", StringComparison.Ordinal);

    // The runtime's own: others may implement the interface as they like.
    private static bool IsTuple(Type type) => type.IsAssignableTo(typeof(ITuple)) && type.Assembly == typeof(ITuple).Assembly;

    // A record's parameters have exactly the names of its compiler-made properties, its Equals is the compiler's, and its constructor
    // stores what it gets: a property may be declared again with an initializer that computes something else from the parameter.
    private static bool IsPositionalRecord(Type type, ParameterInfo[] parameters) =>
        type.GetMethod("PrintMembers", BindingFlags.NonPublic | BindingFlags.Instance) is { } print
        && print.IsDefined(typeof(CompilerGeneratedAttribute))
        && EqualValuesHaveEqualMembers(type)
        && parameters.All(parameter =>
            type.GetProperty(parameter.Name!) is { } property
            && property.PropertyType == parameter.ParameterType
            && property.GetMethod!.IsDefined(typeof(CompilerGeneratedAttribute)))
        && type.GetFields(BindingFlags.NonPublic | BindingFlags.Public | BindingFlags.Instance).Length == parameters.Length;

    // Whether the constructor begins by storing each argument, as it is, in the backing field of the property of its name.
    private static bool StoresArguments(ConstructorInfo constructor)
    {
        ReadOnlySpan<byte> code = constructor.GetMethodBody()?.GetILAsByteArray();
        Type[] types = constructor.DeclaringType!.GetGenericArguments();
        foreach (ParameterInfo parameter in constructor.GetParameters())
        {
            // ldarg.0, ldarg, stfld
            int number = parameter.Position + 1;
            ReadOnlySpan<byte> load = number <= 3 ? [0x02, (byte)(0x02 + number), 0x7D] : [0x02, 0x0E, (byte)number, 0x7D];
            if (number > byte.MaxValue || !code.StartsWith(load) || code.Length < load.Length + sizeof(int))
            {
                return false;
            }

            int field = BinaryPrimitives.ReadInt32LittleEndian(code[load.Length..]);
            if (constructor.Module.ResolveField(field, types, null)!.Name != $"<{parameter.Name}>k__BackingField")
            {
                return false;
            }

            code = code[(load.Length + sizeof(int))..];
        }

        return true;
    }

    private sealed class IdentityFinder : ExpressionVisitor
    {
        public bool Found { get; private set; }

        protected override Expression VisitNew(NewExpression node)
        {
            Found |= node.Type.GetMethod(nameof(Equals), [typeof(object)])!.DeclaringType == typeof(object);
            return base.VisitNew(node);
        }

        protected override Expression VisitNewArray(NewArrayExpression node)
        {
            Found = true;
            return node;
        }
    }
}
