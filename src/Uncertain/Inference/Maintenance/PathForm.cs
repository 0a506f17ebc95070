using System.Runtime.InteropServices;
using Uncertain.Inference.Compilation;
using Uncertain.Numerics;
using Uncertain.Worlds;

namespace Uncertain.Inference.Maintenance;

/// <summary>
/// A compiled form that keeps both tails of each node, so that after a change only the nodes above the changed variables are computed
/// anew. Wide conjunctions become balanced trees of two operands each: of n independent parts a change of one costs log n products.
/// </summary>
internal sealed class PathForm
{
    private readonly CompiledForm _form;
    private readonly VariableTable _chances;
    private readonly List<FormNodeKind> _kinds = [FormNodeKind.Literal];
    private readonly List<int> _starts = [0];
    private readonly List<int> _arguments = [];
    private readonly Dictionary<int, List<int>> _nodesOf = [];
    private readonly int[] _parentStarts;
    private readonly int[] _parents;
    private readonly Tails<ExtendedDouble>[] _values;
    private readonly int _root;
    private readonly PriorityQueue<int, int> _dirty = new();
    private readonly HashSet<int> _queued = [];

    /// <param name="form">The form.</param>
    /// <param name="chances">The chances now; the caller changes them and then calls <see cref="Update"/>.</param>
    public PathForm(CompiledForm form, VariableTable chances)
    {
        _form = form;
        _chances = chances;
        _starts.Add(0);
        _root = Build();
        (_parentStarts, _parents) = Parents();
        _values = new Tails<ExtendedDouble>[Count];
        _values[0] = Tails<ExtendedDouble>.Always;
        for (int node = 1; node < _values.Length; node++)
        {
            _values[node] = Compute(node);
        }
    }

    public Tails<ExtendedDouble> Tails => Of(_root);

    private int Count => _kinds.Count;

    /// <summary>Takes over the present chances of some variables.</summary>
    public void Update(IEnumerable<int> variables)
    {
        foreach (int variable in variables)
        {
            foreach (int node in _nodesOf.GetValueOrDefault(variable) ?? [])
            {
                Enqueue(node);
            }
        }

        // Operands come before their users, so in this order each node is computed once.
        while (_dirty.TryDequeue(out int node, out _))
        {
            _queued.Remove(node);
            Tails<ExtendedDouble> value = Compute(node);
            if (value.True.CompareTo(_values[node].True) == 0 && value.False.CompareTo(_values[node].False) == 0)
            {
                continue;
            }

            _values[node] = value;
            for (int i = _parentStarts[node]; i < _parentStarts[node + 1]; i++)
            {
                Enqueue(_parents[i]);
            }
        }
    }

    private void Enqueue(int node)
    {
        if (_queued.Add(node))
        {
            _dirty.Enqueue(node, node);
        }
    }

    private int Build()
    {
        var edgeOf = new int[_form.NodeCount];
        int[] words = _form.Words;
        int position = 0;
        for (int node = 1; node < edgeOf.Length; node++)
        {
            var kind = (FormNodeKind)(words[position] & 3);
            int next = _form.Next(position);
            ReadOnlySpan<int> own = words.AsSpan(position + 1, next - position - 1);
            edgeOf[node] = kind switch
            {
                FormNodeKind.Literal => Leaf(kind, own[0], [], _chances.VariableOf(own[0])),
                FormNodeKind.Conjunction => Balanced(Mapped(own)),
                FormNodeKind.Decision => Add(kind, Mapped(own)),
                _ => Leaf(kind, own[0], Mapped(own[1..]), _form.Distributions[own[0]].Variable),
            };
            position = next;
        }

        return Map(_form.Root);

        int Map(int edge) => edgeOf[edge >> 1] ^ (edge & 1);

        int[] Mapped(ReadOnlySpan<int> edges)
        {
            var mapped = new int[edges.Length];
            for (int i = 0; i < mapped.Length; i++)
            {
                mapped[i] = Map(edges[i]);
            }

            return mapped;
        }
    }

    private int Balanced(int[] edges)
    {
        for (int count = edges.Length; count > 1; count = (count + 1) / 2)
        {
            for (int i = 0; i < count / 2; i++)
            {
                edges[i] = Add(FormNodeKind.Conjunction, [edges[2 * i], edges[(2 * i) + 1]]);
            }

            if (count % 2 == 1)
            {
                edges[count / 2] = edges[count - 1];
            }
        }

        return edges[0];
    }

    private int Leaf(FormNodeKind kind, int word, int[] edges, int variable)
    {
        int edge = Add(kind, [word, .. edges]);
        ref List<int>? nodes = ref CollectionsMarshal.GetValueRefOrAddDefault(_nodesOf, variable, out _);
        (nodes ??= []).Add(edge >> 1);
        return edge;
    }

    private int Add(FormNodeKind kind, ReadOnlySpan<int> arguments)
    {
        _kinds.Add(kind);
        _arguments.AddRange(arguments);
        _starts.Add(_arguments.Count);
        return (Count - 1) << 1;
    }

    private (int[] Starts, int[] Parents) Parents()
    {
        var starts = new int[Count + 1];
        for (int node = 1; node < Count; node++)
        {
            foreach (int edge in Edges(node))
            {
                starts[(edge >> 1) + 1]++;
            }
        }

        for (int node = 0; node < Count; node++)
        {
            starts[node + 1] += starts[node];
        }

        var parents = new int[starts[^1]];
        int[] next = [.. starts];
        for (int node = 1; node < Count; node++)
        {
            foreach (int edge in Edges(node))
            {
                parents[next[edge >> 1]++] = node;
            }
        }

        return (starts, parents);
    }

    private ReadOnlySpan<int> Arguments(int node) =>
        CollectionsMarshal.AsSpan(_arguments)[_starts[node].._starts[node + 1]];

    private ReadOnlySpan<int> Edges(int node) => _kinds[node] switch
    {
        FormNodeKind.Literal => [],
        FormNodeKind.Choice => Arguments(node)[1..],
        _ => Arguments(node),
    };

    private Tails<ExtendedDouble> Compute(int node)
    {
        ReadOnlySpan<int> arguments = Arguments(node);
        switch (_kinds[node])
        {
            case FormNodeKind.Literal:
                return new ExtendedChances(new ChanceSetting(_chances)).Literal(arguments[0]);
            case FormNodeKind.Conjunction:
                return Of(arguments[0]) & Of(arguments[1]);
            case FormNodeKind.Decision:
                Tails<ExtendedDouble> selector = Of(arguments[0]);
                return Weighted(selector.True, Of(arguments[1]), Weighted(selector.False, Of(arguments[2]), default));
            default:
                ExtendedDouble[] weights = new ChanceSetting(_chances).Weights(_form.Distributions[arguments[0]]);
                Tails<ExtendedDouble> sum = default;
                for (int i = 0; i < weights.Length; i++)
                {
                    sum = Weighted(weights[i], Of(arguments[i + 1]), sum);
                }

                return sum;
        }
    }

    private static Tails<ExtendedDouble> Weighted(ExtendedDouble weight, Tails<ExtendedDouble> part, Tails<ExtendedDouble> sum) =>
        new(sum.True + (weight * part.True), sum.False + (weight * part.False));

    private Tails<ExtendedDouble> Of(int edge) => _values[edge >> 1].NegateIf((edge & 1) != 0);
}
