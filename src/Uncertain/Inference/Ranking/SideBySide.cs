using System.Runtime.ExceptionServices;

namespace Uncertain.Inference.Ranking;

/// <summary>Runs steps on several threads; the failure of the first step that failed comes out as it was.</summary>
internal static class SideBySide
{
    public static void Run(int count, int threads, Action<int> step)
    {
        if (threads == 1 || count <= 1)
        {
            for (int i = 0; i < count; i++)
            {
                step(i);
            }

            return;
        }

        try
        {
            Parallel.For(0, count, new ParallelOptions { MaxDegreeOfParallelism = threads }, step);
        }
        catch (AggregateException failures)
        {
            ExceptionDispatchInfo.Throw(failures.InnerExceptions[0]);
        }
    }
}
