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
    /// <summary>Words of a row; the worlds of a block are 64 times as many.</summary>
    public const int Width = 8;

    private const int BlockSize = 64 * Width;
    private const long WorkPerCheck = 100_000;
    private const int TermsPerCheck = 4096;

    private readonly AlignedWords _words = new(program.Draws.RowCount * Width);
    private readonly AlignedWords _covered = new(Width);

    // The bits that the chosen terms force, and the variables that are forced. All 0 between blocks: a block touches few of
    // them, which are listed.
    private readonly AlignedWords _forced = new(program.Draws.RowCount * Width, zero: true);
    private readonly AlignedWords _fixed = new(program.Draws.VariableCount * Width, zero: true);
    private readonly List<int> _touchedForced = [];
    private readonly List<int> _touchedFixed = [];

    // For each term the worlds that chose it, as a list through _next; numbers from 1, 0 for the end.
    private readonly int[] _firstLane = new int[program.TermCount];
    private readonly int[] _nextLane = new int[BlockSize];
    private readonly long[] _successes = new long[1];
    private long _work;

    public ReadOnlySpan<long> Successes => _successes;

    public bool Run(long from, long to)
    {
        for (long world = from; world < to; world += BlockSize)
        {
            int lanes = (int)Math.Min(BlockSize, to - world);
            Choose(world, lanes);
            if (!Draw((ulong)world / 64) || !Count(lanes))
            {
                return false;
            }
        }

        return true;
    }

    private void Choose(long world, int lanes)
    {
        Reset(_forced.Span, _touchedForced);
        Reset(_fixed.Span, _touchedFixed);
        for (int lane = 0; lane < lanes; lane++)
        {
            int term = program.Choose(world + lane);
            _nextLane[lane] = _firstLane[term];
            _firstLane[term] = lane + 1;
            Force(program.Operands(term), lane, world + lane);
        }
    }

    private void Force(ReadOnlySpan<int> operands, int lane, long world)
    {
        Draws draws = program.Draws;
        Span<ulong> forced = _forced.Span;
        Span<ulong> settled = _fixed.Span;
        ulong bit = 1UL << (lane & 63);
        int column = lane >> 6;
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

            settled[(variable * Width) + column] |= bit;
            _touchedFixed.Add((variable * Width) + column);
            if (!isNegated)
            {
                forced[(row * Width) + column] |= bit;
                _touchedForced.Add((row * Width) + column);
            }
        }
    }

    private static void Reset(Span<ulong> words, List<int> touched)
    {
        foreach (int index in touched)
        {
            words[index] = 0;
        }

        touched.Clear();
    }

    private bool Draw(ulong place)
    {
        Draws draws = program.Draws;
        Span<ulong> words = _words.Span;
        Span<ulong> forced = _forced.Span;
        Span<ulong> settled = _fixed.Span;
        for (int variable = 0; variable < draws.VariableCount; variable++)
        {
            draws.Draw<TVector>(variable, place, words, Width);
            for (int row = draws.FirstRow(variable); row < draws.EndRow(variable); row++)
            {
                for (int column = 0; column < Width; column += TVector.Count)
                {
                    int at = (row * Width) + column;
                    TVector free = TVector.AndNot(
                        TVector.Load(ref words[at]), TVector.Load(ref settled[(variable * Width) + column]));
                    (free | TVector.Load(ref forced[at])).Store(ref words[at]);
                }
            }

            if (!Spend(Draws.WorkPerRow * (draws.EndRow(variable) - draws.FirstRow(variable))))
            {
                return false;
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
            GateKernel.Unite<TVector>(earlier, ref MemoryMarshal.GetReference(covered), ref words, Width);
            evaluated = term;
            for (int lane = _firstLane[term]; lane != 0; lane = _nextLane[lane - 1])
            {
                _successes[0] += (long)(~(covered[(lane - 1) >> 6] >> ((lane - 1) & 63)) & 1);
                left--;
            }

            _firstLane[term] = 0;
            if (!Spend(earlier.Length))
            {
                return false;
            }
        }

        return true;
    }

    private bool Spend(long work)
    {
        _work += work;
        if (_work < WorkPerCheck)
        {
            return true;
        }

        _work = 0;
        return !budget.HasEnded;
    }
}
