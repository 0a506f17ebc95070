using Uncertain.Lineages;

namespace Uncertain.Inference.Compilation.Decisions;

/// <summary>A node of a <see cref="DecisionCircuit"/>.</summary>
/// <param name="Selector">The literal that is decided; the constant for a conjunction.</param>
/// <param name="First">Where the node's edges begin: those where the selector holds and where not, or the operands.</param>
/// <param name="Count">Number of edges.</param>
internal readonly record struct DecisionNode(LineageRef Selector, int First, int Count)
{
    public bool IsDecision => Selector.IsLiteral;
}
