using Uncertain.Inference.Bounds;
using Uncertain.Numerics;

namespace Uncertain.Inference.Ranking;

/// <summary>
/// The answers whose probability is at least a given one. Those whose bounds lie on both sides of it are refined in rounds, all by the
/// same number of nodes, so that one hard answer does not keep the others from being decided.
/// </summary>
internal static class AtLeastDecision
{
    public static Verdict Run(Contenders answers, double least)
    {
        var threshold = new Tails<double>(least, 1 - least);
        var belonging = new List<int>();
        var open = new List<int>();
        var undecided = new List<int>();
        Sort(Enumerable.Range(0, answers.Count));
        while (open.Count > 0)
        {
            List<int> round = [.. open];
            open.Clear();
            answers.Report(answers.Count - round.Count);
            answers.Refine(round, bounds => IsDecided(bounds, threshold));
            Sort(round);
        }

        answers.Report(answers.Count);
        belonging.Sort();
        return new Verdict(belonging, undecided);

        void Sort(IEnumerable<int> numbers)
        {
            foreach (int answer in numbers)
            {
                if (!IsDecided(answers[answer], threshold) && answers.CanRefine(answer))
                {
                    open.Add(answer);
                    continue;
                }

                answers.Release(answer);
                Place(answer);
            }
        }

        void Place(int answer)
        {
            TailBounds bounds = answers[answer];
            if (IsDecided(bounds, threshold))
            {
                AddIf(ProbabilityOrder.Compare(bounds.Low, threshold) >= 0, belonging);
            }
            else if (answers.Figure(answer) is { Guarantee.Kind: GuaranteeKind.Exact } exact)
            {
                // It is compared as it is, not with its rounding.
                AddIf(ProbabilityOrder.Compare(new(exact.Value, exact.Complement), threshold) >= 0, belonging);
            }
            else
            {
                undecided.Add(answer);
            }

            void AddIf(bool condition, List<int> list)
            {
                if (condition)
                {
                    list.Add(answer);
                }
            }
        }
    }

    private static bool IsDecided(TailBounds bounds, Tails<double> threshold) =>
        ProbabilityOrder.Compare(bounds.Low, threshold) >= 0 || ProbabilityOrder.Compare(bounds.High, threshold) < 0;
}
