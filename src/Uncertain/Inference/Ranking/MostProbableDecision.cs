using Uncertain.Inference.Bounds;
using Uncertain.Numerics;

namespace Uncertain.Inference.Ranking;

/// <summary>
/// The k most probable answers. Refined are only answers while they have one of the k greatest upper bounds: whatever the order of the
/// work, an answer whose upper bound stays above the k-th probability could not be left out unrefined.
/// </summary>
/// <remarks>
/// The critical region between the k-th lower bound and the upper bound after the k-th decides as in C. Ré, N. Dalvi, D. Suciu,
/// "Efficient top-k query evaluation on probabilistic data", IEEE International Conference on Data Engineering, 2007; here with certain
/// bounds. Which answers are refined does not depend on the number of threads.
/// </remarks>
internal sealed class MostProbableDecision
{
    // Refined side by side in a round.
    private const int Batch = 8;

    private readonly Contenders _answers;
    private readonly int _count;
    private readonly List<int> _ahead = [];
    private List<int> _active;

    private MostProbableDecision(Contenders answers, int count)
    {
        _answers = answers;
        _count = count;
        _active = [.. Enumerable.Range(0, answers.Count).Where(answer => answers[answer].High.True > 0)];
    }

    public static Verdict Run(Contenders answers, int count) => new MostProbableDecision(answers, count).Run();

    private Verdict Run()
    {
        while (_active.Count > _count - _ahead.Count)
        {
            int places = _count - _ahead.Count;
            _active.Sort(ByUpperBound);
            Tails<double> lower = LowerBoundOfPlace(places);
            DropBehind(places, lower);
            if (_active.Count <= places)
            {
                break;
            }

            Tails<double> upper = _answers[_active[places]].High;
            if (TakeAhead(places, upper))
            {
                continue;
            }

            List<int> batch = InTheWay(places, lower, out bool isInside);
            _answers.Report(_answers.Count - _active.Count);
            if (batch.Count == 0)
            {
                return Result(_active);
            }

            // Enough for now: ahead of all others, or no longer among the k greatest upper bounds, or behind for good.
            Tails<double> border = isInside ? upper : lower;
            _answers.Refine(batch, bounds =>
                ProbabilityOrder.Compare(bounds.Low, upper) > 0 || ProbabilityOrder.Compare(bounds.High, border) < 0);
        }

        _answers.Report(_answers.Count);
        _ahead.AddRange(_active);
        return Result([]);
    }

    private Verdict Result(List<int> undecided)
    {
        _ahead.Sort(ByUpperBound);
        return new Verdict(_ahead, undecided);
    }

    /// <summary>The k-th greatest lower bound: so probable are k answers at least.</summary>
    private Tails<double> LowerBoundOfPlace(int places)
    {
        Tails<double>[] lows = [.. _active.Select(answer => _answers[answer].Low)];
        Array.Sort(lows, static (left, right) => ProbabilityOrder.Compare(right, left));
        return lows[places - 1];
    }

    /// <summary>Leaves out answers that cannot come to a place any more.</summary>
    private void DropBehind(int places, Tails<double> lower)
    {
        int kept = _active.Count;
        while (kept > places && ProbabilityOrder.Compare(_answers[_active[kept - 1]].High, lower) < 0)
        {
            _answers.Release(_active[--kept]);
        }

        _active = _active[..kept];
    }

    /// <summary>Takes out answers that are ahead of all that are left; whether there were any.</summary>
    private bool TakeAhead(int places, Tails<double> upper)
    {
        int before = _ahead.Count;
        var rest = new List<int>(_active.Count);
        for (int i = 0; i < _active.Count; i++)
        {
            bool isAhead = i < places && ProbabilityOrder.Compare(_answers[_active[i]].Low, upper) > 0;
            (isAhead ? _ahead : rest).Add(_active[i]);
        }

        _active = rest;
        return _ahead.Count > before;
    }

    /// <summary>
    /// What to refine next: of the k greatest upper bounds, since an answer that has one of them at the end must be known; of the
    /// others only what ties with them.
    /// </summary>
    private List<int> InTheWay(int places, Tails<double> lower, out bool isInside)
    {
        List<int> batch = [.. _active.Take(places).Where(_answers.CanRefine).Take(Batch)];
        isInside = batch.Count > 0;
        return isInside
            ? batch
            : [.. _active.Skip(places)
                .Where(_answers.CanRefine)
                .Where(answer => ProbabilityOrder.Compare(_answers[answer].High, lower) >= 0)
                .Take(Batch)];
    }

    private int ByUpperBound(int left, int right)
    {
        int order = ProbabilityOrder.Compare(_answers[right].High, _answers[left].High);
        return order != 0 ? order : left.CompareTo(right);
    }
}
