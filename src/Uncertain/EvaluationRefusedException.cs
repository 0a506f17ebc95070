namespace Uncertain;

/// <summary>An evaluator cannot do what was asked of it; the message names the reason and what to do instead.</summary>
public sealed class EvaluationRefusedException : UncertainException
{
    /// <summary>Creates the exception; evaluators outside the library use it to refuse.</summary>
    /// <param name="message">What cannot be done, why, and what to do instead.</param>
    /// <param name="inner">The cause, if another exception is one.</param>
    public EvaluationRefusedException(string message, Exception? inner = null)
        : base(message, inner)
    {
    }
}
