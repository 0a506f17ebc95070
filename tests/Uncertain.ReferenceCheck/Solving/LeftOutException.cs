namespace Uncertain.ReferenceCheck.Solving;

/// <summary>A case that this program leaves out, with the reason.</summary>
internal sealed class LeftOutException(string reason) : Exception(reason);
