using System.Collections.Immutable;

namespace Uncertain.Planning.Calculus;

/// <summary>
/// No row of another conjunction is there whose bound expressions (the right sides) equal those of this one (the left sides).
/// </summary>
internal sealed record Absence(Conjunction Of, ImmutableArray<Equality> Binding);
