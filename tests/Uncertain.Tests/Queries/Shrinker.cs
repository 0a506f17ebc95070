namespace Uncertain.Tests.Queries;

/// <summary>Makes a failing case as small as it stays failing.</summary>
internal static class Shrinker
{
    private const int MaxAttempts = 3000;

    public static (TestCase Smallest, string Failure) Shrink(TestCase test, string failure, Func<TestCase, string?> check)
    {
        int attempts = 0;
        bool smaller = true;
        while (smaller)
        {
            smaller = false;
            foreach (TestCase candidate in test.Shrink())
            {
                if (++attempts > MaxAttempts)
                {
                    return (test, failure);
                }

                // A smaller case must fail for a reason of its own, not because it is no valid case.
                if (check(candidate) is { } stillFails && !stillFails.Contains(nameof(InvalidInputException), StringComparison.Ordinal))
                {
                    (test, failure, smaller) = (candidate, stillFails, true);
                    break;
                }
            }
        }

        return (test, failure);
    }
}
