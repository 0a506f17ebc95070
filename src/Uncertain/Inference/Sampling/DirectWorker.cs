using System.Numerics;
using System.Runtime.InteropServices;

namespace Uncertain.Inference.Sampling;

/// <summary>Draws worlds, evaluates a program in them and counts for each root the worlds in which it holds; one thread's part.</summary>
internal sealed class DirectWorker<TVector>(WorldProgram program, int width, WorkBudget budget) : IWorker
    where TVector : struct, IWordVector<TVector>
{
    // Vector operations between two looks at the budget: well below a millisecond.
    private const long WorkPerCheck = 100_000;

    private readonly AlignedWords _words = new(program.RowCount * width);
    private readonly long[] _successes = new long[program.Roots.Length];
    private long _work;

    public ReadOnlySpan<long> Successes => _successes;

    public bool Run(long from, long to)
    {
        for (long world = from; world < to; world += 64L * width)
        {
            if (!Draw((ulong)world / 64) || !Evaluate())
            {
                return false;
            }

            Count(to - world);
        }

        return true;
    }

    private bool Draw(ulong place)
    {
        Draws draws = program.Draws;
        Span<ulong> words = _words.Span;
        for (int variable = 0; variable < draws.VariableCount; variable++)
        {
            draws.Draw<TVector>(variable, place, words, width);
            if (!Spend(40L * (draws.EndRow(variable) - draws.FirstRow(variable))))
            {
                return false;
            }
        }

        return true;
    }

    private bool Evaluate()
    {
        ref ulong words = ref MemoryMarshal.GetReference(_words.Span);
        int row = program.Draws.RowCount;
        foreach (Range part in program.Parts)
        {
            ReadOnlySpan<int> code = program.Code.AsSpan(part);
            row = GateKernel.Run<TVector>(code, row, ref words, width);
            if (!Spend(code.Length))
            {
                return false;
            }
        }

        return true;
    }

    private void Count(long worlds)
    {
        for (int root = 0; root < _successes.Length; root++)
        {
            int edge = program.Roots[root];
            ulong sign = (edge & 1) == 0 ? 0 : ulong.MaxValue;
            ReadOnlySpan<ulong> row = _words.Span.Slice((edge >> 1) * width, width);
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
        _work += work * ((width + 7) / 8);
        if (_work < WorkPerCheck)
        {
            return true;
        }

        _work = 0;
        return !budget.HasEnded;
    }
}
