using Uncertain.Lineages;

namespace Uncertain.Inference.Sampling;

/// <summary>
/// Direct sampling: draws worlds and counts those in which a lineage holds. Several lineages share the worlds; each has its
/// own guarantee and gets the figure that it would get alone.
/// </summary>
internal sealed class DirectSampler(SamplingTask task, LineageArena arena)
{
    // Rows of 32 words let four vectors share the decoding of an operand; longer programs keep to the cache with 8.
    private const int WideRows = 4096;
    private const int WideWidth = 32;
    private const int NarrowWidth = 8;
    private const long WorkPerPiece = 200_000;

    /// <summary>Estimates lineages, none of them constant, until each is as accurate as asked or the budget ends.</summary>
    public Tally[] Run(ReadOnlySpan<LineageRef> formulas)
    {
        var tallies = new Tally[formulas.Length];
        Array.Fill(tallies, Tally.Nothing);
        var stages = Stages.For(task.Accuracy);
        var successes = new long[formulas.Length];
        int[] open = [.. Enumerable.Range(0, formulas.Length)];
        long limit = long.MaxValue;
        long drawn = 0;
        while (open.Length > 0)
        {
            var roots = new LineageRef[open.Length];
            for (int i = 0; i < open.Length; i++)
            {
                roots[i] = formulas[open[i]];
            }

            WorldProgram? program = WorldProgram.Build(arena, roots, task.Seed, task.Budget);
            if (program is null)
            {
                break;
            }

            if (drawn == 0)
            {
                limit = task.WorldLimit(program.Work);
            }

            Team team = CreateTeam(program);
            long[] before = [.. open.Select(index => successes[index])];
            int[] left = open;
            do
            {
                if (drawn >= limit || !team.Run(drawn, stages.Worlds))
                {
                    return tallies;
                }

                drawn = stages.Worlds;
                for (int i = 0; i < open.Length; i++)
                {
                    successes[open[i]] = before[i] + team.Successes(i);
                }

                foreach (int index in left)
                {
                    tallies[index] = Tally.Of(successes[index], drawn, stages.Delta, task.Accuracy);
                }

                left = Array.FindAll(left, index => !tallies[index].IsEnough);
                if (stages.IsLast)
                {
                    return tallies;
                }

                stages.Advance();
            }
            while (left.Length > open.Length / 2);
            open = left;
        }

        return tallies;
    }

    private Team CreateTeam(WorldProgram program)
    {
        int width = program.RowCount <= WideRows ? WideWidth : NarrowWidth;
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
