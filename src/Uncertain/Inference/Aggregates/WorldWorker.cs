using System.Runtime.InteropServices;
using Uncertain.Inference.Sampling;

namespace Uncertain.Inference.Aggregates;

/// <summary>Draws worlds, evaluates the elements' lineages in them and counts the keys; one thread's part.</summary>
internal sealed class WorldWorker<TValue>(
    AggregateProblem<TValue> problem, WorldProgram program, int[] edges, int width, WorkBudget budget)
{
    private readonly AlignedWords _words = new(Math.Max(1, program.RowCount) * width);
    private readonly long[] _keys = new long[64 * width];

    /// <summary>Worlds by key, in all ranges so far.</summary>
    public Dictionary<long, long> Counts { get; } = [];

    /// <summary>Counts a range of worlds that starts at a multiple of 64 and is no longer than a tile; all of it or, at the end of the
    /// budget, nothing.</summary>
    public void Run(long from, long to)
    {
        if (!Draw((ulong)from / 64))
        {
            return;
        }

        int worlds = (int)(to - from);
        var table = new PresenceTable(_words.Span, edges, width, worlds);
        problem.KeysOf(table, _keys);
        foreach (long key in _keys.AsSpan(0, worlds))
        {
            CollectionsMarshal.GetValueRefOrAddDefault(Counts, key, out _)++;
        }
    }

    private bool Draw(ulong place)
    {
        Draws draws = program.Draws;
        for (int variable = 0; variable < draws.VariableCount; variable++)
        {
            draws.Draw<FourWords>(variable, place, _words.Span, width);
            if ((variable & 0xFF) == 0xFF && budget.HasEnded)
            {
                return false;
            }
        }

        ref ulong words = ref MemoryMarshal.GetReference(_words.Span);
        int row = draws.RowCount;
        foreach (Range part in program.Parts)
        {
            row = GateKernel.Run<FourWords>(program.Code.AsSpan(part), row, ref words, width);
            if (budget.HasEnded)
            {
                return false;
            }
        }

        return !budget.HasEnded;
    }
}
