using Uncertain.Numerics;

namespace Uncertain.Inference.Compilation;

/// <summary>
/// The tails of the nodes of a form while it is built, under one setting of the chances. Parts whose tails are computed in another
/// way are put into the form as literals that only this reads; such a form has no other use.
/// </summary>
internal sealed class FormValues(FormBuilder form, ChanceSetting setting)
{
    private readonly List<Tails<ExtendedDouble>> _known = [];
    private Tails<ExtendedDouble>[] _values = [Tails<ExtendedDouble>.Always];
    private ExtendedDouble[]?[] _weights = [];
    private int _nodes = 1;
    private int _position;

    /// <summary>Whether there are parts that the form does not have itself.</summary>
    public bool HasKnown => _known.Count > 0;

    /// <summary>The edge to a part with given tails.</summary>
    public int Add(Tails<ExtendedDouble> tails)
    {
        _known.Add(tails);
        return form.Literal(~(_known.Count - 1));
    }

    /// <summary>Both tails of an edge.</summary>
    public Tails<ExtendedDouble> Of(int edge)
    {
        if (edge >> 1 >= _nodes)
        {
            Extend();
        }

        return _values[edge >> 1].NegateIf((edge & 1) != 0);
    }

    /// <summary>As <see cref="ChanceSetting.Weights"/>.</summary>
    public ExtendedDouble[] Weights(FormDistribution distribution) => setting.Weights(distribution);

    /// <summary>To be called when the form drops its last nodes.</summary>
    public void ReturnTo((int Words, int Nodes) mark)
    {
        if (mark.Nodes < _nodes)
        {
            (_position, _nodes) = mark;
        }
    }

    private void Extend()
    {
        if (_values.Length < form.NodeCount)
        {
            Array.Resize(ref _values, Math.Max(form.NodeCount, 2 * _values.Length));
        }

        if (_weights.Length < form.Distributions.Count)
        {
            Array.Resize(ref _weights, Math.Max(form.Distributions.Count, 2 * _weights.Length));
        }

        var chances = new KnownChances(setting, _known);
        for (; _nodes < form.NodeCount; _nodes++)
        {
            _values[_nodes] = ForwardPass<ExtendedDouble, KnownChances>.Node(
                form.Words, ref _position, form.Distributions, chances, _values, _weights);
        }
    }

    private readonly struct KnownChances(ChanceSetting setting, List<Tails<ExtendedDouble>> known) : IChanceReader<ExtendedDouble>
    {
        private readonly ExtendedChances _chances = new(setting);

        public Tails<ExtendedDouble> Literal(int slot) => slot < 0 ? known[~slot] : _chances.Literal(slot);

        public ExtendedDouble[] Weights(FormDistribution distribution) => _chances.Weights(distribution);

        public bool IsOutOfRange(Tails<ExtendedDouble> tails) => false;

        public bool IsOutOfRange(ExtendedDouble number) => false;
    }
}
