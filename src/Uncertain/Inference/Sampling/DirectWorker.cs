using System.Numerics;
using System.Runtime.InteropServices;

namespace Uncertain.Inference.Sampling;

/// <summary>Draws worlds, evaluates a program in them and counts for each root the worlds in which it holds; one thread's part.</summary>
internal sealed class DirectWorker<TVector>(WorldProgram program, int width, WorkBudget budget) : IWorker
    where TVector : struct, IWordVector<TVector>
{
    // Vector operations between two looks at the budget: well below a millisecond.
    private const long WorkPerCheck = 100_000;

    // Tiles have whole vectors of the widest kind.
    private const int Granularity = 8;

    private readonly AlignedWords _words = new(program.RowCount * width);

    // One variable's rows of a block of which only a part is wanted.
    private readonly ulong[] _block = new ulong[program.Draws.MostRows * WorldBlock.Words];
    private readonly long[] _successes = new long[program.Roots.Length];
    private long _work;

    public ReadOnlySpan<long> Successes => _successes;

    public bool Run(long from, long to)
    {
        int tile;
        for (long world = from; world < to; world += 64L * tile)
        {
            // Only as wide as it must be, and within one block.
            long needed = (to - world + (64 * Granularity) - 1) / (64 * Granularity) * Granularity;
            int start = (int)(world / 64 % WorldBlock.Words);
            tile = (int)Math.Min(Math.Min(width, WorldBlock.Words - start), needed);
            if (!Draw((ulong)(world / WorldBlock.Worlds), start, tile) || !Evaluate(tile))
            {
                return false;
            }

            Count(to - world, tile);
        }

        return true;
    }

    private bool Draw(ulong block, int start, int tile)
    {
        Draws draws = program.Draws;
        Span<ulong> words = _words.Span;
        for (int variable = 0; variable < draws.VariableCount; variable++)
        {
            int row = draws.FirstRow(variable);
            int end = draws.EndRow(variable);
            if (tile == WorldBlock.Words)
            {
                draws.Draw<TVector>(variable, block, words[(row * WorldBlock.Words)..(end * WorldBlock.Words)]);
            }
            else
            {
                Span<ulong> whole = _block.AsSpan(0, (end - row) * WorldBlock.Words);
                draws.Draw<TVector>(variable, block, whole);
                for (int i = 0; i < end - row; i++)
                {
                    whole.Slice((i * WorldBlock.Words) + start, tile).CopyTo(words[((row + i) * tile)..]);
                }
            }

            if (!Spend(Draws.WorkPerRow * (end - row) * WorldBlock.Words))
            {
                return false;
            }
        }

        return true;
    }

    private bool Evaluate(int tile)
    {
        ref ulong words = ref MemoryMarshal.GetReference(_words.Span);
        int row = program.Draws.RowCount;
        foreach (Range part in program.Parts)
        {
            ReadOnlySpan<int> code = program.Code.AsSpan(part);
            row = GateKernel.Run<TVector>(code, row, ref words, tile);
            if (!Spend((long)code.Length * tile))
            {
                return false;
            }
        }

        return true;
    }

    private void Count(long worlds, int tile)
    {
        if (worlds < 64L * tile)
        {
            ClearBeyond(worlds, tile);
        }

        worlds = Math.Min(worlds, 64L * tile);

        for (int root = 0; root < _successes.Length; root++)
        {
            int edge = program.Roots[root];
            long ones = 0;
            foreach (ulong word in _words.Span.Slice((edge >> 1) * tile, tile))
            {
                ones += BitOperations.PopCount(word);
            }

            _successes[root] += (edge & 1) == 0 ? ones : worlds - ones;
        }
    }

    /// <summary>Clears what is not asked for from the rows of the roots.</summary>
    private void ClearBeyond(long worlds, int tile)
    {
        foreach (int edge in program.Roots)
        {
            Span<ulong> row = _words.Span.Slice((edge >> 1) * tile, tile);
            for (int i = (int)(worlds / 64); i < tile; i++)
            {
                row[i] &= i == worlds / 64 ? (1UL << (int)(worlds % 64)) - 1 : 0;
            }
        }
    }

    private bool Spend(long work)
    {
        _work += work / Granularity;
        if (_work < WorkPerCheck)
        {
            return true;
        }

        _work = 0;
        return !budget.HasEnded;
    }
}
