using System.Linq.Expressions;
using Uncertain.Planning;
using Uncertain.Planning.Calculus;

namespace Uncertain.Inference.Safe.Analysis;

/// <summary>All fields of a query, each expression once.</summary>
internal sealed class FieldTable
{
    private readonly Dictionary<Expression, Field> _fields = new(ExpressionComparer.Instance);
    private readonly Dictionary<ParameterExpression, List<Field>> _ofRow = [];

    public int Count => _fields.Count;

    /// <summary>The fields of a row, in the order in which they were found.</summary>
    public IReadOnlyList<Field> OfRow(ParameterExpression row) => _ofRow.TryGetValue(row, out List<Field>? fields) ? fields : [];

    /// <summary>The field for an expression over exactly one row.</summary>
    public Field Of(Expression expression)
    {
        if (_fields.TryGetValue(expression, out Field? field))
        {
            return field;
        }

        if (Rows.In(expression) is not [var row])
        {
            throw new NoSafePlanException(
                $"'{PlanText.Of(expression)}' combines fields of several sets, or of none, where a safe plan needs one field; "
                + "select or join on the fields themselves");
        }

        if (Structure.MakesIdentity(expression))
        {
            throw new NoSafePlanException(
                $"'{PlanText.Of(expression)}' makes a new object that equals nothing but itself; use a record, tuple or anonymous type");
        }

        field = new Field(expression, row, _fields.Count);
        _fields.Add(expression, field);
        if (!_ofRow.TryGetValue(row, out List<Field>? ofRow))
        {
            _ofRow.Add(row, ofRow = []);
        }

        ofRow.Add(field);
        return field;
    }

    /// <summary>The field for an expression, if the query uses it.</summary>
    public Field? Find(Expression expression) => _fields.GetValueOrDefault(expression);

    /// <summary>
    /// Rewrites an expression over several rows as one over fields: each largest part over a single row becomes a field, and the
    /// parameter made for it stands in its place.
    /// </summary>
    /// <param name="expression">The expression.</param>
    /// <param name="mustDetermine">
    /// Whether equal results must mean equal fields; then only constructions of anonymous types, tuples and records may combine fields.
    /// </param>
    public Template TemplateOf(Expression expression, bool mustDetermine)
    {
        var builder = new TemplateBuilder(this, mustDetermine);
        return new Template(builder.Visit(expression), builder.Fields);
    }

    private sealed class TemplateBuilder(FieldTable table, bool mustDetermine) : ExpressionVisitor
    {
        // Parameters of lambdas inside the expression: what uses them is no field of a row.
        private readonly HashSet<ParameterExpression> _bound = [];

        public List<(ParameterExpression Parameter, Field Field)> Fields { get; } = [];

        public override Expression Visit(Expression? node)
        {
            if (node is null)
            {
                return null!;
            }

            IReadOnlyList<ParameterExpression> found = Rows.In(node);
            List<ParameterExpression> rows = [.. found.Where(row => !_bound.Contains(row))];
            if (rows.Count == 0)
            {
                return node;
            }

            if (Structure.Parts(node) is not null)
            {
                return base.Visit(node);
            }

            if (found.Count == 1)
            {
                Field field = table.Of(node);
                ParameterExpression parameter = Expression.Parameter(node.Type);
                Fields.Add((parameter, field));
                return parameter;
            }

            return mustDetermine
                ? throw new NoSafePlanException(
                    $"the result '{PlanText.Of(node)}' combines fields of several sets, and different fields may give equal results; "
                    + "select the fields themselves")
                : base.Visit(node);
        }

        protected override Expression VisitLambda<TDelegate>(Expression<TDelegate> node)
        {
            _bound.UnionWith(node.Parameters);
            return base.VisitLambda(node);
        }

        // The construction inside an initialization cannot become a field by itself; its arguments can.
        protected override Expression VisitMemberInit(MemberInitExpression node) =>
            node.Update((NewExpression)VisitNew(node.NewExpression), Visit(node.Bindings, VisitMemberBinding));

        protected override Expression VisitListInit(ListInitExpression node) =>
            node.Update((NewExpression)VisitNew(node.NewExpression), Visit(node.Initializers, VisitElementInit));
    }
}
