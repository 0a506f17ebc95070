namespace Uncertain.Tests.Queries.Cases;

public enum QuestionForm
{
    /// <summary>No question: the answers of the set itself.</summary>
    None,
    Any,
    AnyWhere,
    All,
    Contains,
}
