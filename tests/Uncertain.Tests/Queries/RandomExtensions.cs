namespace Uncertain.Tests.Queries;

internal static class RandomExtensions
{
    public static T Pick<T>(this Random random, IReadOnlyList<T> items) => items[random.Next(items.Count)];

    /// <summary>One of the first items more often than one of the last.</summary>
    public static T PickEarly<T>(this Random random, IReadOnlyList<T> items) =>
        items[Math.Min(random.Next(items.Count), random.Next(items.Count))];

    public static bool Chance(this Random random, double chance) => random.NextDouble() < chance;
}
