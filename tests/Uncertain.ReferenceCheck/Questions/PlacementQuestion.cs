using System.Collections.Immutable;
using Uncertain.ReferenceCheck.Cases;
using Uncertain.ReferenceCheck.Solving;

namespace Uncertain.ReferenceCheck.Questions;

/// <summary>Colourings, Latin squares and queens: constraints between the cells of a board or the vertices of a graph.</summary>
internal static class PlacementQuestion
{
    public static Figure AskColoring(Field input, Topologies topologies, Solver solver)
    {
        Graph graph = GraphReader.Read(input["graph"], topologies);
        int colors = input["colors"].Integer(1, 1000);
        var worlds = new WorldSpace();
        ImmutableArray<Lineage>[] vertices = UniformChoices(worlds, "vertex", graph.VertexCount, colors);
        return solver.Chance(!Lineage.Any([worlds.Never, .. graph.Edges.SelectMany(
            edge => vertices[edge.From].Zip(vertices[edge.To], (from, to) => from & to))]));
    }

    public static Figure AskLatin(Field input, Solver solver)
    {
        int n = input["n"].Integer(1, 30);
        var worlds = new WorldSpace();
        ImmutableArray<Lineage>[] cells = UniformChoices(worlds, "cell", n * n, n);
        int[] places = [.. Enumerable.Range(0, n)];
        return solver.Chance(Lineage.All([.. places.SelectMany(line => places.SelectMany(symbol => (Lineage[])[
            Lineage.Any([.. places.Select(i => cells[(line * n) + i][symbol])]),
            Lineage.Any([.. places.Select(i => cells[(i * n) + line][symbol])])]))]));
    }

    public static Figure AskQueens(Field input, Solver solver)
    {
        int n = input["n"].Integer(1, 100);
        var worlds = new WorldSpace();
        Lineage[] cells = Elements.Events(worlds, "cell", n * n, input, "p", null);
        IEnumerable<Lineage[]> Lines(Func<int, int, int> line) =>
            Enumerable.Range(0, n * n).GroupBy(cell => line(cell / n, cell % n), cell => cells[cell]).Select(group => group.ToArray());
        return solver.Chance(Lineage.All([
            .. Lines((row, column) => row).Select(line => Lineage.Exactly(1, line)),
            .. Lines((row, column) => column).Select(line => Lineage.Exactly(1, line)),
            .. Lines((row, column) => row + column).Select(line => !Lineage.AtLeast(2, line)),
            .. Lines((row, column) => row - column).Select(line => !Lineage.AtLeast(2, line))]));
    }

    private static ImmutableArray<Lineage>[] UniformChoices(WorldSpace worlds, string name, int count, int outcomes)
    {
        double[] chances = [.. Enumerable.Repeat(1.0 / outcomes, outcomes)];
        return [.. Enumerable.Range(0, count).Select(i => worlds.Choice($"{name} {i}", chances))];
    }
}
