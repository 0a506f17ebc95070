using Uncertain.Lineages;

namespace Uncertain.Inference.Compilation;

/// <summary>
/// Finds the modules of a formula: sub-formulas whose variables occur nowhere else, so that they can be compiled apart.
/// Linear time.
/// </summary>
/// <remarks>
/// Y. Dutuit, A. Rauzy, "A linear-time algorithm to find modules of fault trees", IEEE Transactions on Reliability 45(3),
/// 1996: a node is a module if all visits to what is under it, in one walk from the left to the right, lie between its own
/// first visit and the end of its walk.
/// </remarks>
internal static class ModuleFinder
{
    /// <summary>For each conjunction of the graph, whether it is a module.</summary>
    public static bool[] Find(FormulaGraph graph, CompilationBudget budget)
    {
        int nodes = graph.NodeCount;
        budget.Bytes(24L * nodes);
        int[] variableFirst = new int[graph.Atoms.VariableCount];
        int[] variableLast = new int[graph.Atoms.VariableCount];
        int[] first = new int[nodes + 1];
        int[] last = new int[nodes + 1];
        int[] end = new int[nodes + 1];
        Walk(graph, budget, variableFirst, variableLast, first, last, end);

        var isModule = new bool[nodes + 1];
        int[] earliest = new int[nodes + 1];
        int[] latest = new int[nodes + 1];
        for (int node = 1; node <= nodes; node++)
        {
            int low = int.MaxValue;
            int high = 0;
            foreach (LineageRef operand in graph.Operands(node))
            {
                if (operand.IsNode)
                {
                    int child = operand.Index;
                    low = Math.Min(low, Math.Min(first[child], earliest[child]));
                    high = Math.Max(high, Math.Max(last[child], latest[child]));
                }
                else
                {
                    int variable = graph.Atoms.Variable(operand.Index);
                    low = Math.Min(low, variableFirst[variable]);
                    high = Math.Max(high, variableLast[variable]);
                }
            }

            (earliest[node], latest[node]) = (low, high);
            isModule[node] = low > first[node] && high < end[node];
        }

        budget.Bytes(-24L * nodes);
        return isModule;
    }

    private static void Walk(
        FormulaGraph graph, CompilationBudget budget, int[] variableFirst, int[] variableLast, int[] first, int[] last, int[] end)
    {
        int clock = 1;
        int root = graph.Root.Index;
        first[root] = last[root] = clock;
        var path = new Stack<(int Node, int Next)>();
        path.Push((root, 0));
        while (path.TryPop(out (int Node, int Next) at))
        {
            budget.Step();
            ReadOnlySpan<LineageRef> operands = graph.Operands(at.Node);
            int next = at.Next;
            int entered = 0;
            while (next < operands.Length && entered == 0)
            {
                LineageRef operand = operands[next++];
                clock++;
                if (!operand.IsNode)
                {
                    int variable = graph.Atoms.Variable(operand.Index);
                    variableFirst[variable] = variableFirst[variable] == 0 ? clock : variableFirst[variable];
                    variableLast[variable] = clock;
                    continue;
                }

                last[operand.Index] = clock;
                if (first[operand.Index] == 0)
                {
                    first[operand.Index] = clock;
                    entered = operand.Index;
                }
            }

            if (entered == 0)
            {
                end[at.Node] = ++clock;
                last[at.Node] = Math.Max(last[at.Node], clock);
            }
            else
            {
                path.Push((at.Node, next));
                path.Push((entered, 0));
            }
        }
    }
}
