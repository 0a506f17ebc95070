using Uncertain.Planning;

namespace Uncertain.Execution;

/// <summary>Refuses to combine sets of different world spaces.</summary>
internal static class SameWorlds
{
    public static PlanNode<T> Require<T>(WorldSpace worlds, UncertainSet<T> other, string operatorName) =>
        ReferenceEquals(other.Worlds, worlds)
            ? other.Node
            : throw new WorldSpaceMismatchException($"The other set of {operatorName} ({other.Node.Describe()})");
}
