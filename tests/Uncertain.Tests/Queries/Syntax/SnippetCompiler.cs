using Microsoft.CodeAnalysis;
using Microsoft.CodeAnalysis.CSharp;

namespace Uncertain.Tests.Queries.Syntax;

/// <summary>Compiles a snippet that uses the library as an app would, and gives the compiler's errors.</summary>
internal static class SnippetCompiler
{
    private static readonly MetadataReference[] s_references =
    [
        .. ((string)AppContext.GetData("TRUSTED_PLATFORM_ASSEMBLIES")!).Split(Path.PathSeparator)
            .Where(path => Path.GetFileName(path) is var file && file != "System.Linq.Async.dll"
                && (file.StartsWith("System.", StringComparison.Ordinal) || file is "netstandard.dll" or "mscorlib.dll"))
            .Select(path => MetadataReference.CreateFromFile(path)),
        MetadataReference.CreateFromFile(typeof(WorldSpace).Assembly.Location),
    ];

    /// <summary>The reference assembly of System.Linq.Async, which an app may still reference.</summary>
    private static string LinqAsync => Path.Combine(AppContext.BaseDirectory, "refs", "System.Linq.Async.dll");

    /// <summary>Identifiers of the errors, each once, in order; empty if the snippet compiles.</summary>
    /// <param name="statements">Statements in a method, with <c>worlds</c>, <c>notes</c> and <c>cards</c> at hand.</param>
    /// <param name="withLinqAsync">Whether System.Linq.Async is referenced.</param>
    public static IReadOnlyList<string> Errors(string statements, bool withLinqAsync = false) =>
        [.. Diagnostics(statements, withLinqAsync).Select(diagnostic => diagnostic.Id).Distinct()];

    /// <summary>The errors in full.</summary>
    public static IReadOnlyList<Diagnostic> Diagnostics(string statements, bool withLinqAsync)
    {
        string source = $$"""
            using System;
            using System.Collections.Generic;
            using System.Linq;
            using System.Threading.Tasks;
            using Uncertain;

            public sealed record Note(int Id, string Lot, double Chance);
            public sealed record Card(string Lot, string Vessel);

            public static class App
            {
                public static async Task Run(WorldSpace worlds, UncertainSet<Note> notes, UncertainSet<Card> cards)
                {
                    {{statements}}
                    await Task.CompletedTask;
                }
            }
            """;
        IEnumerable<MetadataReference> references = withLinqAsync
            ? s_references.Append(MetadataReference.CreateFromFile(LinqAsync))
            : s_references;
        var compilation = CSharpCompilation.Create(
            "Snippet",
            [CSharpSyntaxTree.ParseText(source, new CSharpParseOptions(LanguageVersion.Latest))],
            references,
            new CSharpCompilationOptions(OutputKind.DynamicallyLinkedLibrary, nullableContextOptions: NullableContextOptions.Disable));
        return [.. compilation.GetDiagnostics().Where(diagnostic => diagnostic.Severity == DiagnosticSeverity.Error)];
    }
}
