namespace PartTracing.Input;

/// <summary>A file of the data folder is missing or malformed; the message names the file, the line and the remedy.</summary>
internal sealed class FerryDataException(string message, Exception? inner = null) : Exception(message, inner);
