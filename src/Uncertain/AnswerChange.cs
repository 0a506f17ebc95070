namespace Uncertain;

/// <summary>An answer whose probability has changed. From <see cref="MaintainedAnswers{T}"/>.</summary>
/// <param name="Number">The answer's number in <see cref="MaintainedAnswers{T}.Answers"/>.</param>
/// <param name="Before">The answer before the change.</param>
/// <param name="After">The answer now.</param>
/// <typeparam name="T">Type of the values.</typeparam>
public sealed record AnswerChange<T>(int Number, Answer<T> Before, Answer<T> After);
