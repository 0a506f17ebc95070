using Uncertain.Worlds;

namespace Uncertain.Planning.Calculus;

/// <summary>A use of a source.</summary>
internal sealed class SourceAtom(ISource source, Type rowType) : Atom(rowType, source.Name)
{
    public ISource Source { get; } = source;
}
