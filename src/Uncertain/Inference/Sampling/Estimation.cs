using Uncertain.Lineages;
using Uncertain.Numerics;
using Uncertain.Worlds;

namespace Uncertain.Inference.Sampling;

/// <summary>Estimates some lineages of one arena: decides what is done with each, and says what came out.</summary>
internal sealed class Estimation
{
    // Direct sampling has the cheaper worlds; coverage sampling needs fewer of them if the terms' total weight is small.
    private static readonly double s_smallWeight = Math.Log(0.25);

    private readonly LineageArena _arena;
    private readonly EvaluationOptions _options;
    private readonly SamplingTask _task;

    public Estimation(LineageArena arena, EvaluationOptions options, VectorWidth width, WorkBudget budget)
    {
        _arena = arena;
        _options = options;
        _task = new SamplingTask(
            SamplingEvaluator.Attainable(options.Accuracy), options.Seed, options.Threads, options.MemoryBudget, width, budget);
    }

    public Probability[] Run(ReadOnlySpan<LineageRef> formulas)
    {
        var results = new Probability[formulas.Length];
        var direct = new List<int>();
        for (int i = 0; i < formulas.Length; i++)
        {
            long start = _options.Clock.GetTimestamp();
            if (Exactly(formulas[i]) is { } tails)
            {
                results[i] = Probability.Exact(tails, Name, new Cost(_options.Clock.GetElapsedTime(start), 0, 0));
            }
            else if (ByCoverage(formulas[i], 1.0 / (formulas.Length - i)) is { } tally)
            {
                results[i] = Describe(tally, _options.Clock.GetElapsedTime(start), isDirect: false);
            }
            else
            {
                direct.Add(i);
            }
        }

        if (direct.Count > 0)
        {
            long start = _options.Clock.GetTimestamp();
            var roots = new LineageRef[direct.Count];
            for (int i = 0; i < roots.Length; i++)
            {
                roots[i] = formulas[direct[i]];
            }

            Tally[] tallies = new DirectSampler(_task, _arena).Run(roots);
            TimeSpan share = _options.Clock.GetElapsedTime(start) / direct.Count;
            for (int i = 0; i < tallies.Length; i++)
            {
                results[direct[i]] = Describe(tallies[i], share, isDirect: true);
            }
        }

        _task.Budget.ThrowIfCancelled();
        return results;
    }

    private static string Name => "sampling";

    /// <summary>Constants, literals and conjunctions of literals need no sampling.</summary>
    private Tails<ExtendedDouble>? Exactly(LineageRef formula) => formula.IsConstant
        ? Tails<ExtendedDouble>.Always.NegateIf(formula == LineageRef.False)
        : TermExtraction.TailsOfConjunction(_arena, formula, _task.Budget);

    /// <summary>The estimate by coverage sampling where that is the better way; else null.</summary>
    private Tally? ByCoverage(LineageRef formula, double share)
    {
        // The lighter side is the rarer one, and has the relative guarantee for the smaller tail.
        Terms? own = TermsOf(formula, multiplyOut: false);
        Terms? other = own is null || Weighs(own, s_smallWeight) ? TermsOf(!formula, multiplyOut: false) : null;
        bool isComplement = other is not null && (own is null || other.TotalWeight.Log() < own.TotalWeight.Log());
        Terms? lighter = isComplement ? other : own;
        if (own is null && _task.Accuracy.IsRelative && (lighter is null || Weighs(lighter, 0)))
        {
            // Direct sampling may take long for this one, which is worth the trouble.
            lighter = TermsOf(formula, multiplyOut: true);
            isComplement = false;
        }

        return lighter is null || Weighs(lighter, _task.Accuracy.IsRelative ? 0 : s_smallWeight)
            ? null
            : new CoverageSampler(_task with { Budget = _task.Budget.Share(share) }, _arena.Worlds.Variables)
                .Run(lighter, isComplement);
    }

    private Terms? TermsOf(LineageRef formula, bool multiplyOut) =>
        TermExtraction.Of(_arena, formula, multiplyOut, _task.Budget) is { Count: > 0 } terms ? terms : null;

    private static bool Weighs(Terms terms, double logWeight) => terms.TotalWeight.Log() >= logWeight;

    private Probability Describe(Tally tally, TimeSpan elapsed, bool isDirect)
    {
        var probability = Probability.Estimated(
            tally.Value, tally.Complement, tally.LogValue, tally.LogComplement, tally.Bounds.Lower, tally.Bounds.Upper,
            _task.Accuracy.Delta, Name, _task.Seed, new Cost(elapsed, 0, tally.Worlds));
        string? shortfall = Shortfall(tally, isDirect);
        return shortfall is null ? probability : probability.WithShortfall(shortfall);
    }

    private string? Shortfall(Tally tally, bool isDirect)
    {
        if (tally.IsEnough)
        {
            return _options.Accuracy.Delta == 0
                ? $"{_options.Accuracy} was asked, and sampling only estimates; this is {_task.Accuracy}. Ask Evaluators.Compilation, "
                    + "Evaluators.Bounds or the chooser for what is certain"
                : null;
        }

        string asked = $"{_options.Accuracy} was asked";
        string end = _task.Budget.HasDeadline
            ? $"the deadline of {_options.Deadline} ended the sampling after {tally.Worlds:N0} worlds"
            : $"the sampling was given up after {tally.Worlds:N0} worlds, because it would go on too long";
        string why = isDirect && _task.Accuracy.IsRelative
            ? "; a relative accuracy for a small probability takes many worlds unless the lineage, multiplied out, is a disjunction "
                + "of not too many conjunctions. Ask for an absolute accuracy, a longer deadline, or Evaluators.Compilation"
            : ". Give it a longer deadline, or ask for less";
        return asked + "; " + end + why;
    }
}
