using System.Numerics;
using Uncertain.Numerics;

namespace Uncertain.Inference.Compilation;

/// <summary>
/// One pass over a compiled form from the last node to the first, after the forward pass: for each node the derivative of the
/// chance of the whole by the chance of the node. Linear in the size of the form.
/// </summary>
/// <remarks>
/// Reverse accumulation over an arithmetic circuit: A. Darwiche, "A differential approach to inference in Bayesian networks",
/// Journal of the ACM 50(3), 2003. The derivative by an event's chance is P(whole given the event) - P(whole given its absence),
/// known as its importance after Z. W. Birnbaum (1969). A difference of two branches is taken of their smaller tails.
/// </remarks>
internal sealed class BackwardPass<TNumber, TChances>
    where TNumber : struct, IAdditionOperators<TNumber, TNumber, TNumber>, IMultiplyOperators<TNumber, TNumber, TNumber>,
        IAdditiveIdentity<TNumber, TNumber>, IMultiplicativeIdentity<TNumber, TNumber>, IComparable<TNumber>
    where TChances : struct, IChanceReader<TNumber>
{
    private readonly CompiledForm _form;
    private readonly TChances _chances;
    private readonly Tails<TNumber>[] _values;
    private readonly TNumber[]?[] _weights;
    private readonly Difference<TNumber>[] _derivatives;
    private readonly Difference<TNumber>[]?[] _ofDistribution;
    private TNumber[] _behind = new TNumber[16];
    private bool _isInRange = true;

    private BackwardPass(CompiledForm form, TChances chances)
    {
        _form = form;
        _chances = chances;
        _values = new Tails<TNumber>[form.NodeCount];
        _weights = new TNumber[]?[form.Distributions.Length];
        _derivatives = new Difference<TNumber>[form.NodeCount];
        _ofDistribution = new Difference<TNumber>[]?[form.Distributions.Length];
    }

    /// <summary>Null if a number came near the end of its range; then larger numbers are needed.</summary>
    public static FormDerivatives<TNumber>? TryRun(CompiledForm form, TChances chances)
    {
        var pass = new BackwardPass<TNumber, TChances>(form, chances);
        if (!ForwardPass<TNumber, TChances>.TryRun(form, chances, pass._values, pass._weights))
        {
            return null;
        }

        pass.Run();
        return pass._isInRange ? pass.Collect() : null;
    }

    private void Run()
    {
        int[] words = _form.Words;
        int[] positions = _form.Positions();
        _derivatives[_form.Root >> 1] = new Difference<TNumber>(TNumber.MultiplicativeIdentity, TNumber.AdditiveIdentity)
            .NegateIf((_form.Root & 1) != 0);
        for (int node = _form.NodeCount - 1; node > 0; node--)
        {
            Difference<TNumber> own = _derivatives[node];
            if (own == default)
            {
                continue;
            }

            int position = positions[node];
            int count = words[position] >> 2;
            switch ((FormNodeKind)(words[position] & 3))
            {
                case FormNodeKind.Conjunction:
                    Conjunction(own, words.AsSpan(position + 1, count));
                    break;
                case FormNodeKind.Decision:
                    Decision(own, words[position + 1], words[position + 2], words[position + 3]);
                    break;
                case FormNodeKind.Choice:
                    Choice(own, words[position + 1], words.AsSpan(position + 2, count));
                    break;
                default:
                    break; // A literal keeps what it got.
            }
        }
    }

    // Each part by the chance of all the others.
    private void Conjunction(Difference<TNumber> own, ReadOnlySpan<int> edges)
    {
        if (_behind.Length < edges.Length)
        {
            _behind = new TNumber[edges.Length * 2];
        }

        TNumber product = TNumber.MultiplicativeIdentity;
        for (int i = edges.Length - 1; i >= 0; i--)
        {
            _behind[i] = product;
            product *= Value(edges[i]).True;
        }

        product = TNumber.MultiplicativeIdentity;
        for (int i = 0; i < edges.Length; i++)
        {
            Add(edges[i], own * (product * _behind[i]));
            product *= Value(edges[i]).True;
        }
    }

    private void Decision(Difference<TNumber> own, int selector, int then, int otherwise)
    {
        Tails<TNumber> chance = Value(selector);
        Add(selector, own * Gap(Value(then), Value(otherwise)));
        Add(then, own * chance.True);
        Add(otherwise, own * chance.False);
    }

    private void Choice(Difference<TNumber> own, int distribution, ReadOnlySpan<int> edges)
    {
        TNumber[] weights = _weights[distribution]!;
        Difference<TNumber>[] sums = _ofDistribution[distribution] ??= new Difference<TNumber>[edges.Length - 1];
        Tails<TNumber> rest = Value(edges[^1]);
        for (int i = 0; i < sums.Length; i++)
        {
            sums[i] += Checked(own * Gap(Value(edges[i]), rest));
            Add(edges[i], own * weights[i]);
        }

        Add(edges[^1], own * weights[^1]);
    }

    /// <summary>The first chance less the second, from the tails that are smaller together.</summary>
    private static Difference<TNumber> Gap(Tails<TNumber> first, Tails<TNumber> second) =>
        (first.True + second.True).CompareTo(first.False + second.False) <= 0
            ? new Difference<TNumber>(first.True, second.True)
            : new Difference<TNumber>(second.False, first.False);

    private void Add(int edge, Difference<TNumber> change)
    {
        if (edge >> 1 != 0)
        {
            _derivatives[edge >> 1] += Checked(change).NegateIf((edge & 1) != 0);
        }
    }

    private Difference<TNumber> Checked(Difference<TNumber> change)
    {
        _isInRange &= !_chances.IsOutOfRange(change.Rise + change.Fall);
        return change;
    }

    private Tails<TNumber> Value(int edge) => _values[edge >> 1].NegateIf((edge & 1) != 0);

    /// <summary>By outcome: from literals and from choices that tell it apart.</summary>
    private FormDerivatives<TNumber> Collect()
    {
        var places = new IntMap(16);
        var slots = new List<int>();
        var sums = new List<Difference<TNumber>>();
        int position = 0;
        for (int node = 1; node < _form.NodeCount; node++)
        {
            if ((FormNodeKind)(_form.Words[position] & 3) == FormNodeKind.Literal)
            {
                AddSlot(_form.Words[position + 1], _derivatives[node]);
            }

            position = _form.Next(position);
        }

        for (int i = 0; i < _ofDistribution.Length; i++)
        {
            int[] listed = _form.Distributions[i].Slots;
            for (int j = 0; j < listed.Length; j++)
            {
                AddSlot(listed[j], _ofDistribution[i] is { } own ? own[j] : default);
            }
        }

        return new FormDerivatives<TNumber>(Value(_form.Root), [.. slots], [.. sums]);

        void AddSlot(int slot, Difference<TNumber> derivative)
        {
            if (places.TryGet(slot, out int place))
            {
                sums[place] += derivative;
                return;
            }

            places.Add(slot, slots.Count);
            slots.Add(slot);
            sums.Add(derivative);
        }
    }
}
