namespace Uncertain.Tests.Examples;

/// <summary>A copy of the example's data without truth/, to be changed at will.</summary>
internal sealed class CopiedData : IDisposable
{
    private readonly DirectoryInfo _folder = Directory.CreateTempSubdirectory("part-tracing-data-");

    public CopiedData()
    {
        foreach (string file in Directory.GetFiles(ExampleRun.DataFolder))
        {
            File.Copy(file, PathOf(Path.GetFileName(file)));
        }
    }

    public string Folder => _folder.FullName;

    public string PathOf(string file) => Path.Combine(Folder, file);

    public void Dispose() => _folder.Delete(recursive: true);
}
