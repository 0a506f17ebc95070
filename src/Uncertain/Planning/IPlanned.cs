namespace Uncertain.Planning;

/// <summary>A set of any type, seen by planning.</summary>
internal interface IPlanned
{
    PlanNode Node { get; }
}
