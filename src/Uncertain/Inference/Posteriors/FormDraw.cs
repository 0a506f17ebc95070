using Uncertain.Inference.Compilation;
using Uncertain.Numerics;
using Uncertain.Worlds;

namespace Uncertain.Inference.Posteriors;

/// <summary>
/// Draws outcomes of a part's variables, given that the part holds: down the compiled form from 'the whole is true', each case with its
/// share of the chance. Variables that are not come by are free, and keep their chances from before.
/// </summary>
/// <remarks>
/// A conjunction that is to be false goes through its operands: the first false one is drawn, those before it are true, those behind it
/// free. So nothing has to be made smooth, and a draw costs at most the size of the form.
/// </remarks>
internal sealed class FormDraw(PartValues part)
{
    private readonly Stack<(int Edge, bool IsTrue)> _pending = new();

    /// <summary>Adds the outcome of each variable that is fixed; 'none of them' is the number of outcomes.</summary>
    public void Draw(UniformStream random, Dictionary<int, int> outcomes)
    {
        _pending.Push((part.Form.Root, true));
        while (_pending.TryPop(out (int Edge, bool IsTrue) item))
        {
            int node = item.Edge >> 1;
            bool isTrue = item.IsTrue != ((item.Edge & 1) != 0);
            if (node == 0)
            {
                continue;
            }

            (FormNodeKind kind, ReadOnlyMemory<int> memory) = part.Node(node);
            ReadOnlySpan<int> words = memory.Span;
            switch (kind)
            {
                case FormNodeKind.Literal:
                    Literal(words[0], isTrue, ref random, outcomes);
                    break;
                case FormNodeKind.Conjunction when isTrue:
                    foreach (int edge in words)
                    {
                        _pending.Push((edge, true));
                    }

                    break;
                case FormNodeKind.Conjunction:
                    FalseConjunction(words, ref random);
                    break;
                case FormNodeKind.Decision:
                    Tails<ExtendedDouble> selector = part.Of(words[0]);
                    bool holds = random.IsFirst(selector.True * Tail(words[1], isTrue), selector.False * Tail(words[2], isTrue));
                    _pending.Push((words[0], holds));
                    _pending.Push((words[holds ? 1 : 2], isTrue));
                    break;
                default:
                    Choice(words, isTrue, ref random, outcomes);
                    break;
            }
        }
    }

    private ExtendedDouble Tail(int edge, bool isTrue) => isTrue ? part.Of(edge).True : part.Of(edge).False;

    private void FalseConjunction(ReadOnlySpan<int> edges, ref UniformStream random)
    {
        // The chance that not all from here on are true.
        var falseFrom = new ExtendedDouble[edges.Length + 1];
        for (int i = edges.Length - 1; i >= 0; i--)
        {
            Tails<ExtendedDouble> tails = part.Of(edges[i]);
            falseFrom[i] = tails.False + (tails.True * falseFrom[i + 1]);
        }

        for (int i = 0; i < edges.Length; i++)
        {
            Tails<ExtendedDouble> tails = part.Of(edges[i]);
            bool isTrue = !random.IsFirst(tails.False, tails.True * falseFrom[i + 1]);
            _pending.Push((edges[i], isTrue));
            if (!isTrue)
            {
                return;
            }
        }
    }

    private void Choice(ReadOnlySpan<int> words, bool isTrue, ref UniformStream random, Dictionary<int, int> outcomes)
    {
        FormDistribution distribution = part.Form.Distributions[words[0]];
        ExtendedDouble[] weights = part.Weights(words[0]);
        ReadOnlySpan<int> edges = words[1..];
        var cases = new ExtendedDouble[edges.Length];
        for (int i = 0; i < cases.Length; i++)
        {
            cases[i] = weights[i] * Tail(edges[i], isTrue);
        }

        int drawn = random.Case(cases);
        _pending.Push((edges[drawn], isTrue));
        outcomes[distribution.Variable] = drawn < distribution.Slots.Length
            ? distribution.Slots[drawn] - part.Chances.FirstSlot(distribution.Variable)
            : Other(distribution.Variable, distribution.Slots, ref random);
    }

    private void Literal(int slot, bool isTrue, ref UniformStream random, Dictionary<int, int> outcomes)
    {
        int variable = part.Chances.VariableOf(slot);
        outcomes[variable] = isTrue ? slot - part.Chances.FirstSlot(variable) : Other(variable, [slot], ref random);
    }

    /// <summary>An outcome that is not among some slots, by the chances.</summary>
    private int Other(int variable, ReadOnlySpan<int> slots, ref UniformStream random) =>
        random.Case(OutcomeChances.Of(part.Chances, variable, slots));
}
