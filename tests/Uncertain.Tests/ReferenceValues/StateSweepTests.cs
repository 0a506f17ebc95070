using Uncertain.ReferenceCheck.Cases;
using Uncertain.ReferenceCheck.Lineages;
using Uncertain.ReferenceCheck.Solving;

namespace Uncertain.Tests.ReferenceValues;

/// <summary>The lineages of sweeps against direct formulas of the same events: in every world both hold or neither does.</summary>
public sealed class StateSweepTests
{
    private static readonly Graph s_graph = new(5, [(0, 1), (0, 2), (1, 2), (1, 3), (2, 4), (3, 4), (1, 2)]);

    [Fact]
    public void ComponentSweep_OfAllVertices_EqualsEveryCut() => AssertEquivalent(
        (worlds, edges, solver) => new ComponentSweep(s_graph, edges, null, [0, 1, 2, 3, 4]).Build(worlds, solver),
        (worlds, edges) => NetworkLineage.EveryCut(worlds, s_graph, edges, directed: false));

    [Fact]
    public void ComponentSweep_OfTwoVertices_EqualsAnyPath() => AssertEquivalent(
        (worlds, edges, solver) => new ComponentSweep(s_graph, edges, null, [0, 4]).Build(worlds, solver),
        (worlds, edges) => Any(worlds, Paths(0, 4).Select(path => Lineage.All([.. path.Select(e => edges[e])]))));

    [Fact]
    public void PathSweep_BetweenTwoVertices_EqualsExactlyOnePath() => AssertEquivalent(
        (worlds, edges, solver) => new PathSweep(s_graph, edges, (0, 3)).Build(worlds, solver),
        (worlds, edges) => Any(worlds, Paths(0, 3).Select(path => Exactly(edges, path))));

    [Fact]
    public void PathSweep_ThroughAllVertices_EqualsExactlyOneLongPath() => AssertEquivalent(
        (worlds, edges, solver) => new PathSweep(s_graph, edges, null).Build(worlds, solver),
        (worlds, edges) => Any(worlds,
            from s in Enumerable.Range(0, 5)
            from t in Enumerable.Range(s + 1, 4 - s)
            from path in Paths(s, t)
            where path.Length == 4
            select Exactly(edges, path)));

    [Fact]
    public void ComponentSweep_WithoutCycles_IsConnectedWithFourEdgesForTrees() => AssertEquivalent(
        (worlds, edges, solver) => new ComponentSweep(s_graph, edges, null, [0, 1, 2, 3, 4], forbidsCycles: true).Build(worlds, solver),
        (worlds, edges) => NetworkLineage.EveryCut(worlds, s_graph, edges, directed: false) & Lineage.Exactly(4, edges));

    private static IEnumerable<int[]> Paths(int source, int target) =>
        SimplePaths.TryList(s_graph, source, target, directed: false, 1000, NewSolver())!.Select(path => path.Edges);

    private static Lineage Any(WorldSpace worlds, IEnumerable<Lineage> operands) => Lineage.Any([worlds.Never, .. operands]);

    private static Lineage Exactly(Lineage[] edges, int[] path) =>
        Lineage.All([.. edges.Select((edge, e) => path.Contains(e) ? edge : !edge)]);

    private static Solver NewSolver() => new(Evaluators.Compilation, TimeSpan.FromMinutes(1), CancellationToken.None);

    private static void AssertEquivalent(
        Func<WorldSpace, Lineage[], Solver, Lineage> sweep, Func<WorldSpace, Lineage[], Lineage> direct)
    {
        Solver solver = NewSolver();
        for (int world = 0; world < 1 << s_graph.Edges.Count; world++)
        {
            // Certain edges simplify a formula to its truth in this world.
            var worlds = new WorldSpace();
            Lineage[] edges = [.. s_graph.Edges.Select((_, e) => ((world >> e) & 1) == 1 ? worlds.Always : worlds.Never)];
            Assert.Equal(direct(worlds, edges), sweep(worlds, edges, solver));
        }
    }
}
