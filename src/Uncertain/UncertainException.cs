namespace Uncertain;

/// <summary>Base of the library's own exceptions. Each message says what happened, the value, the bound and the remedy.</summary>
public abstract class UncertainException : Exception
{
    private protected UncertainException(string message, Exception? inner = null)
        : base(message, inner)
    {
    }
}
