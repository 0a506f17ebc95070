namespace Uncertain.Inference.Aggregates;

/// <summary>Independent pieces of work on the threads of an evaluation; the token and the clock are looked at before each piece.</summary>
internal static class ParallelWork
{
    public static void For(int count, AggregateBudget budget, Action<int> work)
    {
        if (budget.Threads == 1 || count == 1)
        {
            for (int i = 0; i < count; i++)
            {
                budget.Look();
                work(i);
            }

            return;
        }

        try
        {
            Parallel.For(0, count, new ParallelOptions { MaxDegreeOfParallelism = budget.Threads }, i =>
            {
                budget.Look();
                work(i);
            });
        }
        catch (AggregateException exception)
        {
            // All pieces end for the same reason, a budget or the token.
            System.Runtime.ExceptionServices.ExceptionDispatchInfo.Throw(exception.InnerExceptions[0]);
        }
    }
}
