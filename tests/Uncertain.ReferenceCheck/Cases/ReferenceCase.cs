using Uncertain.ReferenceCheck.Solving;

namespace Uncertain.ReferenceCheck.Cases;

/// <summary>One case: a question that can be put to the library, and what should come out.</summary>
/// <param name="Id">Unique name.</param>
/// <param name="Ask">Builds the worlds and the lineages or queries, and evaluates them.</param>
/// <param name="Expected">The expected figures; null where the file has none.</param>
internal sealed record ReferenceCase(string Id, Func<Solver, IReadOnlyList<Figure>> Ask, IReadOnlyList<Expected>? Expected);
