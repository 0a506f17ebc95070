using System.Runtime.InteropServices;
using Uncertain.Lineages;
using Uncertain.Worlds;

namespace Uncertain.Inference.Compilation.Cases;

/// <summary>Reads a lineage of an arena into a <see cref="CaseCircuit"/>.</summary>
internal sealed class CaseReader
{
    private readonly List<int> _reached = [];

    /// <summary>False if the lineage is not small or has many-outcome variables.</summary>
    public bool TryRead(LineageArena arena, LineageRef root, CaseCircuit circuit)
    {
        circuit.Clear();
        if (!root.IsNode || !TryReach(arena, root))
        {
            return false;
        }

        // In an arena operands come before users.
        _reached.Sort();
        VariableTable table = arena.Worlds.Variables;
        foreach (int index in _reached)
        {
            circuit.AddNode();
            foreach (LineageRef operand in arena.Operands(index))
            {
                int edge;
                if (operand.IsLiteral)
                {
                    edge = table.IsAlternative(operand.Index) ? -1 : circuit.Variable(operand.Index);
                    if (edge < 0)
                    {
                        return false;
                    }
                }
                else
                {
                    edge = CaseCircuit.NodeEdge(_reached.BinarySearch(operand.Index));
                }

                circuit.AddOperand(edge | (operand.IsNegated ? 1 : 0));
            }
        }

        circuit.Root = CaseCircuit.NodeEdge(_reached.Count - 1) | (root.IsNegated ? 1 : 0);
        return true;
    }

    private bool TryReach(LineageArena arena, LineageRef root)
    {
        _reached.Clear();
        _reached.Add(root.Index);
        int operandCount = 0;
        for (int next = 0; next < _reached.Count; next++)
        {
            ReadOnlySpan<LineageRef> operands = arena.Operands(_reached[next]);
            operandCount += operands.Length;
            if (operandCount > CaseCircuit.MostOperands)
            {
                return false;
            }

            foreach (LineageRef operand in operands)
            {
                if (operand.IsNode && !CollectionsMarshal.AsSpan(_reached).Contains(operand.Index))
                {
                    if (_reached.Count == CaseCircuit.MostNodes)
                    {
                        return false;
                    }

                    _reached.Add(operand.Index);
                }
            }
        }

        return true;
    }
}
