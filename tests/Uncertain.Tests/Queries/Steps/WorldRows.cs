using Uncertain.Tests.Queries.Rows;

namespace Uncertain.Tests.Queries.Steps;

/// <summary>The records that are there in one world.</summary>
/// <param name="Sources">The rows of each source.</param>
/// <param name="DefaultRow">What a left join gives as the second row where nothing matches.</param>
public sealed record WorldRows(IReadOnlyList<IReadOnlyList<Row>> Sources, Row? DefaultRow);
