using Uncertain.Inference.Compilation;
using Uncertain.Inference.Sampling;
using Uncertain.Lineages;

namespace Uncertain.Inference.Aggregates;

/// <summary>
/// The order in which the variables of some lineages are decided: from the roots of an elimination tree of the lineages, gates
/// included, so that decisions soon leave independent parts.
/// </summary>
internal static class DecisionOrdering
{
    /// <summary>The rank of each variable.</summary>
    public static Dictionary<int, int> Of(LineageArena arena, ReadOnlySpan<LineageRef> lineages, AggregateBudget budget)
    {
        var cone = new Cone(arena);
        foreach (LineageRef lineage in lineages)
        {
            cone.Add(lineage);
            budget.Step(10);
        }

        int[] variables = [.. cone.Slots.Select(arena.Worlds.Variables.VariableOf).Distinct().Order()];
        var vertexOfVariable = new Dictionary<int, int>(variables.Length);
        foreach (int variable in variables)
        {
            vertexOfVariable.Add(variable, vertexOfVariable.Count);
        }

        int[] nodes = cone.Nodes();
        var vertexOfNode = new Dictionary<int, int>(nodes.Length);
        var pairs = new List<long>(cone.OperandCount);
        foreach (int node in nodes)
        {
            int vertex = variables.Length + vertexOfNode.Count;
            vertexOfNode.Add(node, vertex);
            foreach (LineageRef operand in arena.Operands(node))
            {
                budget.Step(10);
                int other = operand.IsNode
                    ? vertexOfNode[operand.Index]
                    : vertexOfVariable[arena.Worlds.Variables.VariableOf(operand.Index)];
                pairs.Add(SparseGraph.Pair(vertex, other));
            }
        }

        SparseGraph graph = SparseGraph.FromPairs(variables.Length + nodes.Length, pairs, budget.Compilation);
        EliminationTree tree = EliminationTree.Build(graph, budget.Compilation);
        int[] order = TreeNumbering.Preorder(tree, variables.Length, TreeNumbering.Depths(tree));
        var ranks = new Dictionary<int, int>(variables.Length);
        for (int rank = 0; rank < order.Length; rank++)
        {
            ranks.Add(variables[order[rank]], rank);
        }

        return ranks;
    }
}
