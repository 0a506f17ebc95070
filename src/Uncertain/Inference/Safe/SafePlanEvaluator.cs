using System.Numerics;
using Uncertain.Execution;
using Uncertain.Inference.Posteriors;
using Uncertain.Inference.Safe.Analysis;
using Uncertain.Inference.Safe.Codes;
using Uncertain.Inference.Safe.Steps;
using Uncertain.Numerics;
using Uncertain.Planning;
using Uncertain.Worlds;

namespace Uncertain.Inference.Safe;

/// <summary>
/// Exact, straight from the plan, without lineage: near linear in the records. For hierarchical queries without self-joins, made safe
/// also by declared keys, certain sets and exclusive alternatives where the theory allows it, and for unions and differences of such
/// parts over different sources. Refuses the rest and names the reason.
/// </summary>
internal sealed class SafePlanEvaluator : IEvidenceEvaluator
{
    // Up to so many factors in one probability, doubles keep 1e-12; beyond, the plan is run again in extended numbers.
    private const int PlainFactorLimit = 2048;

    public string Name => "safe plan";

    public Suitability Examine(QueryPlan plan)
    {
        ArgumentNullException.ThrowIfNull(plan);
        SafePlanning planning = plan.Safe;
        return planning.Plan is { } safe
            ? Suitability.Can($"a safe plan exists\n{Indent(safe.Root.ToString())}")
            : Suitability.Cannot(planning.Refusal!.Message);
    }

    public Probability Evaluate(Lineage lineage, EvaluationOptions options, CancellationToken cancellationToken) =>
        throw new EvaluationRefusedException(
            "The safe plan works from a query's plan, and a lineage alone has none. Evaluate the query, or use Evaluators.Compilation.");

    public IEnumerable<Answer<T>> Evaluate<T>(UncertainSet<T> query, EvaluationOptions options, CancellationToken cancellationToken)
    {
        ArgumentNullException.ThrowIfNull(query);
        ArgumentNullException.ThrowIfNull(options);
        SafePlanning planning = query.Plan.Safe;
        return planning.Plan is not null
            ? Run(planning.Plan, query, options, cancellationToken)
            : throw new EvaluationRefusedException(
                $"The query has no safe plan: {planning.Refusal!.Message}. Use Evaluators.Compilation, or leave the choice to "
                + "Evaluators.Chooser.",
                planning.Refusal);
    }

    private IEnumerable<Answer<T>> Run<T>(
        SafePlan plan, UncertainSet<T> query, EvaluationOptions options, CancellationToken cancellationToken)
    {
        long start = options.Clock.GetTimestamp();
        var control = new RunControl(options, cancellationToken);
        VariableTable table = SafeEvidence.Chances(query.Node, options, cancellationToken);
        using var input = new RunInput(plan.Root, table, control);
        List<CodeTable<double>> plain = RunParts<double>(plan.Root, input);
        long factors = plain.Max(part => part.Factors);
        bool isZeroExact = factors * Math.Log(control.SmallestChance) > Math.Log(TailConversions.SafeRange);
        if (factors <= PlainFactorLimit
            && plain.TrueForAll(part => AreInRange(part, isZeroExact)))
        {
            return Answers(plain, Probability.Exact);
        }

        try
        {
            return Answers(RunParts<ExtendedDouble>(plan.Root, input), Probability.Exact);
        }
        catch (OverflowException exception)
        {
            throw new EvaluationRefusedException(
                "A probability of this query is below 2^-2,000,000,000, beyond the range of the evaluator's numbers. Split the query "
                + "into independent parts, and add up the logarithms of their probabilities.",
                exception);
        }

        IEnumerable<Answer<T>> Answers<TNumber>(
            List<CodeTable<TNumber>> parts, Func<Tails<TNumber>, string, Cost, Probability> exact)
            where TNumber : unmanaged, IAdditionOperators<TNumber, TNumber, TNumber>, IMultiplyOperators<TNumber, TNumber, TNumber>,
                IAdditiveIdentity<TNumber, TNumber>, IMultiplicativeIdentity<TNumber, TNumber>
        {
            if (plan.IsComplement && parts is [{ Count: 0 } none])
            {
                parts = [none with { Count = 1, Tails = new RowTails<TNumber>([Tails<TNumber>.Never]) }];
            }

            int count = Math.Max(1, parts.Sum(part => part.Count));
            var cost = new Cost(options.Clock.GetElapsedTime(start) / count, Math.Max(1, control.Rows / count), 0);
            var lineages = new LineageSource<T>(query);
            IReadOnlyList<Field> variables = plan.Root.Variables;
            Func<Encoder[], int[], T> valueOf = plan.Value.Compile<T>(variables);
            Encoder[] encoders = input.EncodersOf(variables);
            var codes = new int[variables.Count];
            foreach (CodeTable<TNumber> part in parts)
            {
                for (int row = 0; row < part.Count; row++)
                {
                    cancellationToken.ThrowIfCancellationRequested();
                    for (int column = 0; column < codes.Length; column++)
                    {
                        codes[column] = part.Columns[column][row];
                    }

                    yield return new Answer<T>(
                        valueOf(encoders, codes), lineages, exact(part.Tails[row].NegateIf(plan.IsComplement), Name, cost));
                }
            }
        }
    }

    private static List<CodeTable<TNumber>> RunParts<TNumber>(SafeStep root, RunInput input)
        where TNumber : unmanaged, IAdditionOperators<TNumber, TNumber, TNumber>, IMultiplyOperators<TNumber, TNumber, TNumber>,
            IAdditiveIdentity<TNumber, TNumber>, IMultiplicativeIdentity<TNumber, TNumber>
    {
        Workspace workspace = Workspace.Take(input.Control);
        var run = new SafeRun<TNumber>(root, input, workspace);
        if (input.Split is not { } split)
        {
            CodeTable<TNumber> result = root.Run(run).Copy();
            workspace.Return();
            return [result];
        }

        var parts = new CodeTable<TNumber>[split.Parts];
        var workspaces = new Workspace?[input.Control.Threads];
        Workers.Run(input.Control.Threads, split.Parts, (worker, part) =>
        {
            Workspace own = workspaces[worker] ??= Workspace.Take(input.Control);
            parts[part] = root.Run(run.Part(part, own)).Copy();
            own.TakeBackAll();
        });
        Array.ForEach(workspaces, own => own?.Return());
        return [.. parts];
    }

    private static bool AreInRange(CodeTable<double> part, bool isZeroExact)
    {
        for (int row = 0; row < part.Count; row++)
        {
            if (!TailConversions.IsInRange(part.Tails[row], isZeroExact))
            {
                return false;
            }
        }

        return true;
    }

    private static string Indent(string text) => string.Join('\n', text.TrimEnd('\n').Split('\n').Select(line => $"  {line}"));
}
