using System.Text.Json;

namespace Uncertain.ReferenceCheck.Cases;

/// <summary>The named graphs that lie beside a file of cases; read when the first case asks for one.</summary>
internal sealed class Topologies(string path)
{
    private readonly Lazy<Field> _graphs = new(() => new Field(JsonDocument.Parse(File.ReadAllText(path)).RootElement, "topologies")["graphs"]);

    public Graph Find(Field name)
    {
        try
        {
            return GraphReader.ReadExplicit(_graphs.Value[name.Text]);
        }
        catch (Exception e) when (e is IOException or UnauthorizedAccessException or JsonException)
        {
            throw new MalformedCaseException($"{name.Path} asks for the topology '{name.Text}', but topologies.json beside the file cannot be read");
        }
    }
}
