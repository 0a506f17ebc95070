namespace Uncertain.Tests.Queries.Steps;

public enum SetOperation
{
    Union,
    Intersect,
    Except,
}
