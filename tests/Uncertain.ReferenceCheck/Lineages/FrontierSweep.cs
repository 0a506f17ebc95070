using Uncertain.ReferenceCheck.Cases;

namespace Uncertain.ReferenceCheck.Lineages;

/// <summary>
/// A sweep over the edges of a graph. The state is one character for each open vertex, whose meaning is the derived class's,
/// and a rest. A vertex opens before its first edge and closes after its last one.
/// </summary>
internal abstract class FrontierSweep : StateSweep
{
    private readonly List<Step> _steps = [];

    protected FrontierSweep(Graph graph, IReadOnlyList<Lineage> edges, IReadOnlyList<Lineage>? vertices = null)
    {
        Graph = graph;
        int[] order = VertexOrder.EdgeOrder(graph);
        var last = new int[graph.VertexCount];
        for (int i = 0; i < order.Length; i++)
        {
            last[graph.Edges[order[i]].From] = i;
            last[graph.Edges[order[i]].To] = i;
        }

        var open = new List<int>();
        for (int i = 0; i < order.Length; i++)
        {
            (int from, int to) = graph.Edges[order[i]];
            int[] ends = from == to ? [from] : [from, to];
            Lineage always = edges[order[i]].Worlds.Always;
            foreach (int vertex in ends)
            {
                if (!open.Contains(vertex))
                {
                    AddStep(vertices?[vertex] ?? always, Action.Open, vertex, open.Count, open.Count);
                    open.Add(vertex);
                }
            }

            AddStep(edges[order[i]], Action.Edge, -1, open.IndexOf(from), open.IndexOf(to));
            foreach (int vertex in ends)
            {
                if (last[vertex] == i)
                {
                    int place = open.IndexOf(vertex);
                    AddStep(always, Action.Close, vertex, place, place);
                    open.RemoveAt(place);
                }
            }
        }
    }

    private enum Action
    {
        Open,
        Edge,
        Close,
    }

    protected Graph Graph { get; }

    protected override int StepCount => _steps.Count;

    protected sealed override IReadOnlyList<Lineage> Ways(int step) => _steps[step].Ways;

    protected sealed override string Next(int step, string state, int way)
    {
        Step here = _steps[step];
        string next = here.Action switch
        {
            Action.Open => Open(step, state, here.Vertex, way == 0),
            Action.Edge => way == 0 ? Join(step, state, here.First, here.Second) : state,
            _ => Close(step, state, here.First, here.Vertex),
        };
        return step < _steps.Count - 1 || next is Yes or No ? next : End(next);
    }

    /// <summary>The step at which a vertex opens; -1 for a vertex without edges, which never does.</summary>
    protected int OpeningStep(int vertex) => _steps.FindIndex(step => step.Action == Action.Open && step.Vertex == vertex);

    /// <summary>A vertex opens behind all open ones; present or, where vertices may be absent, not.</summary>
    protected abstract string Open(int step, string state, int vertex, bool isPresent);

    /// <summary>An edge between the open vertices at two places is present.</summary>
    protected abstract string Join(int step, string state, int first, int second);

    /// <summary>The vertex at a place closes; those behind it move up.</summary>
    protected abstract string Close(int step, string state, int place, int vertex);

    /// <summary>All vertices are closed: <see cref="StateSweep.Yes"/> or <see cref="StateSweep.No"/>.</summary>
    protected abstract string End(string state);

    private void AddStep(Lineage element, Action action, int vertex, int first, int second) =>
        _steps.Add(new Step([element, !element], action, vertex, first, second));

    private sealed record Step(Lineage[] Ways, Action Action, int Vertex, int First, int Second);
}
