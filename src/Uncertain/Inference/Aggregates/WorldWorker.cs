using System.Runtime.InteropServices;
using Uncertain.Inference.Sampling;

namespace Uncertain.Inference.Aggregates;

/// <summary>Draws worlds, evaluates the elements' lineages in them and counts the keys; one thread's part.</summary>
internal sealed class WorldWorker<TValue>(
    AggregateProblem<TValue> problem, WorldProgram program, int[] edges, WorkBudget budget)
{
    private readonly AlignedWords _words = new(Math.Max(1, program.RowCount) * WorldBlock.Words);
    private readonly long[] _keys = new long[64 * WorldBlock.Words];

    /// <summary>Worlds by key, in all ranges so far.</summary>
    public Dictionary<long, long> Counts { get; } = [];

    /// <summary>Counts a range of worlds that starts at a block of them and is no longer; all of it or, at the end of the
    /// budget, nothing.</summary>
    public void Run(long from, long to)
    {
        if (!Draw((ulong)(from / (64 * WorldBlock.Words))))
        {
            return;
        }

        int worlds = (int)(to - from);
        var table = new PresenceTable(_words.Span, edges, WorldBlock.Words, worlds);
        problem.KeysOf(table, _keys);
        foreach (long key in _keys.AsSpan(0, worlds))
        {
            CollectionsMarshal.GetValueRefOrAddDefault(Counts, key, out _)++;
        }
    }

    private bool Draw(ulong block)
    {
        const int Width = WorldBlock.Words;
        Draws draws = program.Draws;
        for (int variable = 0; variable < draws.VariableCount; variable++)
        {
            draws.Draw<FourWords>(
                variable, block, _words.Span[(draws.FirstRow(variable) * Width)..(draws.EndRow(variable) * Width)]);
            if ((variable & 0xFF) == 0xFF && budget.HasEnded)
            {
                return false;
            }
        }

        ref ulong words = ref MemoryMarshal.GetReference(_words.Span);
        int row = draws.RowCount;
        foreach (Range part in program.Parts)
        {
            row = GateKernel.Run<FourWords>(program.Code.AsSpan(part), row, ref words, Width);
            if (budget.HasEnded)
            {
                return false;
            }
        }

        return !budget.HasEnded;
    }
}
