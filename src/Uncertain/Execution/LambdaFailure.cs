using System.Linq.Expressions;
using Uncertain.Planning;

namespace Uncertain.Execution;

/// <summary>What is thrown when a caller's lambda throws: which lambda of which operator, on which record, and why.</summary>
internal static class LambdaFailure
{
    public static bool IsCallers(Exception exception) => exception is not (UncertainException or OperationCanceledException);

    public static InvalidInputException Of(LambdaExpression lambda, string operatorName, object? argument, Exception exception) => new(
        $"The lambda '{PlanText.Lambda(lambda)}' of {operatorName} threw {exception.GetType().Name} on '{argument}': {exception.Message} "
        + "Guard the lambda against such records, or filter them out before.",
        exception);
}
