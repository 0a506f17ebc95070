using System.Linq.Expressions;
using System.Reflection;
using System.Runtime.InteropServices;

namespace Uncertain.Execution.Lambdas;

/// <summary>
/// Takes a lambda apart into its shape and its values. The shape is what lambdas of one text over the same types have in common, as a
/// flat sequence; the values are its constants, in the order of the walk: literals, and the objects that hold captured variables.
/// </summary>
/// <remarks>
/// The sequence is unambiguous: every node gives its kind, its type and as many numbers and members as its kind has, before its
/// children. Trees with kinds of nodes that C# lambdas do not have are not taken apart, nor are quoted lambdas, whose text others print.
/// </remarks>
internal sealed class ShapeReader : ExpressionVisitor
{
    private readonly List<ShapeToken> _tokens = [];
    private readonly List<object?> _values = [];
    private readonly List<ParameterExpression> _parameters = [];
    private bool _isKnown;

    /// <summary>The shape of the lambda that was read last.</summary>
    public ReadOnlySpan<ShapeToken> Shape => CollectionsMarshal.AsSpan(_tokens);

    /// <summary>The values of the lambda that was read last, copied.</summary>
    public object?[] Values => _values.Count == 0 ? [] : _values.ToArray();

    /// <summary>Reads a lambda; false where it has no shape.</summary>
    public bool TryRead(LambdaExpression lambda)
    {
        _isKnown = true;
        Visit(lambda);
        return _isKnown;
    }

    /// <summary>Forgets the lambda: a reader is kept, and what a lambda captured must not be.</summary>
    public void Clear()
    {
        _tokens.Clear();
        _values.Clear();
        _parameters.Clear();
    }

    public override Expression? Visit(Expression? node)
    {
        if (node is null)
        {
            Add(-1, null);
            return null;
        }

        Add((int)node.NodeType, node.Type);
        _isKnown &= node.NodeType is not (ExpressionType.Quote or ExpressionType.Block or ExpressionType.DebugInfo
            or ExpressionType.Dynamic or ExpressionType.Extension or ExpressionType.Goto or ExpressionType.Label
            or ExpressionType.RuntimeVariables or ExpressionType.Loop or ExpressionType.Switch or ExpressionType.Try);
        return _isKnown ? base.Visit(node) : node;
    }

    protected override Expression VisitConstant(ConstantExpression node)
    {
        _values.Add(node.Value);
        return node;
    }

    protected override Expression VisitParameter(ParameterExpression node)
    {
        int place = _parameters.LastIndexOf(node);
        if (place < 0)
        {
            // A row of the query: no lambda around it declares it.
            place = _parameters.Count;
            _parameters.Add(node);
        }

        Add(place, null);
        return node;
    }

    protected override Expression VisitLambda<T>(Expression<T> node)
    {
        _parameters.AddRange(node.Parameters);
        Visit(node.Body);
        return node;
    }

    protected override Expression VisitMember(MemberExpression node)
    {
        Add(0, node.Member);
        return base.VisitMember(node);
    }

    protected override Expression VisitMethodCall(MethodCallExpression node)
    {
        Add(node.Arguments.Count, node.Method);
        return base.VisitMethodCall(node);
    }

    protected override Expression VisitIndex(IndexExpression node)
    {
        Add(node.Arguments.Count, node.Indexer);
        return base.VisitIndex(node);
    }

    protected override Expression VisitInvocation(InvocationExpression node)
    {
        Add(node.Arguments.Count, null);
        return base.VisitInvocation(node);
    }

    protected override Expression VisitUnary(UnaryExpression node)
    {
        Add(Flags(node.IsLifted, node.IsLiftedToNull, false), node.Method);
        return base.VisitUnary(node);
    }

    protected override Expression VisitBinary(BinaryExpression node)
    {
        Add(Flags(node.IsLifted, node.IsLiftedToNull, node.Conversion is not null), node.Method);
        return base.VisitBinary(node);
    }

    protected override Expression VisitTypeBinary(TypeBinaryExpression node)
    {
        Add(0, node.TypeOperand);
        return base.VisitTypeBinary(node);
    }

    protected override Expression VisitNew(NewExpression node)
    {
        Add(node.Arguments.Count, node.Constructor);
        return base.VisitNew(node);
    }

    protected override Expression VisitNewArray(NewArrayExpression node)
    {
        Add(node.Expressions.Count, null);
        return base.VisitNewArray(node);
    }

    protected override Expression VisitListInit(ListInitExpression node)
    {
        Add(node.Initializers.Count, null);
        return base.VisitListInit(node);
    }

    protected override ElementInit VisitElementInit(ElementInit node)
    {
        Add(node.Arguments.Count, node.AddMethod);
        return base.VisitElementInit(node);
    }

    protected override Expression VisitMemberInit(MemberInitExpression node)
    {
        Add(node.Bindings.Count, null);
        return base.VisitMemberInit(node);
    }

    protected override MemberBinding VisitMemberBinding(MemberBinding node)
    {
        Add((int)node.BindingType, node.Member);
        return base.VisitMemberBinding(node);
    }

    protected override MemberMemberBinding VisitMemberMemberBinding(MemberMemberBinding node)
    {
        Add(node.Bindings.Count, null);
        return base.VisitMemberMemberBinding(node);
    }

    protected override MemberListBinding VisitMemberListBinding(MemberListBinding node)
    {
        Add(node.Initializers.Count, null);
        return base.VisitMemberListBinding(node);
    }

    private static int Flags(bool first, bool second, bool third) => (first ? 1 : 0) | (second ? 2 : 0) | (third ? 4 : 0);

    private void Add(int number, MemberInfo? member) => _tokens.Add(new ShapeToken(number, member));
}
