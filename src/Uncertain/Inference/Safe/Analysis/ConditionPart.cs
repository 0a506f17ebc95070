using System.Linq.Expressions;

namespace Uncertain.Inference.Safe.Analysis;

/// <summary>A condition over fields of several rows.</summary>
internal sealed class ConditionPart(Expression condition, FieldTable table) : Part
{
    private HashSet<Field>? _variables;

    public Template Condition { get; } = table.TemplateOf(condition, mustDetermine: false);

    public override IReadOnlySet<Field> Variables => _variables ??= Condition.Variables.ToHashSet();

    public override IEnumerable<SourcePart> Chancy => [];

    public override bool ProducesRows => false;
}
