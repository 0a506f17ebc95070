using System.Globalization;
using Uncertain.Execution;
using Uncertain.Inference.Compilation;

namespace Uncertain.Inference.Aggregates;

/// <summary>What the exact evaluation of one aggregate may still spend: work, states, bytes, time; and whether it was cancelled.</summary>
/// <remarks>
/// A state is a residual set of lineages whose law is computed. States, the masses kept for them and what is left of their lineages
/// count as nodes of the node budget.
/// </remarks>
internal sealed class AggregateBudget
{
    // A step is one product of masses, some nanoseconds to some tens of them: the clock is looked at every millisecond or so.
    private const long StepsBetweenLooks = 30_000;

    private readonly EvaluationOptions _options;
    private readonly CancellationToken _cancellationToken;
    private readonly ProgressReporter _progress;
    private readonly long _start;
    private long _stepsLeft = StepsBetweenLooks;
    private readonly long _productLimit;
    private long _done;
    private long _products;

    /// <param name="options">Budgets and threads.</param>
    /// <param name="start">When the evaluation began.</param>
    /// <param name="cancellationToken">Cancels it.</param>
    /// <param name="productLimit">Products of masses after which it is given up.</param>
    public AggregateBudget(
        EvaluationOptions options, long start, CancellationToken cancellationToken, long productLimit = long.MaxValue)
    {
        _productLimit = productLimit;
        _options = options;
        _start = start;
        _cancellationToken = cancellationToken;
        _progress = new ProgressReporter(options);
        Compilation = new CompilationBudget(options, start, 0, cancellationToken);
        Look();
    }

    /// <summary>The same limits, for the parts that the compiler does.</summary>
    public CompilationBudget Compilation { get; }

    public int Threads => _options.Threads;

    /// <summary>Nodes made so far.</summary>
    public long States { get; private set; }

    /// <summary>So much work was done or is about to be.</summary>
    public void Step(long steps = 1)
    {
        _stepsLeft -= steps;
        if (_stepsLeft <= 0)
        {
            _done++;
            _stepsLeft = StepsBetweenLooks;
            Look();
        }
    }

    /// <summary>Looks at the token and the clock now; safe for concurrent use.</summary>
    public void Look()
    {
        _cancellationToken.ThrowIfCancellationRequested();
        _progress.Report(EvaluationStage.Evaluating, _done, null);
        if (_options.Deadline is { } deadline && _options.Clock.GetElapsedTime(_start) >= deadline)
        {
            throw Spent(Text($"was not done by the deadline of {deadline.TotalSeconds:0.###} s"), "Allow a later EvaluationOptions.Deadline");
        }
    }

    /// <summary>One more state, with so many values kept for it.</summary>
    public void State(long values) => Nodes(1 + (values / 16));

    /// <summary>So many nodes of lineages, or of what is kept for states, were made.</summary>
    public void Nodes(long made)
    {
        States += made;
        if (States > _options.NodeBudget)
        {
            throw Spent(
                Text($"needs more than the node budget of {_options.NodeBudget:N0} for the parts of it that share records"),
                "Raise EvaluationOptions.NodeBudget");
        }
    }

    /// <summary>So many products of masses are about to be computed.</summary>
    public void Products(long count)
    {
        _products += count;
        if (_products > _productLimit)
        {
            throw Spent(Text($"needs more than {_productLimit:N0} products"), "Ask for Accuracy.Exact");
        }
    }

    /// <summary>Memory that must not be exceeded is about to be held.</summary>
    public void Hold(long bytes)
    {
        if (bytes > (_options.MemoryBudget ?? long.MaxValue))
        {
            throw Spent(Text($"needs {bytes:N0} bytes, more than the memory budget"), "Raise EvaluationOptions.MemoryBudget");
        }
    }

    /// <summary>A refusal for want of something else.</summary>
    public static BudgetSpentException Spent(string what, string remedy) => new(
        $"The exact distribution of this aggregate {what}. {remedy}, or ask for Accuracy.Within, or use Evaluators.Sampling.",
        isTrial: false);

    private static string Text(FormattableString text) => text.ToString(CultureInfo.InvariantCulture);
}
