using Uncertain.Execution;

namespace Uncertain.Inference.Posteriors;

/// <summary>Turns 'no two elements with the same key' into lineages: for each key, not two of its elements.</summary>
internal static class KeyConstraint
{
    public static IEnumerable<Lineage> Pieces<T, TKey>(
        UncertainSet<T> set, Func<T, TKey> key, EvaluationOptions? options, CancellationToken cancellationToken)
    {
        var numberOf = new Dictionary<ValueTuple<TKey>, int>();
        var groups = new List<List<Lineage>>();
        foreach (Record<T> record in set.Derive((options ?? EvaluationOptions.Default) with { Given = null }, cancellationToken))
        {
            cancellationToken.ThrowIfCancellationRequested();
            if (KeyOf(record.Value, key) is not { } value)
            {
                continue;
            }

            if (!numberOf.TryGetValue(new(value), out int number))
            {
                numberOf.Add(new(value), number = groups.Count);
                groups.Add([]);
            }

            groups[number].Add(record.Lineage);
        }

        return groups.Where(group => group.Count > 1).Select(group => !Lineage.AtLeast(2, [.. group]));
    }

    private static TKey KeyOf<T, TKey>(T value, Func<T, TKey> key)
    {
        try
        {
            return key(value);
        }
        catch (Exception exception) when (exception is not UncertainException)
        {
            throw new InvalidInputException(
                $"The key lambda of a key constraint threw {exception.GetType().Name} on '{value}': {exception.Message}", exception);
        }
    }
}
