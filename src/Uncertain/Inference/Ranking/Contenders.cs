using System.Globalization;
using Uncertain.Execution;
using Uncertain.Inference.Bounds;

namespace Uncertain.Inference.Ranking;

/// <summary>
/// The answers of a query with what is known of their probabilities: cheap bounds of all, refined for those that a decision asks for,
/// each time with four times as many nodes.
/// </summary>
internal sealed class Contenders
{
    // A first look takes answers apart a little; only then it may pay to compile them.
    private const long FirstNodes = 64;
    private const long Growth = 3;

    // Answers that one task of the first bounds takes: they share its lists.
    private const int Stretch = 64;

    // Its lineage, bounds, figure, refinement and whether that is spent.
    private const long BytesPerAnswer = 16 + 32 + 8 + 8 + 1;

    private readonly EvaluationOptions _options;
    private readonly long _start;
    private readonly CancellationToken _cancellationToken;
    private readonly ProgressReporter _progress;
    private readonly Lineage[] _lineages;
    private readonly TailBounds[] _bounds;
    private readonly Probability?[] _figures;
    private readonly Refinement?[] _refinements;
    private readonly bool[] _isSpent;
    private bool _isLate;

    /// <summary>Answers to be bounded and refined under the options' budgets, which run from <paramref name="start"/>.</summary>
    public Contenders(Lineage[] lineages, EvaluationOptions options, long start, CancellationToken cancellationToken)
    {
        (_lineages, _options, _start, _cancellationToken) = (lineages, options, start, cancellationToken);
        _progress = new ProgressReporter(options);
        _bounds = new TailBounds[lineages.Length];
        Array.Fill(_bounds, TailBounds.Unknown);
        _figures = new Probability?[lineages.Length];
        _refinements = new Refinement?[lineages.Length];
        _isSpent = new bool[lineages.Length];
        BoundAll();
    }

    /// <summary>Answers whose figures are there already and stay as they are.</summary>
    public Contenders(Probability[] figures, EvaluationOptions options)
    {
        (_lineages, _options) = ([], options);
        _progress = new ProgressReporter(options);
        _bounds = Array.ConvertAll(figures, TailBounds.Of);
        _figures = [.. figures];
        _refinements = new Refinement?[figures.Length];
        _isSpent = new bool[figures.Length];
        Array.Fill(_isSpent, true);
    }

    public int Count => _bounds.Length;

    /// <summary>Nodes made for all answers together.</summary>
    public long Nodes { get; private set; }

    /// <summary>Why answers could not be refined further; null while none was given up.</summary>
    public string? Shortfall { get; private set; }

    public TailBounds this[int answer] => _bounds[answer];

    public bool CanRefine(int answer) => !_isLate && !_isSpent[answer] && !_bounds[answer].IsExact;

    /// <summary>Refines some answers side by side, each by its next number of nodes or until that is enough.</summary>
    public void Refine(IReadOnlyList<int> answers, Func<TailBounds, bool> isEnough)
    {
        long? memory = MemoryEach(answers.Count);
        long[] made = new long[answers.Count];
        SideBySide.Run(answers.Count, _options.Threads, i =>
        {
            int answer = answers[i];
            long before = _refinements[answer]?.NodeCount ?? 0;
            Refinement refinement = _refinements[answer] ??= Open(answer);
            long nodes = Math.Min(Math.Max(FirstNodes, Growth * before), _options.NodeBudget - before);
            refinement.Refine(
                Math.Max(1, nodes), isEnough, _cancellationToken, memory + refinement.Bytes, compiles: before >= FirstNodes);
            _bounds[answer] = _bounds[answer].Intersect(refinement.Bounds);
            made[i] = refinement.NodeCount - before;
        });
        for (int i = 0; i < answers.Count; i++)
        {
            Nodes += made[i];
            Settle(answers[i]);
        }
    }

    /// <summary>Lets go of what was needed to refine an answer.</summary>
    public void Release(int answer)
    {
        if (_refinements[answer] is { } refinement)
        {
            _figures[answer] = refinement.Result();
            _refinements[answer] = null;
        }
    }

