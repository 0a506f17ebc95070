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
    private readonly long[] _successes = new long[program.Roots.Length];
    private long _work;

    public ReadOnlySpan<long> Successes => _successes;

    public bool Run(long from, long to)
    {
        int tile;
        for (long world = from; world < to; world += 64L * tile)
        {
            // The last tile is only as wide as it must be.
            long needed = (to - world + (64 * Granularity) - 1) / (64 * Granularity) * Granularity;
            tile = (int)Math.Min(width, needed);
            if (!Draw((ulong)world / 64, tile) || !Evaluate(tile))
            {
                return false;
            }

            Count(to - world, tile);
        }

        return true;
    }

    private bool Draw(ulong place, int tile)
    {
        Draws draws = program.Draws;
        Span<ulong> words = _words.Span;
        for (int variable = 0; variable < draws.VariableCount; variable++)
        {
            draws.Draw<TVector>(variable, place, words, tile);
            if (!Spend(Draws.WorkPerRow * (draws.EndRow(variable) - draws.FirstRow(variable)) * tile))
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
        for (int root = 0; root < _successes.Length; root++)
        {
            int edge = program.Roots[root];
            ulong sign = (edge & 1) == 0 ? 0 : ulong.MaxValue;
            ReadOnlySpan<ulong> row = _words.Span.Slice((edge >> 1) * tile, tile);
            long count = 0;
            long left = worlds;
            foreach (ulong word in row)
            {
                if (left >= 64)
                {
                    count += BitOperations.PopCount(word ^ sign);
                }
                else if (left > 0)
                {
                    count += BitOperations.PopCount((word ^ sign) & ((1UL << (int)left) - 1));
                }

                left -= 64;
            }

            _successes[root] += count;
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
