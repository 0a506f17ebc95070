using System.Reflection;
using System.Runtime.Loader;
using Microsoft.CodeAnalysis;
using Microsoft.CodeAnalysis.CSharp;

namespace Uncertain.Tests.Conventions;

/// <summary>The README's first program compiles as it stands and prints what the README says.</summary>
public sealed class ReadmeTests
{
    private const string Data = """
        using System;
        using System.Collections.Generic;

        NoteReading[] noteReadings =
        [
            new("NA00001", "ZH-Z7804", 0.9), new("NA00001", "ZH-27804", 0.05), new("NA00002", "ZH-Z7804", 0.6), new("NA00002", "ZH-Z7884", 0.3),
        ];
        CardReading[] cardReadings =
        [
            new("Jorugard", "ZH-Z7804", 0.8), new("Jorugard", "ZH-Z7884", 0.5), new("Ormagard", "ZH-Z7884", 0.7),
        ];
        HashSet<string> bulletin = ["ZH-Z7804", "ZH-Z7884"];

        """;

    private const string Types = """

        public record NoteReading(string NoteId, string Lot, double Chance);
        public record CardReading(string Vessel, string Lot, double Chance);
        """;

    [Fact]
    public void FirstProgram_AsPrinted_PrintsWhatTheReadmeSays()
    {
        string readme = File.ReadAllText(Path.Combine(Repository.Root, "README.md")).ReplaceLineEndings("\n");
        string program = Block(readme, "```csharp\n");
        string output = Block(readme[(readme.IndexOf(program, StringComparison.Ordinal) + program.Length + 4)..], "```\n");

        Assert.Equal(output, Run(program));
    }

    private static string Block(string text, string fence)
    {
        int start = text.IndexOf(fence, StringComparison.Ordinal) + fence.Length;
        return text[start..text.IndexOf("```", start, StringComparison.Ordinal)];
    }

    private static string Run(string program)
    {
        string usings = program[..program.IndexOf("var ", StringComparison.Ordinal)];
        string body = program[usings.Length..];
        SyntaxTree tree = CSharpSyntaxTree.ParseText(usings + Data + body + Types);
        string[] assemblies = ((string)AppContext.GetData("TRUSTED_PLATFORM_ASSEMBLIES")!).Split(Path.PathSeparator);
        var compilation = CSharpCompilation.Create(
            "Readme",
            [tree],
            assemblies.Append(typeof(WorldSpace).Assembly.Location).Distinct().Select(path => MetadataReference.CreateFromFile(path)));
        using var stream = new MemoryStream();
        Assert.Empty(compilation.Emit(stream).Diagnostics.Where(diagnostic => diagnostic.Severity == DiagnosticSeverity.Error));

        stream.Position = 0;
        Assembly assembly = AssemblyLoadContext.Default.LoadFromStream(stream);
        TextWriter console = Console.Out;
        using var written = new StringWriter { NewLine = "\n" };
        Console.SetOut(written);
        try
        {
            assembly.EntryPoint!.Invoke(null, [Array.Empty<string>()]);
        }
        finally
        {
            Console.SetOut(console);
        }

        return written.ToString();
    }
}
