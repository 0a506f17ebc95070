namespace Uncertain.Tests.ReferenceValues;

/// <summary>A file with a given content that is gone after the test.</summary>
internal sealed class TemporaryFile : IDisposable
{
    public TemporaryFile(string content)
    {
        Path = System.IO.Path.GetTempFileName();
        File.WriteAllText(Path, content);
    }

    public string Path { get; }

    public void Dispose() => File.Delete(Path);
}
