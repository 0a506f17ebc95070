namespace Uncertain.Tests.Queries.Syntax;

/// <summary>
/// The clauses that have no meaning on an uncertain set do not compile: a set has no order, and what a group holds differs from world
/// to world. The control beside them shows that the snippets are right but for the clause.
/// </summary>
public sealed class MeaninglessClauseTests
{
    [Theory]
    [InlineData("var q = from n in notes where n.Id > 1 select n.Lot;")]
    [InlineData("var q = from n in notes join c in cards on n.Lot equals c.Lot select c.Vessel;")]
    [InlineData("var q = from n in notes from c in cards let x = n.Id where x > 1 select c.Vessel into v select v;")]
    public void Compile_ClauseWithAMeaning_HasNoErrors(string statement) => Assert.Empty(SnippetCompiler.Errors(statement));

    // CS1061: no such member; CS1935: no implementation of the query pattern; CS1936, CS1940: the same for a source type.
    [Theory]
    [InlineData("orderby", "var q = from n in notes orderby n.Id select n;")]
    [InlineData("orderby descending", "var q = from n in notes orderby n.Id descending select n;")]
    [InlineData("orderby two keys", "var q = from n in notes orderby n.Lot, n.Id select n;")]
    [InlineData("group by", "var q = from n in notes group n by n.Lot;")]
    [InlineData("group by into", "var q = from n in notes group n.Id by n.Lot into g select g.Key;")]
    [InlineData("join into", "var q = from n in notes join c in cards on n.Lot equals c.Lot into g select n;")]
    [InlineData("cast of the range variable", "var q = from object n in notes select n;")]
    [InlineData("from over an ordinary list first", "var q = from i in new[] { 1, 2 } from n in notes select n;")]
    [InlineData("join with an ordinary list", "var q = from n in notes join i in new[] { 1, 2 } on n.Id equals i select n;")]
    public void Compile_ClauseWithoutAMeaning_IsAnError(string clause, string statement)
    {
        IReadOnlyList<string> errors = SnippetCompiler.Errors(statement);

        Assert.Equal((clause, Expected[clause]), (clause, string.Join(", ", errors)));
    }

    [Theory]
    [InlineData("foreach (var n in notes) { }")]
    [InlineData("await foreach (var n in notes) { }")]
    [InlineData("var q = notes.OrderBy(n => n.Id);")]
    [InlineData("var q = notes.GroupBy(n => n.Id);")]
    [InlineData("var q = notes.First();")]
    [InlineData("var q = notes.Count();")]
    [InlineData("var q = notes.Take(1);")]
    [InlineData("IEnumerable<Note> q = notes;")]
    [InlineData("IQueryable<Note> q = notes;")]
    [InlineData("if (notes.Any()) { }")]
    public void Compile_UseAsAnOrdinaryCollection_IsAnError(string statement) => Assert.NotEmpty(SnippetCompiler.Errors(statement));

    private static Dictionary<string, string> Expected { get; } = new()
    {
        ["orderby"] = "CS1935",
        ["orderby descending"] = "CS1935",
        ["orderby two keys"] = "CS1935",
        ["group by"] = "CS1935",
        ["group by into"] = "CS1935",
        ["join into"] = "CS1935",
        ["cast of the range variable"] = "CS1935",
        ["from over an ordinary list first"] = "CS1936",
        ["join with an ordinary list"] = "CS1936",
    };
}
