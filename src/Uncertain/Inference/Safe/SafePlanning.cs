using Uncertain.Planning;

namespace Uncertain.Inference.Safe;

/// <summary>What the planner of safe plans found: a plan, or the reason why there is none. Immutable.</summary>
internal sealed class SafePlanning
{
    private SafePlanning(SafePlan? plan, NoSafePlanException? refusal)
    {
        Plan = plan;
        Refusal = refusal;
    }

    public SafePlan? Plan { get; }

    /// <summary>Not null where there is no plan.</summary>
    public NoSafePlanException? Refusal { get; }

    public static SafePlanning Of(PlanNode query)
    {
        try
        {
            return new SafePlanning(SafePlan.For(query), null);
        }
        catch (NoSafePlanException exception)
        {
            return new SafePlanning(null, exception);
        }
    }
}
