using System.Diagnostics;
using Uncertain.Inference;
using Uncertain.ReferenceCheck.Cases;

namespace Uncertain.ReferenceCheck.Solving;

/// <summary>Evaluates the lineages and questions of one case by the chosen evaluator within the case's time.</summary>
internal sealed class Solver(IEvaluator evaluator, TimeSpan limit, CancellationToken cancellationToken)
{
    // One estimate in a billion may miss its bounds, so that a miss is a fault and not bad luck.
    private static readonly Accuracy s_sampled = Accuracy.Within(0.002, 1e-9);

    private readonly Stopwatch _watch = Stopwatch.StartNew();

    public CancellationToken CancellationToken => cancellationToken;

    public Figure Chance(Lineage lineage) => Figure.Of(lineage.Evaluate(Options(), cancellationToken));

    public Figure Chance(YesNoQuestion question) => Figure.Of(question.Evaluate(Options(), cancellationToken).Probability);

    /// <summary>P(<paramref name="lineage"/> | <paramref name="given"/>).</summary>
    public Figure Chance(Lineage lineage, Lineage given)
    {
        try
        {
            return Figure.Of(lineage.Evaluate(Options() with { Given = lineage.Worlds.Given(given) }, cancellationToken));
        }
        catch (InvalidInputException exception)
        {
            throw new LeftOutException($"the condition has probability 0: {exception.Message}");
        }
    }

    /// <summary>
    /// The probability of a lineage as a function of the common chance of all its events. By compilation the form is kept; the
    /// other evaluators are asked anew for each chance.
    /// </summary>
    /// <param name="build">Builds the lineage over as many events of the given chance as it needs.</param>
    public Func<double, Figure> OverChances(Func<Chance, (Lineage Lineage, IReadOnlyList<Lineage> Events)> build)
    {
        if (evaluator != Evaluators.Compilation && evaluator != Evaluators.Chooser)
        {
            return chance => Chance(build(new Chance(chance, 1 - chance)).Lineage);
        }

        (Lineage lineage, IReadOnlyList<Lineage> events) = build(Cases.Chance.Half);
        CompiledLineage compiled = lineage.Compile(Options(), cancellationToken);
        return chance => Figure.Of(compiled.Evaluate(events.ToDictionary(one => one, _ => chance)));
    }

    /// <summary>To be called now and then while a large lineage is built.</summary>
    public void Checkpoint() => cancellationToken.ThrowIfCancellationRequested();

    private EvaluationOptions Options()
    {
        Checkpoint();
        TimeSpan left = limit - _watch.Elapsed;
        return new EvaluationOptions
        {
            Evaluator = evaluator,
            Accuracy = evaluator == Evaluators.Sampling ? s_sampled : Accuracy.Exact,
            Deadline = left > TimeSpan.Zero ? left : TimeSpan.FromMilliseconds(1),
            NodeBudget = 20_000_000, // Time is the limit here.
        };
    }
}
