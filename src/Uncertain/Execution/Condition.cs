using Uncertain.Lineages;

namespace Uncertain.Execution;

/// <summary>Writes the worlds that a condition allows each record of a batch.</summary>
internal delegate void Condition<T>(Batch<T> batch, Span<LineageRef> worlds);
