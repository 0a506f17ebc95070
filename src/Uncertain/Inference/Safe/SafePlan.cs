using Uncertain.Inference.Safe.Analysis;
using Uncertain.Inference.Safe.Steps;
using Uncertain.Operators;
using Uncertain.Planning;

namespace Uncertain.Inference.Safe;

/// <summary>A safe plan of a whole query.</summary>
/// <param name="Root">Gives the head variables.</param>
/// <param name="Value">The answers' value from them.</param>
/// <param name="IsComplement">Whether the question was negated.</param>
internal sealed record SafePlan(SafeStep Root, Template Value, bool IsComplement)
{
    /// <exception cref="NoSafePlanException">There is none; the message is the reason.</exception>
    public static SafePlan For(PlanNode query)
    {
        bool isComplement = false;
        for (; query is NotNode not; query = not.Input)
        {
            isComplement = !isComplement;
        }

        QueryAnalysis analysis = QueryAnalysis.Of(query.Translate());
        return new SafePlan(SafePlanner.Plan(analysis.Root, analysis.Value.Variables), analysis.Value, isComplement);
    }
}
