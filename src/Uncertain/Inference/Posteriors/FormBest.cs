using Uncertain.Inference.Compilation;
using Uncertain.Numerics;

namespace Uncertain.Inference.Posteriors;

/// <summary>
/// The most probable outcomes of a part's variables, given that the part holds: one pass up its compiled form with the better case of
/// each node, one down along the best.
/// </summary>
/// <remarks>
/// Each outcome counts by the ratio of its chance to that of its variable's best outcome. Variables that a case does not mention take
/// their best outcome and count 1, so that cases over different variables compare without being made smooth. Of two equal cases the first
/// one in the form is taken: then the result is the same on all machines.
/// </remarks>
internal sealed class FormBest
{
    private readonly PartValues _part;
    private readonly Tails<ExtendedDouble>[] _best;

    private FormBest(PartValues part)
    {
        _part = part;
        _best = new Tails<ExtendedDouble>[part.Form.NodeCount];
        _best[0] = Tails<ExtendedDouble>.Always;
        for (int node = 1; node < _best.Length; node++)
        {
            _best[node] = new(Best(node, true), Best(node, false));
        }
    }

    /// <summary>Adds the outcome of each variable that is not at its own best for certain.</summary>
    public static void Find(PartValues part, Dictionary<int, int> outcomes)
    {
        var best = new FormBest(part);
        var pending = new Stack<(int Edge, bool IsTrue)>([(part.Form.Root, true)]);
        while (pending.TryPop(out (int Edge, bool IsTrue) item))
        {
            if (item.Edge >> 1 != 0)
            {
                best.Follow(item.Edge >> 1, item.IsTrue != ((item.Edge & 1) != 0), pending, outcomes);
            }
        }
    }

    // In the bottom-up pass a node's value is the best of its cases.
    private ExtendedDouble Best(int node, bool isTrue)
    {
        ExtendedDouble[] cases = Cases(node, isTrue);
        return cases[OutcomeChances.Best(cases)];
    }

    /// <summary>What each case of a node counts; one case where there is no choice.</summary>
    private ExtendedDouble[] Cases(int node, bool isTrue)
    {
        (FormNodeKind kind, ReadOnlyMemory<int> memory) = _part.Node(node);
        ReadOnlySpan<int> words = memory.Span;
        switch (kind)
        {
            case FormNodeKind.Literal:
                return Ratios(_part.Chances.VariableOf(words[0]), [words[0]], isListed: isTrue);
            case FormNodeKind.Conjunction when isTrue:
                ExtendedDouble product = ExtendedDouble.MultiplicativeIdentity;
                foreach (int edge in words)
                {
                    product *= Of(edge, true);
                }

                return [product];
            case FormNodeKind.Conjunction:
                // One operand is false, and the others are at their best.
                var falseOnes = new ExtendedDouble[words.Length];
                for (int i = 0; i < falseOnes.Length; i++)
                {
                    falseOnes[i] = Of(words[i], false);
                }

                return falseOnes;
            case FormNodeKind.Decision:
                return [Of(words[0], true) * Of(words[1], isTrue), Of(words[0], false) * Of(words[2], isTrue)];
            default:
                FormDistribution distribution = _part.Form.Distributions[words[0]];
                var cases = new ExtendedDouble[words.Length - 1];
                ExtendedDouble[] listed = Ratios(distribution.Variable, distribution.Slots, isListed: true);
                ExtendedDouble[] others = Ratios(distribution.Variable, distribution.Slots, isListed: false);
                int first = _part.Chances.FirstSlot(distribution.Variable);
                for (int i = 0; i < cases.Length; i++)
                {
                    ExtendedDouble ratio = i < distribution.Slots.Length
                        ? listed[distribution.Slots[i] - first]
                        : others[OutcomeChances.Best(others)];
                    cases[i] = ratio * Of(words[i + 1], isTrue);
                }

                return cases;
        }
    }

    private void Follow(int node, bool isTrue, Stack<(int Edge, bool IsTrue)> pending, Dictionary<int, int> outcomes)
    {
        (FormNodeKind kind, ReadOnlyMemory<int> memory) = _part.Node(node);
        ReadOnlySpan<int> words = memory.Span;
        int best = OutcomeChances.Best(Cases(node, isTrue));
        switch (kind)
        {
            case FormNodeKind.Literal:
                outcomes[_part.Chances.VariableOf(words[0])] = best;
                break;
            case FormNodeKind.Conjunction when isTrue:
                foreach (int edge in words)
                {
                    pending.Push((edge, true));
                }

                break;
            case FormNodeKind.Conjunction:
                pending.Push((words[best], false));
                break;
            case FormNodeKind.Decision:
                pending.Push((words[0], best == 0));
                pending.Push((words[best + 1], isTrue));
                break;
            default:
                FormDistribution distribution = _part.Form.Distributions[words[0]];
                outcomes[distribution.Variable] = best < distribution.Slots.Length
                    ? distribution.Slots[best] - _part.Chances.FirstSlot(distribution.Variable)
                    : OutcomeChances.Best(Ratios(distribution.Variable, distribution.Slots, isListed: false));
                pending.Push((words[best + 1], isTrue));
                break;
        }
    }

    /// <summary>The ratio of each outcome's chance to the best one's; 0 for those that are not, or are, among some slots.</summary>
    private ExtendedDouble[] Ratios(int variable, int[] slots, bool isListed)
    {
        ExtendedDouble[] chances = OutcomeChances.Of(_part.Chances, variable);
        ExtendedDouble best = chances[OutcomeChances.Best(chances)];
        int first = _part.Chances.FirstSlot(variable);
        for (int i = 0; i < chances.Length; i++)
        {
            bool isAmong = i < chances.Length - 1 && Array.BinarySearch(slots, first + i) >= 0;
            chances[i] = isAmong == isListed ? chances[i] / best : default;
        }

        return chances;
    }

    private ExtendedDouble Of(int edge, bool isTrue)
    {
        Tails<ExtendedDouble> tails = _best[edge >> 1].NegateIf((edge & 1) != 0);
        return isTrue ? tails.True : tails.False;
    }
}
