namespace Uncertain.Tests.Queries.Certain;

internal sealed record Pair<T>(T X, T Y);
