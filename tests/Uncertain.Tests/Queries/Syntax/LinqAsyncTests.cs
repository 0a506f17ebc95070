namespace Uncertain.Tests.Queries.Syntax;

/// <summary>
/// An app that imports System.Linq, where .NET 10 has its operators for IAsyncEnumerable, and still references the package
/// System.Linq.Async sees no ambiguity: the set's own members win, and its streams work with both.
/// </summary>
public sealed class LinqAsyncTests
{
    [Theory]
    [InlineData(true)]
    [InlineData(false)]
    public void Compile_AllOperators_AreNotAmbiguous(bool withLinqAsync) => Assert.Empty(SnippetCompiler.Diagnostics(
        """
        var q1 = from n in notes join c in cards on n.Lot equals c.Lot where n.Id > 1 let x = c.Vessel select x;
        var q2 = notes.Where(n => n.Id > 1).Select(n => n.Lot).Distinct().Union(cards.Select(c => c.Lot))
            .Intersect(cards.Select(c => c.Lot)).Except(cards.Select(c => c.Lot));
        var q3 = notes.SelectMany(n => cards).SelectMany(c => c.Vessel.ToList());
        var q4 = notes.LeftJoin(cards, n => n.Lot, c => c.Lot, (n, c) => n).SemiJoin(cards, n => n.Lot, c => c.Lot)
            .AntiJoin(cards, n => n.Lot, c => c.Lot);
        var q5 = notes.Join(cards, n => n.Lot, c => c.Lot, (n, c) => c.Vessel, StringComparer.Ordinal).Any();
        var q6 = notes.All(n => n.Id > 1).Evaluate();
        var q7 = notes.Contains(new Note(1, "", 0)).Evaluate();
        """,
        withLinqAsync));

    [Theory]
    [InlineData(true)]
    [InlineData(false)]
    public void Compile_Streams_WorkWithAsyncOperators(bool withLinqAsync) => Assert.Empty(SnippetCompiler.Diagnostics(
        """
        await foreach (var answer in notes.EvaluateAsync()) { Console.WriteLine(answer.Probability); }
        List<string> lots = await notes.EvaluateAsync().Where(a => a.Probability.Value > 0.5).Select(a => a.Value.Lot).ToListAsync();
        var again = await worlds.IndependentAsync(AsyncEnumerable.Range(0, 3), i => 0.5);
        var first = await notes.EvaluateAsync().FirstOrDefaultAsync();
        """,
        withLinqAsync));

    /// <summary>The test project itself references System.Linq.Async and imports System.Linq; this compiles and runs.</summary>
    [Fact]
    public async Task EvaluateAsync_WithAsyncOperators_Runs()
    {
        var worlds = new WorldSpace();
        UncertainSet<int> set = worlds.Independent(Enumerable.Range(0, 10), i => i / 10.0);

        List<int> likely = await set.EvaluateAsync().Where(a => a.Probability.Value > 0.75).Select(a => a.Value).ToListAsync();

        Assert.Equal([8, 9], likely);
    }
}
