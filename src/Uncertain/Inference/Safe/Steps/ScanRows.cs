namespace Uncertain.Inference.Safe.Steps;

/// <summary>Rows that a scan has read. Arrays may be longer than <paramref name="Count"/>.</summary>
/// <param name="Count">Number of rows.</param>
/// <param name="Columns">Codes by variable and row.</param>
/// <param name="Chances">Chances by row; empty for exclusive alternatives.</param>
/// <param name="Records">Record numbers by row for exclusive alternatives; else empty.</param>
internal readonly record struct ScanRows(int Count, int[][] Columns, double[] Chances, int[] Records);
