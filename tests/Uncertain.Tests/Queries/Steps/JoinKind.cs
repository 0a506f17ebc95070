namespace Uncertain.Tests.Queries.Steps;

public enum JoinKind
{
    Join,
    LeftJoin,
    SemiJoin,
    AntiJoin,
}
