using System.Linq.Expressions;
using Uncertain.Planning.Calculus;
using Uncertain.Worlds;

namespace Uncertain.Inference.Safe.Analysis;

/// <summary>A use of a source: the fields that matter of its rows, the filters on them, and what is known of its keys.</summary>
internal sealed class SourcePart(SourceAtom atom, FieldTable table) : Part
{
    private HashSet<Field>? _variables;
    private HashSet<Field>? _group;

    public ISource Source { get; } = atom.Source;

    public SourceAtom Atom { get; } = atom;

    /// <summary>Conditions on the row, each over <see cref="SourceAtom.Row"/> only.</summary>
    public List<Expression> Filters { get; } = [];

    /// <summary>The row's fields; several of them may be one variable.</summary>
    public IReadOnlyList<Field> Fields => table.OfRow(Atom.Row);

    /// <summary>A copy that is read as if it were certain, to guard what is computed beside the original.</summary>
    public bool IsGuard { get; private init; }

    public bool IsChancy => Source.Kind != SourceKind.Certain && !IsGuard;

    /// <summary>Whether the records are exclusive alternatives.</summary>
    public bool IsExclusive => Source.Kind == SourceKind.Alternatives && !IsGuard;

    /// <summary>The variables that name the group of exclusive alternatives.</summary>
    public IReadOnlySet<Field> Group => _group ??= GroupFields().Select(part => part.Representative).ToHashSet();

    public override IReadOnlySet<Field> Variables => _variables ??= Fields.Select(part => part.Representative).ToHashSet();

    public override IEnumerable<SourcePart> Chancy => IsChancy ? [this] : [];

    public override bool ProducesRows => true;

    public SourcePart AsGuard()
    {
        var guard = new SourcePart(Atom, table) { IsGuard = true };
        guard.Filters.AddRange(Filters);
        return guard;
    }

    /// <summary>The fields of the group, which matter even where the query does not use them.</summary>
    public IEnumerable<Field> GroupFields() => Source.Group is null
        ? []
        : PartsOf(Source.Group).Select(table.Of);

    /// <summary>Rows that differ in any of these variables are independent; exclusive alternatives are so by their group only.</summary>
    public IReadOnlySet<Field> Independent => IsExclusive ? Group : Variables;

    /// <summary>Whether fixing the known variables fixes all of the row's.</summary>
    public bool IsDeterminedBy(IReadOnlySet<Field> known)
    {
        Field? row = table.Find(Atom.Row);
        if (row is not null && known.Contains(row.Representative) && Structure.EqualValuesHaveEqualMembers(Atom.Row.Type))
        {
            return true;
        }

        return Source.Key is { } key
            && PartsOf(key).All(part => table.Find(part) is { } field && known.Contains(field.Representative));
    }

    private List<Expression> PartsOf(LambdaExpression lambda)
    {
        var parts = new List<Expression>();
        Collect(Substitution.Apply(lambda, Atom.Row), parts);
        return parts;
    }

    private static void Collect(Expression expression, List<Expression> parts)
    {
        if (expression is UnaryExpression { NodeType: ExpressionType.Convert, Method: null } convert && convert.Type == typeof(object))
        {
            Collect(convert.Operand, parts);
        }
        else if (Structure.Parts(expression) is { } inner)
        {
            foreach (Expression part in inner)
            {
                Collect(part, parts);
            }
        }
        else if (Rows.In(expression).Count > 0)
        {
            parts.Add(expression);
        }
    }
}
