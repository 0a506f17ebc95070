namespace Uncertain.Planning.Calculus;

/// <summary>One place in a conjunction that a row must fill: a source, or a union of two conjunctions.</summary>
internal abstract class Atom;
