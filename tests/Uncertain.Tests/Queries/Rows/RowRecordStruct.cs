namespace Uncertain.Tests.Queries.Rows;

public readonly record struct RowRecordStruct(int? A, int B, string? C);
