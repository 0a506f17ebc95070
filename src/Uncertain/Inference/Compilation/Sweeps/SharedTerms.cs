using System.Runtime.InteropServices;
using Uncertain.Lineages;

namespace Uncertain.Inference.Compilation.Sweeps;

/// <summary>
/// Terms in flat lists that are used again and again, with an order for a <see cref="TermSweep{TNumber}"/>: variables that several terms
/// share are to be open for a short time.
/// </summary>
internal sealed class SharedTerms
{
    /// <summary>Most variables open at a time.</summary>
    public const int MostOpen = 12;

    // What a sweep may cost; where it costs more, other methods may find structure that it does not see.
    private const long MostWork = 1 << 16;

    private readonly List<int> _start = [];
    private readonly List<int> _literals = [];
    private readonly List<int> _uses = [];
    private readonly List<int> _left = [];
    private readonly List<int> _keys = [];
    private readonly List<int> _order = [];
    private readonly List<int> _best = [];

    public SlotNumbers Slots { get; } = new();

    public int Count => _start.Count - 1;

    public int LiteralCount => _literals.Count;

    /// <summary>The terms in the order found.</summary>
    public ReadOnlySpan<int> Order => CollectionsMarshal.AsSpan(_best);

    /// <summary>States that the sweep looks at.</summary>
    public long Work { get; private set; }

    /// <summary>A term's literals: number of the variable times 2, and 1 if negated.</summary>
    public ReadOnlySpan<int> Term(int term) => CollectionsMarshal.AsSpan(_literals)[_start[term].._start[term + 1]];

    /// <summary>Number of terms that a variable is in.</summary>
    public int Uses(int variable) => _uses[variable];

    /// <summary>Reads terms and finds an order. False if what is there are no such terms, or no order found is good.</summary>
    public bool TryRead(TermSource source, CancellationToken cancellationToken)
    {
        Slots.Clear(2 * source.Count);
        _start.Clear();
        _literals.Clear();
        _uses.Clear();
        Span<LineageRef> single = stackalloc LineageRef[1];
        for (int term = 0; term < source.Count; term++)
        {
            cancellationToken.ThrowIfCancellationRequested();
            if (!source.TryRead(term, single, out ReadOnlySpan<LineageRef> literals))
            {
                return false;
            }

            _start.Add(_literals.Count);
            foreach (LineageRef literal in literals)
            {
                int variable = Slots.NumberOf(literal.Index, out bool isNew);
                if (isNew)
                {
                    _uses.Add(0);
                }

                _uses[variable]++;
                _literals.Add((variable << 1) | (literal.IsNegated ? 1 : 0));
            }
        }

        _start.Add(_literals.Count);
        return TryOrder(cancellationToken);
    }

    private bool TryOrder(CancellationToken cancellationToken)
    {
        Work = long.MaxValue;
        Try(static (_, term) => term);
        if (Work > 8L * Count)
        {
            // Terms that share one variable come together.
            cancellationToken.ThrowIfCancellationRequested();
            Try(static (terms, term) => terms.SharedOf(term, last: false));
            Try(static (terms, term) => terms.SharedOf(term, last: true));
        }

        return Work <= MostWork + (4L * Count);
    }

    private int SharedOf(int term, bool last)
    {
        int found = int.MaxValue;
        foreach (int literal in Term(term))
        {
            int variable = literal >> 1;
            if (_uses[variable] > 1 && (last || found == int.MaxValue))
            {
                found = variable;
            }
        }

        return found;
    }

    private void Try(Func<SharedTerms, int, int> key)
    {
        _order.Clear();
        _keys.Clear();
        for (int term = 0; term < Count; term++)
        {
            _order.Add(term);
            _keys.Add(key(this, term));
        }

        // Equal keys keep the order in which the terms came.
        Span<int> order = CollectionsMarshal.AsSpan(_order);
        MemoryExtensions.Sort(CollectionsMarshal.AsSpan(_keys), order);
        long work = WorkOf(order);
        if (work < Work)
        {
            Work = work;
            _best.Clear();
            _best.AddRange(order);
        }
    }

    private long WorkOf(ReadOnlySpan<int> order)
    {
        _left.Clear();
        _left.AddRange(CollectionsMarshal.AsSpan(_uses));
        long work = 0;
        int open = 0;
        foreach (int term in order)
        {
            foreach (int literal in Term(term))
            {
                open += _uses[literal >> 1] > 1 && _left[literal >> 1] == _uses[literal >> 1] ? 1 : 0;
            }

            if (open > MostOpen)
            {
                return long.MaxValue;
            }

            work += 1L << open;
            foreach (int literal in Term(term))
            {
                open -= --_left[literal >> 1] == 0 && _uses[literal >> 1] > 1 ? 1 : 0;
            }
        }

        return work;
    }
}
