using System.Globalization;
using Microsoft.CodeAnalysis;

namespace Uncertain.Tests.Queries.Syntax;

/// <summary>
/// The clauses that have no meaning on an uncertain set do not compile: a set has no order, and equal fields of
/// different members of a group would be one element. The control beside them shows that the snippets are right but for the clause.
/// </summary>
public sealed class MeaninglessClauseTests
{
    [Theory]
    [InlineData("var q = from n in notes where n.Id > 1 select n.Lot;")]
    [InlineData("var q = from n in notes join c in cards on n.Lot equals c.Lot select c.Vessel;")]
    [InlineData("var q = from n in notes from c in cards let x = n.Id where x > 1 select c.Vessel into v select v;")]
    [InlineData("var q = from n in notes group n by n.Lot;")]
    [InlineData("var q = from n in notes group n by n.Lot into g where g.Count() >= 3 select new { g.Key, Sum = g.Sum(n => n.Id) };")]
    public void Compile_ClauseWithAMeaning_HasNoErrors(string statement) => Assert.Empty(SnippetCompiler.Errors(statement));

    // CS1936: no implementation of the query pattern, and which method is missing; CS1929, CS1941, CS1943: a source of another type.
    [Theory]
    [InlineData("CS1936 OrderBy", "var q = from n in notes orderby n.Id select n;")]
    [InlineData("CS1936 OrderByDescending", "var q = from n in notes orderby n.Id descending select n;")]
    [InlineData("CS1936 OrderBy", "var q = from n in notes orderby n.Lot, n.Id select n;")]
    [InlineData("CS1936 GroupJoin", "var q = from n in notes join c in cards on n.Lot equals c.Lot into g select n;")]
    [InlineData("CS1929 Cast", "var q = from object n in notes select n;")]
    [InlineData("CS1943 SelectMany", "var q = from i in new[] { 1, 2 } from n in notes select n;")]
    [InlineData("CS1941 Join", "var q = from n in notes join i in new[] { 1, 2 } on n.Id equals i select n;")]
    public void Compile_ClauseWithoutAMeaning_IsAnError(string error, string statement)
    {
        Diagnostic diagnostic = Assert.Single(SnippetCompiler.Diagnostics(statement, withLinqAsync: false));

        Assert.Equal(error[..6], diagnostic.Id);
        Assert.Contains($"'{error[7..]}'", diagnostic.GetMessage(CultureInfo.InvariantCulture), StringComparison.Ordinal);
    }

    [Theory]
    [InlineData("foreach (var n in notes) { }")]
    [InlineData("await foreach (var n in notes) { }")]
    [InlineData("var q = notes.OrderBy(n => n.Id);")]
    [InlineData("var q = from n in notes group n.Id by n.Lot into g select g.Key;")]
    [InlineData("if (notes.Count() == 3) { }")]
    [InlineData("var q = notes.First();")]
    [InlineData("var q = notes.Take(1);")]
    [InlineData("IEnumerable<Note> q = notes;")]
    [InlineData("IQueryable<Note> q = notes;")]
    [InlineData("if (notes.Any()) { }")]
    public void Compile_UseAsAnOrdinaryCollection_IsAnError(string statement) => Assert.NotEmpty(SnippetCompiler.Errors(statement));
}
