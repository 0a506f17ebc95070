namespace Uncertain.Tests.Queries.Certain;

internal sealed record Measure<T>(int Id, T Value);
