using System.Linq.Expressions;
using System.Reflection;
using Uncertain.Planning;
using Uncertain.Planning.Calculus;
using Uncertain.Worlds;

namespace Uncertain.Inference.Safe.Analysis;

/// <summary>
/// From a conjunction over expressions to scopes over variables: fields are collected, equal fields become one variable, and
/// conditions are split into filters on one row and conditions over several.
/// </summary>
internal sealed class QueryAnalysis
{
    private static readonly MethodInfo s_equals = ((Func<object?, object?, bool>)Equals).Method;

    private readonly FieldTable _fields = new();
    private readonly List<(Field Left, Field Right)> _equal = [];
    private readonly List<UnionPart> _unions = [];
    private readonly List<AbsencePart> _absences = [];
    private readonly HashSet<ISource> _used = [];

    private QueryAnalysis(Conjunction query)
    {
        Root = Collect(query);
        Value = _fields.TemplateOf(query.Value, mustDetermine: true);
    }

    public Scope Root { get; }

    /// <summary>The answers' value.</summary>
    public Template Value { get; }

    /// <summary>All fields have smaller numbers.</summary>
    public int FieldCount => _fields.Count;

    /// <exception cref="NoSafePlanException">The query has no form that a safe plan could be made from.</exception>
    public static QueryAnalysis Of(Conjunction query)
    {
        var analysis = new QueryAnalysis(query);
        foreach ((Field left, Field right) in analysis._equal)
        {
            left.MakeSame(right);
        }

        // Outer unions come first, so that fields found on the way down reach the inner ones.
        analysis._unions.Reverse();
        analysis._unions.ForEach(analysis.ConnectUnion);
        analysis._absences.ForEach(ConnectAbsence);
        return analysis;
    }

    private Scope Collect(Conjunction query)
    {
        var scope = new Scope();
        foreach (Atom atom in query.Atoms)
        {
            scope.Parts.Add(atom is SourceAtom source ? PartOf(source) : PartOf((UnionAtom)atom));
        }

        foreach (Equality equality in query.Equalities)
        {
            Add(scope, equality);
        }

        foreach (Expression condition in query.Conditions)
        {
            Add(scope, condition);
        }

        foreach (Absence absence in query.Absences)
        {
            var part = new AbsencePart(Collect(absence.Of), [.. absence.Binding.Select(BindingOf)]);
            scope.Parts.Add(part);
            _absences.Add(part);
        }

        return scope;
    }

    private SourcePart PartOf(SourceAtom atom)
    {
        if (atom.Source.Kind == SourceKind.Formulas)
        {
            throw new NoSafePlanException(
                $"the records of {atom.Source.Name} have lineages of their own, whose variables they may share");
        }

        if (!_used.Add(atom.Source) && atom.Source.Kind != SourceKind.Certain)
        {
            throw new NoSafePlanException($"{atom.Source.Name} is used twice, so the uses share their records' chances");
        }

        var part = new SourcePart(atom, _fields);
        if (part.IsExclusive)
        {
            // Registers the group's fields even where the query does not use them.
            _ = part.GroupFields().Count();
        }

        return part;
    }

    private UnionPart PartOf(UnionAtom atom)
    {
        var part = new UnionPart(atom, Collect(atom.Left), Collect(atom.Right), _fields);
        _unions.Add(part);
        return part;
    }

    private void Add(Scope scope, Equality equality)
    {
        if (Rows.In(equality.Left).Count == 0 || Rows.In(equality.Right).Count == 0)
        {
            Add(scope, AsCondition(equality));
            return;
        }

        Field left = _fields.Of(equality.Left);
        Field right = _fields.Of(equality.Right);
        left.DropsNulls |= !equality.NullsMatch;
        right.DropsNulls |= !equality.NullsMatch;
        _equal.Add((left, right));
    }

    private void Add(Scope scope, Expression condition)
    {
        SourcePart? single = Rows.In(condition) is [var row]
            ? scope.Parts.OfType<SourcePart>().FirstOrDefault(part => part.Atom.Row == row)
            : null;
        if (single is not null)
        {
            single.Filters.Add(condition);
        }
        else
        {
            scope.Parts.Add(new ConditionPart(condition, _fields));
        }
    }

    private (Field Outer, Field Inner) BindingOf(Equality equality)
    {
        Field inner = _fields.Of(equality.Right);
        inner.DropsNulls |= !equality.NullsMatch;
        return (_fields.Of(equality.Left), inner);
    }

    private void ConnectUnion(UnionPart union)
    {
        var sides = union.Fields.ToList().ConvertAll(field => (
            Field: field,
            Left: OnSide(field, union, own => own.Left),
            Right: OnSide(field, union, own => own.Right)));
        RequireDistinct(sides.Select(side => side.Left));
        RequireDistinct(sides.Select(side => side.Right));
        foreach ((Field field, Field left, Field right) in sides)
        {
            left.DropsNulls |= field.DropsNulls;
            right.DropsNulls |= field.DropsNulls;
            field.MakeSame(left);
            field.MakeSame(right);
        }
    }

    private Field OnSide(
        Field field, UnionPart union, Func<(ParameterExpression Row, Expression Left, Expression Right), Expression> side) =>
        _fields.Of(Substitution.Apply(
            Expression.Lambda(field.Expression, field.Row), side(union.Atom.Fields.First(own => own.Row == field.Row))));

    private static void ConnectAbsence(AbsencePart absence)
    {
        RequireDistinct(absence.Binding.Select(pair => pair.Inner));
        foreach ((Field outer, Field inner) in absence.Binding)
        {
            outer.MakeSame(inner);
        }
    }

    // One field of a part standing for two of another would equate those two where the query does not.
    private static void RequireDistinct(IEnumerable<Field> fields)
    {
        IGrouping<Field, Field>? repeated = fields.GroupBy(field => field.Representative).FirstOrDefault(group => group.Count() > 1);
        if (repeated is not null)
        {
            throw new NoSafePlanException(
                $"the field {repeated.Key.Name} of one side of a union, difference or anti-join is compared with several of the other");
        }
    }

    private static Expression AsCondition(Equality equality)
    {
        Expression left = Expression.Convert(equality.Left, typeof(object));
        Expression right = Expression.Convert(equality.Right, typeof(object));
        Expression equal = Expression.Call(s_equals, left, right);
        return equality.NullsMatch
            ? equal
            : Expression.AndAlso(equal, Expression.ReferenceNotEqual(left, Expression.Constant(null)));
    }
}
