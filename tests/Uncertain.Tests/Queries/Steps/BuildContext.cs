using Uncertain.Tests.Queries.Rows;

namespace Uncertain.Tests.Queries.Steps;

/// <summary>What steps build on: the row type and the sources.</summary>
public sealed record BuildContext<TRow>(Shape<TRow> Shape, IReadOnlyList<UncertainSet<TRow>> Sources);
