namespace Uncertain.Execution;

/// <summary>The records of a chunk that come of one range of driving rows; ranges are numbered in order.</summary>
internal readonly record struct MergeSegment(int Range, int Worker, MergeChunk Chunk, int Start, int End);
