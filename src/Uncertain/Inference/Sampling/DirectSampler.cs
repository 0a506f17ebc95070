using Uncertain.Lineages;

namespace Uncertain.Inference.Sampling;

/// <summary>
/// Direct sampling: draws worlds and counts those in which a lineage holds. Several lineages share the worlds; each has its
/// own guarantee and gets the figure that it would get alone.
/// </summary>
internal sealed class DirectSampler(SamplingTask task, LineageArena arena)
{
    // Rows of a whole block let four vectors share the decoding of an operand, which is worth more than the cache; at most 16 MB.
    private const int WideRows = 65_536;
    private const int NarrowWidth = 8;
    private const long WorkPerPiece = 200_000;

    private readonly Stages _stages = Stages.For(task.Accuracy);
    private BinomialBounds _bounds = new(task.Accuracy.Delta);
    private long _drawn;
    private long _limit = long.MaxValue;

    /// <summary>Estimates lineages, none of them constant, until each is as accurate as asked or the budget ends.</summary>
    public Tally[] Run(ReadOnlySpan<LineageRef> formulas)
    {
        var tallies = new Tally[formulas.Length];
        Array.Fill(tallies, Tally.Nothing);
        var counts = new long[formulas.Length];
        int[] open = [.. Enumerable.Range(0, formulas.Length)];
        while (open.Length > 0)
        {
            var roots = new LineageRef[open.Length];
            for (int i = 0; i < open.Length; i++)
            {
                roots[i] = formulas[open[i]];
            }

            WorldProgram? program = WorldProgram.Build(arena, roots, task.Seed, task.Budget);
            if (program is null || !RunStages(program, counts, tallies, ref open))
            {
                break;
            }
        }

        // The others end where the budget did.
        foreach (int index in open)
        {
            if (_drawn > 0)
            {
                tallies[index] = Tally.Of(counts[index], _drawn, _bounds, task.Accuracy);
            }
        }

        return tallies;
    }

    /// <summary>Draws worlds until half of the open lineages are done, and the program may be made smaller.</summary>
    /// <returns>False if the budget ended.</returns>
    private bool RunStages(WorldProgram program, long[] counts, Tally[] tallies, ref int[] open)
    {
        Team team = CreateTeam(program);
        int[] roots = open;
        long[] before = [.. roots.Select(index => counts[index])];
        _limit = Math.Min(_limit, task.WorldLimit(program.Work));
        while (open.Length > roots.Length / 2)
        {
            if (_drawn >= _limit || !team.Run(_drawn, _stages.Worlds))
            {
                return false;
            }

            _drawn = _stages.Worlds;
            _bounds = new BinomialBounds(_stages.Delta);
            for (int i = 0; i < roots.Length; i++)
            {
                counts[roots[i]] = before[i] + team.Successes(i);
            }

            open = Array.FindAll(open, index => !IsDone(index, counts[index], tallies));
            if (_stages.IsLast)
            {
                return false;
            }

            _stages.Advance();
        }

        return true;
    }

    private bool IsDone(int index, long successes, Tally[] tallies)
    {
        // Most looks come much too early: those need no exact bounds.
        double target = task.Accuracy.Epsilon * (task.Accuracy.IsRelative ? (double)successes / _drawn : 1);
        if (!_stages.IsLast && _bounds.RoughDistance(successes, _drawn) > target)
        {
            return false;
        }

        tallies[index] = Tally.Of(successes, _drawn, _bounds, task.Accuracy);
        return tallies[index].IsEnough;
    }

    private Team CreateTeam(WorldProgram program)
    {
        long wideBytes = (long)program.RowCount * WorldBlock.Words * sizeof(ulong) * task.Threads;
        int width = program.RowCount <= WideRows && !(wideBytes > task.MemoryBudget) ? WorldBlock.Words : NarrowWidth;
        long tile = 64L * width;
        long pieceSize = tile * Math.Max(1, WorkPerPiece / (program.Work * (width / 8)));
        int threads = task.ThreadsFor((long)program.RowCount * width * sizeof(ulong));
        return new Team(
            task.Width switch
            {
                VectorWidth.Eight => () => new DirectWorker<EightWords>(program, width, task.Budget),
                VectorWidth.Four => () => new DirectWorker<FourWords>(program, width, task.Budget),
                _ => () => new DirectWorker<OneWord>(program, width, task.Budget),
            },
            threads,
            pieceSize);
    }
}
