namespace Uncertain.Tests.Distributions;

/// <summary>An element of an <see cref="AggregateCase"/>.</summary>
/// <param name="Id">Tells loads apart.</param>
/// <param name="Ferry">A key.</param>
/// <param name="Amount">A number.</param>
/// <param name="Price">A number that may be missing.</param>
internal sealed record Load(int Id, string Ferry, int Amount, decimal? Price);
