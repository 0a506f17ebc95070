using System.Text.RegularExpressions;

namespace Uncertain.Tests.Conventions;

public sealed partial class SourceFilesTests
{
    private static IEnumerable<string> Files { get; } =
        [.. new[] { "src", "tests", "examples", "benchmarks" }
            .Select(folder => Path.Combine(Repository.Root, folder))
            .Where(Directory.Exists)
            .SelectMany(folder => Directory.EnumerateFiles(folder, "*.cs", SearchOption.AllDirectories))
            .Where(file => !BuildOutput().IsMatch(file))];

    [Fact]
    public void SourceFile_Always_HasAtMostFourHundredLines()
    {
        Assert.NotEmpty(Files);
        Assert.All(Files, file => Assert.True(File.ReadLines(file).Count() <= 400, $"{Name(file)} is too long."));
    }

    [Fact]
    public void SourceFile_Always_HasOneTopLevelType() => Assert.All(Files, file =>
    {
        int types = File.ReadLines(file).Count(line => TopLevelType().IsMatch(line));
        Assert.True(types <= 1, $"{Name(file)} has {types} top-level types.");
    });

    [Fact]
    public void SourceFile_Always_HasAFileScopedNamespace() => Assert.All(
        Files, file => Assert.DoesNotMatch(BlockNamespace(), File.ReadAllText(file)));

    private static string Name(string file) => Path.GetRelativePath(Repository.Root, file);

    [GeneratedRegex(@"[\\/](bin|obj|__snapshots__)[\\/]")]
    private static partial Regex BuildOutput();

    [GeneratedRegex(@"^(public |internal |file )?(static |sealed |abstract |readonly |partial |ref )*(class|struct|interface|enum|record|delegate) ")]
    private static partial Regex TopLevelType();

    [GeneratedRegex(@"^namespace [\w.]+\s*\{", RegexOptions.Multiline)]
    private static partial Regex BlockNamespace();
}
