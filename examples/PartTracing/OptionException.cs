namespace PartTracing;

/// <summary>The command line is wrong; the message says what and how to put it right.</summary>
internal sealed class OptionException(string message) : Exception(message);
