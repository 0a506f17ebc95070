namespace Uncertain.ReferenceCheck.Cases;

/// <summary>A file or a case does not have the stated format; the message says where and what was expected.</summary>
internal sealed class MalformedCaseException(string message) : Exception(message);
