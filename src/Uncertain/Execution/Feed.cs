namespace Uncertain.Execution;

/// <summary>Sends all records that come of a range of driving rows through one worker's chain of sinks.</summary>
internal delegate void Feed(int from, int to);
