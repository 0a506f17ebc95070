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
        try
        {
            return Suitability.Can($"a safe plan exists\n{Indent(SafePlan.For(plan.Root).Root.ToString())}");
        }
        catch (NoSafePlanException exception)
        {
            return Suitability.Cannot(exception.Message);
        }
    }

    public Probability Evaluate(Lineage lineage, EvaluationOptions options, CancellationToken cancellationToken) =>
        throw new EvaluationRefusedException(
            "The safe plan works from a query's plan, and a lineage alone has none. Evaluate the query, or use Evaluators.Compilation.");

    public IEnumerable<Answer<T>> Evaluate<T>(UncertainSet<T> query, EvaluationOptions options, CancellationToken cancellationToken)
    {
        ArgumentNullException.ThrowIfNull(query);
        ArgumentNullException.ThrowIfNull(options);
        SafePlan plan;
        try
        {
            plan = SafePlan.For(query.Node);
        }
        catch (NoSafePlanException exception)
        {
            throw new EvaluationRefusedException(
                $"The query has no safe plan: {exception.Message}. Use Evaluators.Compilation, or leave the choice to "
                + "Evaluators.Chooser.",
                exception);
        }

        return Run(plan, query, options, cancellationToken);
    }

    private IEnumerable<Answer<T>> Run<T>(
        SafePlan plan, UncertainSet<T> query, EvaluationOptions options, CancellationToken cancellationToken)
    {
        long start = options.Clock.GetTimestamp();
        var control = new RunControl(options, cancellationToken);
        VariableTable table = SafeEvidence.Chances(query.Node, options, cancellationToken);
        var plain = new SafeRun<double>(
            new ChanceReader<double>(table, TailConversions.FromChance, table.NoneChance), control);
        List<CodeTable<double>> plainParts = RunParts(plan.Root, plain, options.Threads, cancellationToken);
        long factors = plainParts.Max(part => part.Factors);
        bool isZeroExact = factors * Math.Log(control.SmallestChance) > Math.Log(TailConversions.SafeRange);
        if (factors <= PlainFactorLimit
            && plainParts.TrueForAll(part => Array.TrueForAll(part.Tails, tails => TailConversions.IsInRange(tails, isZeroExact))))
        {
            return Answers(plain, plainParts, Probability.Exact);
        }

        var extended = new SafeRun<ExtendedDouble>(
            new ChanceReader<ExtendedDouble>(table, TailConversions.FromChanceExtended, table.NoneChanceExtended), control);
        try
        {
            return Answers(extended, RunParts(plan.Root, extended, options.Threads, cancellationToken), Probability.Exact);
        }
        catch (OverflowException exception)
        {
            throw new EvaluationRefusedException(
                "A probability of this query is below 2^-2,000,000,000, beyond the range of the evaluator's numbers. Split the query "
                + "into independent parts, and add up the logarithms of their probabilities.",
                exception);
        }

        IEnumerable<Answer<T>> Answers<TNumber>(
            SafeRun<TNumber> run, List<CodeTable<TNumber>> parts, Func<Tails<TNumber>, string, Cost, Probability> exact)
            where TNumber : struct, IAdditionOperators<TNumber, TNumber, TNumber>, IMultiplyOperators<TNumber, TNumber, TNumber>,
                IAdditiveIdentity<TNumber, TNumber>, IMultiplicativeIdentity<TNumber, TNumber>
        {
            if (plan.IsComplement && parts is [{ Count: 0 } none])
            {
                parts = [none with { Tails = [Tails<TNumber>.Never] }];
            }

            int count = Math.Max(1, parts.Sum(part => part.Count));
            var cost = new Cost(options.Clock.GetElapsedTime(start) / count, Math.Max(1, control.Rows / count), 0);
            var lineages = new LineageSource<T>(query);
            IReadOnlyList<Field> variables = plan.Root.Variables;
            Func<int[], T> valueOf = plan.Value.Compile<T>(variables, run.EncoderOf);
            var codes = new int[variables.Count];
            foreach (CodeTable<TNumber> part in parts)
            {
                for (int row = 0; row < part.Count; row++)
                {
                    run.Tick(row);
                    for (int column = 0; column < codes.Length; column++)
                    {
                        codes[column] = part.Columns[column][row];
                    }

                    yield return new Answer<T>(
                        valueOf(codes), lineages, exact(part.Tails[row].NegateIf(plan.IsComplement), Name, cost));
                }
            }
        }
    }

    private static List<CodeTable<TNumber>> RunParts<TNumber>(
        SafeStep root, SafeRun<TNumber> run, int threads, CancellationToken cancellationToken)
        where TNumber : struct, IAdditionOperators<TNumber, TNumber, TNumber>, IMultiplyOperators<TNumber, TNumber, TNumber>,
            IAdditiveIdentity<TNumber, TNumber>, IMultiplicativeIdentity<TNumber, TNumber> =>
        SplitRun<TNumber>.TryCreate(root, run) is { } split
            ? [.. OrderedParallel.Select(
                [.. Enumerable.Range(0, split.Parts)], threads, (part, _) => root.Run(run.Part(split, part)), cancellationToken)]
            : [root.Run(run)];

    private static string Indent(string text) => string.Join('\n', text.TrimEnd('\n').Split('\n').Select(line => $"  {line}"));
}
