using Uncertain.Lineages;

namespace Uncertain.Inference.Compilation.Decisions;

/// <summary>Takes over a module that already consists of decisions and independent parts, in linear time.</summary>
internal sealed class DecisionReader(AtomTable atoms, Workspace workspace, FormBuilder form, CompilationBudget budget)
{
    // Lists of the circuit, its order and its edges.
    private const long BytesPerOperand = 64;

    /// <summary>The edge to the compiled module; null if it does not prove to be such.</summary>
    /// <param name="module">The module.</param>
    /// <param name="variables">Number of its variables, which the workspace has numbered.</param>
    public int? TryCompile(ModuleFormula module, int variables)
    {
        long bytes = BytesPerOperand * (module.Count + module.OperandCount);
        budget.Bytes(bytes);
        DecisionCircuit circuit = DecisionCircuit.Read(module, atoms, workspace, budget);
        var order = new DecisionOrder(circuit, atoms, workspace.VertexOfVariable, variables);
        int? edge = order.TryProve(budget) ? Emit(circuit, order.IsReached) : null;
        budget.Bytes(-bytes);
        return edge;
    }

    private int Emit(DecisionCircuit circuit, bool[] isReached)
    {
        int[] made = new int[circuit.Count];
        int[] buffer = new int[16];
        for (int node = 0; node < circuit.Count; node++)
        {
            if (!isReached[node])
            {
                continue;
            }

            int before = form.NodeCount;
            ReadOnlySpan<LineageRef> edges = circuit.Edges(node);
            if (edges.Length > buffer.Length)
            {
                buffer = new int[edges.Length * 2];
            }

            for (int i = 0; i < edges.Length; i++)
            {
                buffer[i] = EdgeOf(edges[i], made);
            }

            made[node] = circuit[node].IsDecision
                ? form.Decision(EdgeOf(circuit[node].Selector, made), buffer[0], buffer[1])
                : form.Conjunction(buffer.AsSpan(0, edges.Length));
            budget.Nodes(form.NodeCount - before);
            budget.Step();
        }

        return EdgeOf(circuit.Root, made);
    }

    private int EdgeOf(LineageRef edge, int[] made)
    {
        int positive = edge.IsNode ? made[edge.Index - 1] : edge.IsLiteral ? atoms.Edge(edge.Index) : FormBuilder.True;
        return positive ^ (edge.IsNegated ? 1 : 0);
    }
}
