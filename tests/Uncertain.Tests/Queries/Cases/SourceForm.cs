namespace Uncertain.Tests.Queries.Cases;

public enum SourceForm
{
    Certain,
    Independent,
    Alternatives,
    WithLineage,
}
