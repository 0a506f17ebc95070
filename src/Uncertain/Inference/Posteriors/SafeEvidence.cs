using Uncertain.Lineages;
using Uncertain.Operators;
using Uncertain.Planning;
using Uncertain.Planning.Calculus;
using Uncertain.Worlds;

namespace Uncertain.Inference.Posteriors;

/// <summary>
/// Whether a safe plan may run given evidence: its sources' records must still be independent, so no part of the evidence over several
/// variables may hold one of them. What is known of single variables only changes their chances.
/// </summary>
internal static class SafeEvidence
{
    /// <summary>Null if a safe plan may run; else why not.</summary>
    public static string? WhyNot(PlanNode query, Evidence evidence, CancellationToken cancellationToken)
    {
        Findings findings = evidence.Findings(cancellationToken);
        for (; query is NotNode not; query = not.Input)
        {
        }

        return findings.Parts.Count == 0
            ? null
            : SourcesOf(query.Translate()).Distinct().Where(source => IsTouched(source, findings)).Select(source =>
                $"the evidence ties records of {source.Name} to others, so that they are no longer independent").FirstOrDefault();
    }

    /// <summary>The chances that a safe plan reads.</summary>
    /// <exception cref="EvaluationRefusedException">No safe plan may run.</exception>
    public static VariableTable Chances(PlanNode query, EvaluationOptions options, CancellationToken cancellationToken)
    {
        if (options.Given is not { } evidence)
        {
            return query.Worlds.Variables;
        }

        if (!ReferenceEquals(evidence.Worlds, query.Worlds))
        {
            throw new WorldSpaceMismatchException("The query that evidence is given for");
        }

        if (WhyNot(query, evidence, cancellationToken) is { } reason)
        {
            throw new EvaluationRefusedException(
                $"The safe plan does not hold given this evidence: {reason}. Use Evaluators.Compilation, or leave the choice to "
                + "Evaluators.Chooser.");
        }

        long start = options.Clock.GetTimestamp();
        Findings findings = evidence.Findings(cancellationToken);
        Impossible.Check(evidence, findings.Parts, options with { Given = null }, start, cancellationToken);
        return findings.Chances;
    }

    private static IEnumerable<ISource> SourcesOf(Conjunction query)
    {
        var pending = new Stack<Conjunction>([query]);
        while (pending.TryPop(out Conjunction? next))
        {
            foreach (Atom atom in next.Atoms)
            {
                if (atom is SourceAtom source)
                {
                    yield return source.Source;
                }
                else if (atom is UnionAtom union)
                {
                    pending.Push(union.Left);
                    pending.Push(union.Right);
                }
            }

            foreach (Absence absence in next.Absences)
            {
                pending.Push(absence.Of);
            }
        }
    }

    private static bool IsTouched(ISource source, Findings findings)
    {
        VariableTable table = findings.Worlds.Variables;
        if (source.FirstSlot >= 0)
        {
            return findings.Parts.Any(part => part.Variables.Any(variable =>
                table.FirstSlot(variable) >= source.FirstSlot && table.FirstSlot(variable) < source.FirstSlot + source.RecordCount));
        }

        for (int record = 0; record < source.RecordCount; record++)
        {
            LineageRef lineage = source.LineageOf(record);
            if (lineage.IsLiteral && findings.PartOf(table.VariableOf(lineage.Index)) is not null)
            {
                return true;
            }
        }

        return false;
    }
}