    public void Report(int decided) => _progress.Report(EvaluationStage.Evaluating, decided, Count);

    /// <summary>The figure of an answer as far as it is known.</summary>
    public Probability Figure(int answer) => _refinements[answer]?.Result()
        ?? _figures[answer]
        ?? Probability.Between(_bounds[answer], BoundsEvaluator.EvaluatorName, default);

    /// <summary>Refines an answer to what is asked, or says why it is less.</summary>
    public Probability Figure(int answer, Accuracy asked)
    {
        if (_lineages.Length == 0 || _figures[answer] is { Guarantee.Kind: GuaranteeKind.Exact })
        {
            return Figure(answer);
        }

        if (_isSpent[answer] && _figures[answer] is { } spent)
        {
            return asked.Allows(_bounds[answer]) ? spent : spent.WithShortfall(Shortfall!);
        }

        Refinement refinement = _refinements[answer] ??= Open(answer);
        long before = refinement.NodeCount;
        refinement.Refine(Math.Max(1, _options.NodeBudget - before), asked.Allows, _cancellationToken, MemoryEach(1) + refinement.Bytes);
        Nodes += refinement.NodeCount - before;
        _bounds[answer] = _bounds[answer].Intersect(refinement.Bounds);
        return refinement.Result(asked);
    }

    private void BoundAll()
    {
        int stretches = (Count + Stretch - 1) / Stretch;
        SideBySide.Run(stretches, _options.Threads, stretch =>
        {
            var limit = new WorkLimit(_options, _start, _cancellationToken);
            try
            {
                limit.Look();
                FormulaBounds? formulas = null;
                int end = Math.Min(Count, (stretch + 1) * Stretch);
                for (int i = stretch * Stretch; i < end; i++)
                {
                    if (formulas is null || formulas.Arena != _lineages[i].Arena)
                    {
                        formulas = new FormulaBounds(_lineages[i].Arena, isThorough: false);
                    }

                    _bounds[i] = formulas.Of(_lineages[i].Ref, limit);
                }
            }
            catch (OutOfTimeException)
            {
                _isLate = true;
            }
        });
        if (_isLate)
        {
            SayLate();
        }
    }

    private Refinement Open(int answer) => new(_lineages[answer], _options, _start, _cancellationToken);

    private void Settle(int answer)
    {
        Refinement refinement = _refinements[answer]!;
        switch (refinement.End)
        {
            case RefinementEnd.Time:
                _isLate = true;
                SayLate();
                break;
            case RefinementEnd.Memory:
                // The next answers need what this one holds.
                _isSpent[answer] = true;
                Release(answer);
                Shortfall ??= Text($"The memory budget of {_options.MemoryBudget:N0} bytes was reached. Raise ")
                    + "EvaluationOptions.MemoryBudget to decide the others.";
                break;
            default:
                _isSpent[answer] = !refinement.CanRefine;
                if (!_isSpent[answer] && refinement.NodeCount >= _options.NodeBudget)
                {
                    _isSpent[answer] = true;
                    Shortfall ??= Text($"Some answers took their node budget of {_options.NodeBudget:N0}. Raise ")
                        + "EvaluationOptions.NodeBudget to decide them.";
                }

                break;
        }
    }

    private void SayLate() => Shortfall ??= Text($"The deadline of {_options.Deadline?.TotalSeconds:0.###} s was reached. Allow a later ")
        + "EvaluationOptions.Deadline to decide the others.";

    /// <summary>The memory budget of each of some answers: the lineages', and a share of what they, the lists and all open refinements leave.</summary>
    private long? MemoryEach(int answers)
    {
        if (_options.MemoryBudget is not { } budget)
        {
            return null;
        }

        long held = _refinements.Sum(refinement => refinement?.Bytes ?? 0);
        long lineages = _lineages[0].Arena.Bytes;
        long left = budget - lineages - (BytesPerAnswer * Count) - held;
        return lineages + (Math.Max(0, left) / Math.Min(answers, _options.Threads));
    }

    private static string Text(FormattableString text) => text.ToString(CultureInfo.InvariantCulture);
}
