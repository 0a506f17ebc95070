namespace Uncertain;

/// <summary>
/// A record, a chance, a group or a key was refused at the door, or a lambda threw. Nothing was added: the world space
/// and its sets are as they were before the call.
/// </summary>
public sealed class InvalidInputException : UncertainException
{
    internal InvalidInputException(string message, Exception? inner = null)
        : base(message, inner)
    {
    }
}
