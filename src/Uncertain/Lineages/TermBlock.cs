using System.Numerics;
using System.Runtime.InteropServices;

namespace Uncertain.Lineages;

/// <summary>
/// The terms of many disjunctions, each the neighbours of the ones it stands with: 8 bytes for a term of two literals, 8 and 4 a literal
/// for a wider one, no hash table and no list of operands. What an evaluator reads of one answer is then one piece of memory.
/// </summary>
/// <remarks>
/// <para>Terms are put in group by group in any order of groups, and each group is then finished: its terms are sorted and simplified, as
/// conjunctions are elsewhere, and repeats are left out. Groups may be filled and finished on different threads; where a group stands
/// depends on the sizes of the groups only.</para>
/// <para>Nothing that the arena hashes may be written in the meantime.</para>
/// </remarks>
internal sealed class TermBlock
{
    private readonly LineageArena _arena;
    private readonly int _width;
    private readonly int[] _counts;

    // Of each group: where its next term goes. For two literals a place, else a number of a term in the pool.
    private readonly int[] _next;
    private readonly int[]? _firstPlace;
    private readonly LineageNode[] _nodes;
    private readonly int[] _pool;
    private readonly int _poolStart;

    /// <param name="arena">Takes the terms.</param>
    /// <param name="width">References a term, at least 2; all literals or constants.</param>
    /// <param name="counts">Number of terms of each group.</param>
    public TermBlock(LineageArena arena, int width, int[] counts)
    {
        _arena = arena;
        _width = width;
        _counts = counts;
        long places = 0;
        long terms = 0;
        foreach (int count in counts)
        {
            terms += count;
            places += PlacesFor(count);
        }

        (_nodes, int place, _pool, _poolStart) = arena.AddBlock(places, width == 2 ? 0 : terms * width);
        int term = 0;
        _next = new int[counts.Length];
        _firstPlace = width == 2 ? null : new int[counts.Length];
        for (int group = 0; group < counts.Length; group++)
        {
            _next[group] = width == 2 ? place : term;
            if (_firstPlace is not null)
            {
                _firstPlace[group] = place;
            }

            place += PlacesFor(counts[group]);
            term += counts[group];
        }
    }

    /// <summary>Adds the terms of the groups in [first, end), row by row; other rows are passed over.</summary>
    public void Add(ReadOnlySpan<int> groups, ReadOnlySpan<LineageRef> terms, int first, int end)
    {
        uint range = (uint)(end - first);
        if (_width == 2)
        {
            ReadOnlySpan<LineageNode> pairs = MemoryMarshal.Cast<LineageRef, LineageNode>(terms);
            for (int i = 0; i < groups.Length; i++)
            {
                if ((uint)(groups[i] - first) < range)
                {
                    _nodes[_next[groups[i]]++] = pairs[i];
                }
            }

            return;
        }

        Span<LineageRef> pool = MemoryMarshal.Cast<int, LineageRef>(_pool.AsSpan());
        for (int i = 0; i < groups.Length; i++)
        {
            if ((uint)(groups[i] - first) < range)
            {
                int place = _poolStart + (_next[groups[i]]++ * _width);
                terms.Slice(i * _width, _width).CopyTo(pool.Slice(place, _width));
            }
        }
    }

    /// <summary>
    /// The disjunction of a group's terms. Where some of them are single literals, that is still to be made of <paramref name="rest"/>,
    /// which then holds all operands, when all groups are finished.
    /// </summary>
    public LineageRef Finish(int group, out List<LineageRef>? rest)
    {
        int firstPlace = _firstPlace is null ? _next[group] - _counts[group] : _firstPlace[group];
        int place = firstPlace;
        bool ascends = true;
        rest = null;
        for (int i = 0; i < _counts[group]; i++)
        {
            Span<LineageRef> term = Raw(group, i);
            if (_width == 2 && term[0].Word > term[1].Word)
            {
                (term[0], term[1]) = (term[1], term[0]);
            }

            if (!_arena.Rules.IsPlain(term) && !_arena.Rules.TrySimplify(ref term))
            {
                continue;
            }

            if (term.Length < 2)
            {
                if (term.IsEmpty)
                {
                    rest = null;
                    return LineageRef.True;
                }

                (rest ??= []).Add(term[0]);
                continue;
            }

            _nodes[place] = term.Length == 2 ? new LineageNode(term[0].Word, term[1].Word) : new LineageNode(PoolPlace(group, i), -term.Length);
            ascends = ascends && (place == firstPlace || WordsAt(place - 1).SequenceCompareTo(WordsAt(place)) < 0);
            place++;
        }

        if (!ascends)
        {
            place = LeaveOutRepeats(firstPlace, place);
        }

        if (rest is not null)
        {
            for (int i = firstPlace; i < place; i++)
            {
                rest.Add(_arena.At(i));
            }
        }

        return Disjunction(firstPlace, place);
    }

    // One more for the disjunction, where there is one.
    private static int PlacesFor(int count) => count + (count > 1 ? 1 : 0);

    private LineageRef Disjunction(int first, int end)
    {
        if (end - first < 2)
        {
            return end == first ? LineageRef.False : _arena.At(first);
        }

        _nodes[end] = LineageNode.Range(first, end - first);
        return !_arena.At(end);
    }

    private Span<LineageRef> Raw(int group, int term) => _width == 2
        ? MemoryMarshal.Cast<LineageNode, LineageRef>(_nodes.AsSpan(_next[group] - _counts[group] + term, 1))
        : MemoryMarshal.Cast<int, LineageRef>(_pool.AsSpan(PoolPlace(group, term), _width));

    private int PoolPlace(int group, int term) => _poolStart + ((_next[group] - _counts[group] + term) * _width);

    private ReadOnlySpan<LineageRef> OperandsAt(int place) => _arena.Operands(_arena.At(place).Index);

    private ReadOnlySpan<int> WordsAt(int place) => MemoryMarshal.Cast<LineageRef, int>(OperandsAt(place));

    /// <summary>Moves the first ones of equal terms together, in their order; the place behind them.</summary>
    private int LeaveOutRepeats(int first, int end)
    {
        int size = (int)BitOperations.RoundUpToPowerOf2((uint)(2 * (end - first)));
        int[] table = new int[size];
        int kept = first;
        for (int place = first; place < end; place++)
        {
            ReadOnlySpan<LineageRef> term = OperandsAt(place);
            int bucket = (int)(LineageArena.Hash(term) & (uint)(size - 1));
            while (table[bucket] != 0 && !OperandsAt(table[bucket]).SequenceEqual(term))
            {
                bucket = (bucket + 1) & (size - 1);
            }

            if (table[bucket] == 0)
            {
                table[bucket] = kept;
                _nodes[kept++] = _nodes[place];
            }
        }

        return kept;
    }
}
