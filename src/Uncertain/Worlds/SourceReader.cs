using System.Linq.Expressions;
using Uncertain.Execution;
using Uncertain.Planning;

namespace Uncertain.Worlds;

/// <summary>Reads records and what the caller's lambdas say of them, and refuses at the door what is wrong.</summary>
internal static class SourceReader
{
    public static async Task<T[]> ReadAsync<T>(IAsyncEnumerable<T> records, CancellationToken cancellationToken)
    {
        ArgumentNullException.ThrowIfNull(records);
        var list = new List<T>();
        await foreach (T record in records.WithCancellation(cancellationToken).ConfigureAwait(false))
        {
            cancellationToken.ThrowIfCancellationRequested();
            list.Add(record);
        }

        return [.. list];
    }

    /// <summary>The source's name: the argument's text where that is a plain name, else the record type's.</summary>
    public static string NameOf(string? text, Type recordType) =>
        text is not null && text.Length is > 0 and <= 60 && text.All(c => char.IsLetterOrDigit(c) || c is '_' or '.' or ' ' or '-')
            ? text
            : PlanText.TypeName(recordType);

    public static AlternativeGroups Groups<T, TGroup>(
        T[] records, Expression<Func<T, TGroup>> group, double[] chances, string name)
    {
        Func<T, TGroup> groupOf = group.Compile();
        var groupNumber = new int[records.Length];
        var numbers = new Dictionary<ValueTuple<TGroup>, int>();
        var sums = new List<double>();
        for (int i = 0; i < records.Length; i++)
        {
            TGroup key = Apply(groupOf, records, i, name, "group");
            if (key is null)
            {
                throw new InvalidInputException(
                    $"The group of record {i} of {name} ('{records[i]}') is null; a null cannot say which records exclude each other. "
                    + "Give each such record a group of its own, or leave it out.");
            }

            if (!numbers.TryGetValue(new(key), out groupNumber[i]))
            {
                groupNumber[i] = sums.Count;
                numbers.Add(new(key), sums.Count);
                sums.Add(0);
            }

            sums[groupNumber[i]] += chances[i];
        }

        foreach ((ValueTuple<TGroup> key, int number) in numbers)
        {
            Worlds.Chances.CheckSum(sums[number], $"the alternatives of group '{key.Item1}' of {name}");
        }

        return new AlternativeGroups(groupNumber, sums.Count, chances);
    }

    public static Lineage[] Lineages<T>(T[] records, Func<T, Lineage> lineage, WorldSpace worlds, string name)
    {
        var lineages = new Lineage[records.Length];
        for (int i = 0; i < records.Length; i++)
        {
            lineages[i] = Apply(lineage, records, i, name, "lineage");
            if (!ReferenceEquals(lineages[i].Worlds, worlds))
            {
                throw new WorldSpaceMismatchException($"The lineage of record {i} of {name}");
            }
        }

        return lineages;
    }

    public static void CheckKey<T>(T[] records, Expression<Func<T, object?>>? key, string name)
    {
        if (key is null)
        {
            return;
        }

        Func<T, object?> keyOf = key.Compile();
        var seen = new Dictionary<object, int>(records.Length);
        for (int i = 0; i < records.Length; i++)
        {
            object value = Apply(keyOf, records, i, name, "key")
                ?? throw new InvalidInputException(
                    $"The key of record {i} of {name} ('{records[i]}') is null; a declared key identifies every record. "
                    + "Leave such records out, or declare no key.");
            if (!seen.TryAdd(value, i))
            {
                throw new InvalidInputException(
                    $"Records {seen[value]} and {i} of {name} have the same key '{value}'; a declared key is unique among all records "
                    + "that may be there. Merge them, or declare no key.");
            }
        }
    }

    private static TResult Apply<T, TResult>(Func<T, TResult> lambda, T[] records, int i, string name, string what)
    {
        try
        {
            return lambda(records[i]);
        }
        catch (Exception exception) when (exception is not UncertainException)
        {
            throw Failed(exception, what, i, name, records[i]);
        }
    }

    /// <summary>What is thrown when a caller's lambda threw.</summary>
    public static InvalidInputException Failed(Exception exception, string what, int record, string name, object? value) => new(
        $"The {what} lambda threw {exception.GetType().Name} on record {record} of {name} ('{value}'): {exception.Message} "
        + "Nothing was added to the world space.",
        exception);
}
