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

    private Answer<T>[] Run<T>(
        SafePlan plan, UncertainSet<T> query, EvaluationOptions options, CancellationToken cancellationToken)
    {
        long start = options.Clock.GetTimestamp();
        var control = new RunControl(options, cancellationToken);
        VariableTable table = SafeEvidence.Chances(query.Node, options, cancellationToken);
        using var input = new RunInput(plan, table, control);
        CodeTable<double>[] plain = RunParts<double>(plan.Root, input);
        if (IsAccurate(plain, control.SmallestChance))
        {
            return Answers(plain, plan, query, input, start, options.Clock, Probability.Exact);
        }

        try
        {
            return Answers(RunParts<ExtendedDouble>(plan.Root, input), plan, query, input, start, options.Clock, Probability.Exact);
        }
        catch (OverflowException exception)
        {
            throw new EvaluationRefusedException(
                "A probability of this query is below 2^-2,000,000,000, beyond the range of the evaluator's numbers. Split the query "
                + "into independent parts, and add up the logarithms of their probabilities.",
                exception);
        }
    }

    // Whether doubles had the digits and the range for all tails.
    private static bool IsAccurate(CodeTable<double>[] parts, double smallestChance)
    {
        long factors = 0;
        foreach (CodeTable<double> part in parts)
        {
            factors = Math.Max(factors, part.Factors);
        }

        if (factors > PlainFactorLimit)
        {
            return false;
        }

        bool isZeroExact = factors * Math.Log(smallestChance) > Math.Log(TailConversions.SafeRange);
        foreach (CodeTable<double> part in parts)
        {
            for (int row = 0; row < part.Count; row++)
            {
                if (!TailConversions.IsInRange(part.Tails[row], isZeroExact))
                {
                    return false;
                }
            }
        }

        return true;
    }

    private Answer<T>[] Answers<T, TNumber>(
        CodeTable<TNumber>[] parts, SafePlan plan, UncertainSet<T> query, RunInput input, long start, TimeProvider clock,
        Func<Tails<TNumber>, string, Cost, Probability> exact)
        where TNumber : unmanaged, IAdditionOperators<TNumber, TNumber, TNumber>, IMultiplyOperators<TNumber, TNumber, TNumber>,
            IAdditiveIdentity<TNumber, TNumber>, IMultiplicativeIdentity<TNumber, TNumber>
    {
        if (plan.IsComplement && parts is [{ Count: 0 } none])
        {
            parts = [none with { Count = 1, Tails = new RowTails<TNumber>([Tails<TNumber>.Never]) }];
        }

        int count = 0;
        var firsts = new int[parts.Length];
        for (int part = 0; part < parts.Length; part++)
        {
            firsts[part] = count;
            count = checked(count + parts[part].Count);
        }

        var answers = new Answer<T>[count];
        var cost = new Cost(
            clock.GetElapsedTime(start) / Math.Max(1, count), Math.Max(1, input.Control.Rows / Math.Max(1, count)), 0);
        var lineages = new LineageSource<T>(query);
        Func<Encoder[], int[], T> valueOf = plan.ValueOf<T>();
        Encoder[] encoders = input.EncodersOf(plan.Root.Variables);

        // A value may need the caller's code, such as a constructor, which runs on one thread only.
        int threads = plan.Value.IsPlain ? input.Control.Threads : 1;
        Workers.Run(threads, parts.Length, (_, number) =>
        {
            CodeTable<TNumber> part = parts[number];
            var codes = new int[encoders.Length];
            int answer = firsts[number];
            for (int row = 0; row < part.Count; row++)
            {
                input.Control.Cancellation.ThrowIfCancellationRequested();
                for (int column = 0; column < codes.Length; column++)
                {
                    codes[column] = part.Columns[column][row];
                }

                answers[answer++] = new Answer<T>(
                    valueOf(encoders, codes), lineages, exact(part.Tails[row].NegateIf(plan.IsComplement), Name, cost));
            }
        });
        return answers;
    }

    private static CodeTable<TNumber>[] RunParts<TNumber>(SafeStep root, RunInput input)
        where TNumber : unmanaged, IAdditionOperators<TNumber, TNumber, TNumber>, IMultiplyOperators<TNumber, TNumber, TNumber>,
            IAdditiveIdentity<TNumber, TNumber>, IMultiplicativeIdentity<TNumber, TNumber>
    {
        var run = new SafeRun<TNumber>(root, input);
        return input.Split is { } split ? RunParts(root, run, split.Parts, input.Control) : [root.Run(run)];
    }

    private static CodeTable<TNumber>[] RunParts<TNumber>(SafeStep root, SafeRun<TNumber> run, int count, RunControl control)
        where TNumber : unmanaged, IAdditionOperators<TNumber, TNumber, TNumber>, IMultiplyOperators<TNumber, TNumber, TNumber>,
            IAdditiveIdentity<TNumber, TNumber>, IMultiplicativeIdentity<TNumber, TNumber>
    {
        var parts = new CodeTable<TNumber>[count];
        var workspaces = new Workspace?[control.Threads];
        Workers.Run(control.Threads, count, (worker, part) =>
        {
            Workspace own = workspaces[worker] ??= Workspace.Take(control);
            parts[part] = root.Run(run.Part(part, own)).Copy();
            own.TakeBackAll();
        });
        Array.ForEach(workspaces, own => own?.Return());
        return parts;
    }

    private static string Indent(string text) => string.Join('\n', text.TrimEnd('\n').Split('\n').Select(line => $"  {line}"));
}
