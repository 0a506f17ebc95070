using System.IO.Compression;
using System.Reflection;
using Uncertain.Tests.Conventions;

namespace Uncertain.Tests.Packaging;

/// <summary>Packs the library, restores it from a local folder into an app of its own and runs that.</summary>
public sealed class PackageTests : IDisposable
{
    private const string Version = "0.1.0-packed";

    private readonly string _folder = Directory.CreateTempSubdirectory("uncertain-package-").FullName;

    public void Dispose() => Directory.Delete(_folder, recursive: true);

    [Fact]
    public void Pack_ThenUseInAnApp_Works()
    {
        string packages = Path.Combine(_folder, "packed");
        string app = Path.Combine(_folder, "app");
        Pack(packages);
        WriteApp(app);

        // A cache of its own, so that the package comes from the folder and not from an earlier run.
        string output = Shell.Dotnet(app, Path.Combine(_folder, "cache"), "run", "-c", "Release");

        Assert.Equal(
            """
            Havrnes  0.75 (exact)  notes[0] ∨ notes[1]
            Torlind  0.25 (exact)  notes[2]
            Any at all: 0.8125 (exact)
            """.ReplaceLineEndings("\n"),
            output.ReplaceLineEndings("\n").TrimEnd());
    }

    [Fact]
    public void Pack_Always_HasWhatAPackageNeeds()
    {
        string packages = Path.Combine(_folder, "packed");
        Pack(packages);

        using ZipArchive package = ZipFile.OpenRead(Path.Combine(packages, $"Uncertain.{Version}.nupkg"));
        string[] files = [.. package.Entries.Select(entry => entry.FullName)];
        Assert.Contains("lib/net10.0/Uncertain.dll", files);
        Assert.Contains("lib/net10.0/Uncertain.xml", files);
        Assert.Contains("README.md", files);
        using var reader = new StreamReader(package.GetEntry("Uncertain.nuspec")!.Open());
        string specification = reader.ReadToEnd();
        Assert.Contains("<license type=\"expression\">MIT</license>", specification, StringComparison.Ordinal);
        Assert.Contains("<readme>README.md</readme>", specification, StringComparison.Ordinal);
        Assert.DoesNotContain("<dependency ", specification, StringComparison.Ordinal);
        Assert.True(File.Exists(Path.Combine(packages, $"Uncertain.{Version}.snupkg")));
    }

    private static void Pack(string target)
    {
        // In the configuration that the tests were built in, so that nothing is compiled again.
        string configuration = typeof(PackageTests).Assembly.GetCustomAttribute<AssemblyConfigurationAttribute>()!.Configuration;
        Shell.Dotnet(
            Repository.Root, packageCache: "", "pack", "src/Uncertain", "-c", configuration,
            "--no-build", "-o", target, $"-p:PackageVersion={Version}");
    }

    private static void WriteApp(string app)
    {
        Directory.CreateDirectory(app);
        File.WriteAllText(
            Path.Combine(app, "nuget.config"),
            """
            <configuration>
              <packageSources>
                <add key="packed" value="../packed" />
              </packageSources>
            </configuration>
            """);
        File.WriteAllText(
            Path.Combine(app, "App.csproj"),
            $"""
            <Project Sdk="Microsoft.NET.Sdk">
              <PropertyGroup>
                <OutputType>Exe</OutputType>
                <TargetFramework>net10.0</TargetFramework>
                <Nullable>enable</Nullable>
                <ImplicitUsings>enable</ImplicitUsings>
                <TreatWarningsAsErrors>true</TreatWarningsAsErrors>
                <UseAppHost>false</UseAppHost>
              </PropertyGroup>
              <ItemGroup>
                <PackageReference Include="Uncertain" Version="[{Version}]" />
              </ItemGroup>
            </Project>
            """);
        File.WriteAllText(
            Path.Combine(app, "Program.cs"),
            """
            using Uncertain;

            Console.OutputEncoding = System.Text.Encoding.UTF8;
            var worlds = new WorldSpace();
            (string Vessel, double Chance)[] notes = [("Havrnes", 0.5), ("Havrnes", 0.5), ("Torlind", 0.25)];
            UncertainSet<string> vessels = from note in worlds.Independent(notes, n => n.Chance) select note.Vessel;
            foreach (Answer<string> answer in vessels.Evaluate())
            {
                Console.WriteLine($"{answer.Value}  {answer.Probability}  {answer.Lineage}");
            }

            Console.WriteLine($"Any at all: {vessels.Any().Evaluate().Probability}");
            """);
    }
}
