using System.Runtime.InteropServices;

namespace Uncertain.Inference.Sampling;

/// <summary>
/// In each world chooses a term in proportion to its probability, draws the world given that the term holds, and counts the
/// worlds in which the chosen term is the first that holds; one thread's part. Every world that satisfies the disjunction is
/// counted for exactly one of its terms, so that the part of successes is P / (sum of the terms' probabilities).
/// </summary>
internal sealed class CoverageWorker<TVector>(CoverageProgram program, WorkBudget budget) : IWorker
    where TVector : struct, IWordVector<TVector>
{
    private const int Width = WorldBlock.Words;
    private const int BlockSize = WorldBlock.Worlds;
    private const long WorkPerCheck = 100_000;
    private const int TermsPerCheck = 4096;

    private readonly AlignedWords _words = new(program.Draws.RowCount * Width);
    private readonly AlignedWords _covered = new(Width);

    // What the chosen terms force: in a world, the variable's only row that holds, or -1 if none does.
    private readonly List<(int Lane, int Variable, int Row)> _forced = [];

    // For each term the worlds that chose it, as a list through _next; numbers from 1, 0 for the end.
    private readonly int[] _firstLane = new int[program.TermCount];
    private readonly int[] _nextLane = new int[BlockSize];
    private readonly long[] _successes = new long[1];
    private long _work;

    public ReadOnlySpan<long> Successes => _successes;

    public bool Run(long from, long to)
    {
        int skipped;
        for (long world = from; world < to; world += BlockSize - skipped)
        {
            skipped = (int)(world % BlockSize);
            int lanes = (int)Math.Min(BlockSize, to - (world - skipped));
            Choose(world - skipped, skipped, lanes);
            if (!Draw((ulong)(world / BlockSize)) || !Count(lanes - skipped))
            {
                return false;
            }
        }

        return true;
    }

    private void Choose(long block, int start, int end)
    {
        _forced.Clear();
        for (int lane = start; lane < end; lane++)
        {
            int term = program.Choose(block + lane);
            _nextLane[lane] = _firstLane[term];
            _firstLane[term] = lane + 1;
            Force(program.Operands(term), lane, block + lane);
        }
    }

    private void Force(ReadOnlySpan<int> operands, int lane, long world)
    {
        Draws draws = program.Draws;
        int i = 0;
        while (i < operands.Length)
        {
            int row = operands[i] >> 1;
            int variable = program.VariableOf(row);
            bool isNegated = (operands[i] & 1) != 0;
            int start = i++;
            if (isNegated && draws.EndRow(variable) - draws.FirstRow(variable) > 1)
            {
                while (i < operands.Length && program.VariableOf(operands[i] >> 1) == variable)
                {
                    i++;
                }

                row = program.DrawRemaining(operands[start..i], world);
                isNegated = row < 0;
            }

            _forced.Add((lane, variable, isNegated ? -1 : row));
        }
    }

    private bool Draw(ulong block)
    {
        Draws draws = program.Draws;
        Span<ulong> words = _words.Span;
        for (int variable = 0; variable < draws.VariableCount; variable++)
        {
            int row = draws.FirstRow(variable);
            int end = draws.EndRow(variable);
            draws.Draw<TVector>(variable, block, words[(row * Width)..(end * Width)]);
            if (!Spend(Draws.WorkPerRow * (end - row) * Width))
            {
                return false;
            }
        }

        foreach ((int lane, int variable, int forced) in _forced)
        {
            ulong bit = 1UL << (lane & 63);
            for (int row = draws.FirstRow(variable); row < draws.EndRow(variable); row++)
            {
                ref ulong word = ref words[(row * Width) + (lane >> 6)];
                word = row == forced ? word | bit : word & ~bit;
            }
        }

        return true;
    }

    private bool Count(int lanes)
    {
        ref ulong words = ref MemoryMarshal.GetReference(_words.Span);
        Span<ulong> covered = _covered.Span;
        covered.Clear();
        int evaluated = 0;
        int left = lanes;
        for (int term = 0; left > 0; term++)
        {
            if (_firstLane[term] == 0 && term - evaluated < TermsPerCheck)
            {
                continue;
            }

            // The worlds in which an earlier term holds count for that one.
            ReadOnlySpan<int> earlier = program.Between(evaluated, term);
            GateKernel.Unite<TVector>(earlier, ref MemoryMarshal.GetReference(covered), ref words);
            evaluated = term;
            for (int lane = _firstLane[term]; lane != 0; lane = _nextLane[lane - 1])
            {
                _successes[0] += (long)(~(covered[(lane - 1) >> 6] >> ((lane - 1) & 63)) & 1);
                left--;
            }

            _firstLane[term] = 0;
            if (!Spend((long)earlier.Length * Width))
            {
                return false;
            }
        }

        return true;
    }

    private bool Spend(long work)
    {
        _work += work / WorldBlock.Lanes;
        if (_work < WorkPerCheck)
        {
            return true;
        }

        _work = 0;
        return !budget.HasEnded;
    }
}
