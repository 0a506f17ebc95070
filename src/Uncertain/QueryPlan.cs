using System.Text;
using Uncertain.Inference;
using Uncertain.Inference.Safe;
using Uncertain.Planning;

namespace Uncertain;

/// <summary>A query as steps in words, for people, tests and evaluators. Immutable; touches no data.</summary>
public sealed class QueryPlan
{
    private SafePlanning? _safe;

    internal QueryPlan(PlanNode root) => Root = root;

    /// <summary>The last step's description: one line.</summary>
    public string Description => Root.Describe();

    /// <summary>The plans of the step's inputs.</summary>
    public IReadOnlyList<QueryPlan> Inputs => [.. Root.Inputs.Select(input => new QueryPlan(input))];

    internal PlanNode Root { get; }

    /// <summary>The query's safe plan, or why there is none. Planned once, unless the query reads sets from captured variables.</summary>
    internal SafePlanning Safe
    {
        get
        {
            SafePlanning safe = _safe ?? SafePlanning.Of(Root);
            if (Root.HasOneTranslation)
            {
                _safe = safe;
            }

            return safe;
        }
    }

    /// <summary>Whether an evaluator can take the query, and why or why not.</summary>
    /// <param name="evaluator">The evaluator.</param>
    public Suitability Examine(IEvaluator evaluator)
    {
        ArgumentNullException.ThrowIfNull(evaluator);
        return evaluator.Examine(this);
    }

    /// <summary>The steps, indented under the step that uses them, and what each of the library's evaluators says of the query.</summary>
    public string Explain()
    {
        var text = new StringBuilder();
        Append(text, Root, 0);
        foreach (IEvaluator evaluator in (IEvaluator[])[Evaluators.SafePlan, Evaluators.Compilation, Evaluators.Bounds, Evaluators.Sampling])
        {
            text.Append(evaluator.Name).Append(": ").Append(evaluator.Examine(this)).Append('\n');
        }

        return text.ToString();
    }

    /// <summary>The steps, indented under the step that uses them.</summary>
    public override string ToString()
    {
        var text = new StringBuilder();
        Append(text, Root, 0);
        return text.ToString();
    }

    private static void Append(StringBuilder text, PlanNode node, int depth)
    {
        text.Append(' ', 2 * depth).Append(node.Describe()).Append('\n');
        foreach (PlanNode input in node.Inputs)
        {
            Append(text, input, depth + 1);
        }
    }
}
