using System.Globalization;
using Uncertain.ReferenceCheck.Cases;

namespace Uncertain.ReferenceCheck.Lineages;

/// <summary>
/// 'So many different values come up' in draws from 1..d with equal chances, as a chain: after j different values the next draw
/// is a new one with chance (d - j) / d. One event for each draw and j, as for the rows of a conditional table.
/// </summary>
internal sealed class DistinctCountSweep : StateSweep
{
    private readonly List<(int Draw, int Seen, Lineage IsNew)> _steps = [];
    private readonly int _draws;
    private readonly long _least;
    private readonly long _most;

    public DistinctCountSweep(DrawEvents events, long least, long most)
    {
        (_draws, _least, _most) = (events.Draws, least, most);
        for (int draw = 0; draw < events.Draws; draw++)
        {
            // Descending, so that a draw is counted once.
            for (int seen = Math.Min(draw, events.Outcomes); seen >= 0; seen--)
            {
                _steps.Add((draw, seen, events.IsNew(draw, seen)));
            }
        }
    }

    protected override int StepCount => _steps.Count;

    protected override string Start => Judge(0, 0);

    protected override IReadOnlyList<Lineage> Ways(int step) => [_steps[step].IsNew, !_steps[step].IsNew];

    protected override string Next(int step, string state, int way)
    {
        int seen = int.Parse(state, CultureInfo.InvariantCulture);
        (int draw, int from, _) = _steps[step];
        return Judge(from == 0 ? draw + 1 : draw, way == 0 && seen == from ? seen + 1 : seen);
    }

    // Within a draw its own new value may already be in, so that one more than is left is possible; that only delays the verdict.
    private string Judge(int draw, int seen)
    {
        int left = _draws - draw;
        return seen > _most || seen + left < _least ? No
            : seen >= _least && seen + left <= _most ? Yes
            : seen.ToString(CultureInfo.InvariantCulture);
    }

    /// <summary>The events of a chain, shared by all questions about it.</summary>
    internal sealed class DrawEvents(WorldSpace worlds, int draws, int outcomes)
    {
        private readonly Dictionary<(int, int), Lineage> _events = [];

        public int Draws => draws;

        public int Outcomes => outcomes;

        public Lineage IsNew(int draw, int seen)
        {
            if (!_events.TryGetValue((draw, seen), out Lineage isNew))
            {
                isNew = Chance.Of(new Rational(outcomes - seen, outcomes)).NewEvent(worlds, $"draw {draw} is new after {seen}");
                _events.Add((draw, seen), isNew);
            }

            return isNew;
        }
    }
}
