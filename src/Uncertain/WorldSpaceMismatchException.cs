namespace Uncertain;

/// <summary>Sets or lineages of different world spaces were combined; their chances have no joint meaning.</summary>
public sealed class WorldSpaceMismatchException : UncertainException
{
    internal WorldSpaceMismatchException(string what)
        : base($"{what} belongs to another world space. Build all sources and events that a query combines from the same "
            + "WorldSpace object.")
    {
    }
}
