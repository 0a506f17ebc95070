using System.Runtime.InteropServices;
using Uncertain.ReferenceCheck.Solving;

namespace Uncertain.ReferenceCheck.Lineages;

/// <summary>
/// Builds the lineage of an event that can be told by looking at one random choice after the other and remembering a state:
/// the lineage of a state is 'the choice comes out this way and the lineage of the state after it', over the ways. Equal states
/// share one lineage, so its size is the number of different states.
/// </summary>
/// <remarks>Cost: states times ways of a choice, in time and memory.</remarks>
internal abstract class StateSweep
{
    /// <summary>The state from which the event happens whatever comes.</summary>
    protected const string Yes = "yes";

    /// <summary>The state from which the event cannot happen any more.</summary>
    protected const string No = "no";

    private const int MostStates = 4_000_000;
    private const int YesIndex = -1;
    private const int NoIndex = -2;

    /// <summary>Number of choices to look at.</summary>
    protected abstract int StepCount { get; }

    /// <summary>State before the first choice.</summary>
    protected abstract string Start { get; }

    public Lineage Build(WorldSpace worlds, Solver solver)
    {
        string start = Start;
        if (start is Yes or No)
        {
            return start == Yes ? worlds.Always : worlds.Never;
        }

        List<int[]> steps = Explore(start, solver);
        Lineage[] after = [];
        for (int step = StepCount - 1; step >= 0; step--)
        {
            after = Join(worlds, Ways(step), steps[step], after, solver);
        }

        return after[0];
    }

    /// <summary>The ways in which a choice may come out: exclusive, and one of them happens.</summary>
    protected abstract IReadOnlyList<Lineage> Ways(int step);

    /// <summary>The state after a choice has come out some way; after the last one <see cref="Yes"/> or <see cref="No"/>.</summary>
    protected abstract string Next(int step, string state, int way);

    // For each step the index of the next state, by state and way.
    private List<int[]> Explore(string start, Solver solver)
    {
        var steps = new List<int[]>();
        var states = new List<string> { start };
        long total = 0;
        for (int step = 0; step < StepCount; step++)
        {
            solver.Checkpoint();
            total += states.Count;
            if (total > MostStates)
            {
                throw new LeftOutException($"the sweep needs more than {MostStates:N0} states (at step {step + 1} of {StepCount})");
            }

            IReadOnlyList<Lineage> ways = Ways(step);
            var indices = new Dictionary<string, int>();
            var next = new List<string>();
            var targets = new int[states.Count * ways.Count];
            for (int i = 0; i < targets.Length; i++)
            {
                targets[i] = ways[i % ways.Count].Kind == LineageKind.False
                    ? NoIndex
                    : IndexOf(Next(step, states[i / ways.Count], i % ways.Count), indices, next);
                if (i % 4096 == 0)
                {
                    solver.Checkpoint();
                }
            }

            steps.Add(targets);
            states = next;
        }

        return states.Count == 0 ? steps : throw new InvalidOperationException("A sweep must end with yes or no.");
    }

    private static int IndexOf(string state, Dictionary<string, int> indices, List<string> states)
    {
        if (state is Yes or No)
        {
            return state == Yes ? YesIndex : NoIndex;
        }

        ref int index = ref CollectionsMarshal.GetValueRefOrAddDefault(indices, state, out bool isKnown);
        if (!isKnown)
        {
            index = states.Count;
            states.Add(state);
        }

        return index;
    }

    private static Lineage[] Join(WorldSpace worlds, IReadOnlyList<Lineage> ways, int[] targets, Lineage[] after, Solver solver)
    {
        Lineage LineageOf(int target) => target switch
        {
            YesIndex => worlds.Always,
            NoIndex => worlds.Never,
            _ => after[target],
        };

        var lineages = new Lineage[targets.Length / ways.Count];
        var parts = new Dictionary<Lineage, Lineage>();
        for (int state = 0; state < lineages.Length; state++)
        {
            parts.Clear();
            for (int way = 0; way < ways.Count; way++)
            {
                if (ways[way].Kind != LineageKind.False)
                {
                    Lineage target = LineageOf(targets[(state * ways.Count) + way]);
                    parts[target] = parts.TryGetValue(target, out Lineage other) ? other | ways[way] : ways[way];
                }
            }

            // Where every way leads to the same, the choice does not matter.
            lineages[state] = parts.Count == 1
                ? parts.Keys.First()
                : Lineage.Any([.. parts.Select(part => part.Key & part.Value)]);
            if (state % 4096 == 0)
            {
                solver.Checkpoint();
            }
        }

        return lineages;
    }
}
