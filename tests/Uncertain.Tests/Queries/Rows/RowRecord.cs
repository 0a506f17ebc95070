namespace Uncertain.Tests.Queries.Rows;

public sealed record RowRecord(int? A, int B, string? C);
