using Uncertain.Lineages;
using Uncertain.Numerics;

namespace Uncertain.Inference.Compilation.Cases;

/// <summary>
/// Exact probabilities of small lineages without a compiled form, see <see cref="CaseSplit"/>. Its lists are kept for a thread's
/// next lineage, so that a small lineage costs no memory.
/// </summary>
internal sealed class CaseEvaluator
{
    // With so few variables to split on it is the quickest way, whatever the structure.
    private const int FewSplit = 10;

    // Fewer would be no gain: factoring takes longer than sixteen cases.
    private const int FewEnough = 4;

    // A node of a compilation takes the time of so much of the work of splitting.
    private const int WorkPerNode = 400;

    [ThreadStatic]
    private static CaseEvaluator? s_spare;

    private readonly CaseReader _reader = new();
    private readonly CaseFactoring _factoring = new();
    private readonly CaseSplit _split = new();
    private readonly CaseCircuit _circuit = new();
    private readonly CaseCircuit _factored = new();

    /// <summary>Whether few enough cases have to be told apart for this to be quicker than any compilation.</summary>
    public bool IsEasy => _split.SplitCount <= FewSplit;

    /// <summary>Size of the circuit that is evaluated.</summary>
    public int NodeCount => _split.NodeCount;

    /// <summary>The nodes that a compilation makes in the time that the cases take.</summary>
    public long CostInNodes => 1 + (_split.Work / WorkPerNode);

    /// <summary>Reads a lineage; null if it is not small or needs too many cases. To be given back by <see cref="Release"/>.</summary>
    public static CaseEvaluator? TryPrepare(LineageArena arena, LineageRef root)
    {
        // While one is in use there is no spare: a clock of the caller's may evaluate lineages itself.
        CaseEvaluator evaluator = s_spare ?? new CaseEvaluator();
        s_spare = null;
        if (evaluator.TryRead(arena, root))
        {
            return evaluator;
        }

        evaluator.Release();
        return null;
    }

    /// <summary>Keeps the lists for the thread's next lineage.</summary>
    public void Release() => s_spare = this;

    /// <summary>Both tails; false if the range of double does not do.</summary>
    public bool TryEvaluate(LineageArena arena, Action? checkpoint, out Tails<double> result) =>
        _split.TryEvaluate(arena.Worlds.Variables, checkpoint, out result);

    private bool TryRead(LineageArena arena, LineageRef root)
    {
        if (!_reader.TryRead(arena, root, _circuit))
        {
            return false;
        }

        bool isPrepared = _split.TryPrepare(_circuit);
        return isPrepared && _split.SplitCount <= FewEnough
            || (_factoring.TryFactor(_circuit, _factored, CaseSplit.MostSplit) ? _split.TryPrepare(_factored) : isPrepared);
    }
}
