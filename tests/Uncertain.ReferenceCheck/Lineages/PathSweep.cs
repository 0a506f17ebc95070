using Uncertain.ReferenceCheck.Cases;

namespace Uncertain.ReferenceCheck.Lineages;

/// <summary>
/// The event that the present edges are exactly those of one simple path: between two given vertices, or through all vertices
/// with any ends. The state is, for each open vertex, where the other end of its fragment is.
/// </summary>
/// <remarks>
/// The first character counts the ends of degree 1 that have closed. A vertex is the place of the other end (its own place if it
/// has no edge), <see cref="Closed"/> if the other end has closed, or <see cref="Inner"/> if it has two edges.
/// </remarks>
internal sealed class PathSweep : FrontierSweep
{
    private const char Inner = '\uFFFE';
    private const char Closed = '\uFFFD';

    private readonly (int Source, int Target)? _ends;

    public PathSweep(Graph graph, IReadOnlyList<Lineage> edges, (int Source, int Target)? ends)
        : base(graph, edges) => _ends = ends;

    protected override string Start
    {
        get
        {
            if (_ends is { } ends)
            {
                return OpeningStep(ends.Source) < 0 || OpeningStep(ends.Target) < 0 ? No : "\0";
            }

            bool isCovered = Enumerable.Range(0, Graph.VertexCount).All(v => OpeningStep(v) >= 0);
            return Graph.VertexCount == 1 ? Yes : isCovered ? "\0" : No;
        }
    }

    protected override string Open(int step, string state, int vertex, bool isPresent) => state + (char)(state.Length - 1);

    protected override string Join(int step, string state, int first, int second)
    {
        char[] mates = state.ToCharArray();
        char a = mates[first + 1];
        char b = mates[second + 1];
        if (a == Inner || b == Inner || a == second || first == second)
        {
            return No;
        }

        // The ends first and second become inner vertices unless they are the far ends themselves.
        (mates[first + 1], mates[second + 1]) = (Inner, Inner);
        if (a != Closed)
        {
            mates[a + 1] = b;
        }

        if (b != Closed)
        {
            mates[b + 1] = a;
        }

        return new string(mates);
    }

    protected override string Close(int step, string state, int place, int vertex)
    {
        char mate = state[place + 1];
        bool mustEnd = _ends is { } ends && (vertex == ends.Source || vertex == ends.Target);
        bool isLone = mate == place;
        bool isEnd = !isLone && mate != Inner;
        if (mustEnd ? !isEnd : _ends is null ? isLone : isEnd)
        {
            return No;
        }

        char[] mates = state.ToCharArray();
        if (isEnd)
        {
            mates[0]++;
            if (mate != Closed)
            {
                mates[mate + 1] = Closed;
            }
        }

        return mates[0] > 2 ? No : string.Concat(mates.Where((_, i) => i != place + 1)
            .Select((m, i) => i > 0 && m < Closed && m > place ? (char)(m - 1) : m));
    }

    protected override string End(string state) => state[0] == 2 ? Yes : No;
}
