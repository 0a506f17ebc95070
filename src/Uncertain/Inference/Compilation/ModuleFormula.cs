using Uncertain.Lineages;

namespace Uncertain.Inference.Compilation;

/// <summary>
/// One module of a formula: its conjunctions from 0 with operands before users and the module itself last; inner modules are
/// atoms. Conjunctions that only another conjunction uses are part of that one.
/// </summary>
internal sealed class ModuleFormula
{
    private readonly int[] _first;
    private readonly LineageRef[] _operands;

    private ModuleFormula(int[] first, LineageRef[] operands)
    {
        _first = first;
        _operands = operands;
    }

    /// <summary>Number of conjunctions.</summary>
    public int Count => _first.Length - 1;

    public int OperandCount => _operands.Length;

    /// <summary>Operands: atoms, constants and conjunctions, the latter as node i + 1 since node 0 is the constant.</summary>
    public ReadOnlySpan<LineageRef> Operands(int node) => _operands.AsSpan(_first[node], _first[node + 1] - _first[node]);

    /// <summary>Takes a module out of its graph; <paramref name="resolved"/> has the atoms of inner modules.</summary>
    public static ModuleFormula Extract(
        FormulaGraph graph, int module, bool[] isModule, LineageRef[] resolved, IntMap numbers, CompilationBudget budget)
    {
        List<int> nodes = Reach(graph, module, isModule, numbers, budget);
        nodes.Sort();
        for (int i = 0; i < nodes.Count; i++)
        {
            numbers.Set(nodes[i], i + 1);
        }

        int[] first = new int[nodes.Count + 1];
        var operands = new List<LineageRef>();
        var pending = new Stack<LineageRef>();
        for (int i = 0; i < nodes.Count; i++)
        {
            first[i] = operands.Count;
            Push(graph.Operands(nodes[i]), pending);
            while (pending.TryPop(out LineageRef operand))
            {
                budget.Step();
                if (!operand.IsNode)
                {
                    operands.Add(operand);
                }
                else if (isModule[operand.Index])
                {
                    operands.Add(resolved[operand.Index].NegateIf(operand.IsNegated));
                }
                else if (IsPart(graph, operand))
                {
                    Push(graph.Operands(operand.Index), pending);
                }
                else
                {
                    numbers.TryGet(operand.Index, out int number);
                    operands.Add(LineageRef.Node(number).NegateIf(operand.IsNegated));
                }
            }
        }

        first[^1] = operands.Count;
        return new ModuleFormula(first, [.. operands]);
    }

    private static bool IsPart(FormulaGraph graph, LineageRef operand) => !operand.IsNegated && graph.Users[operand.Index] == 1;

    private static void Push(ReadOnlySpan<LineageRef> operands, Stack<LineageRef> pending)
    {
        for (int i = operands.Length - 1; i >= 0; i--)
        {
            pending.Push(operands[i]);
        }
    }

    private static List<int> Reach(FormulaGraph graph, int module, bool[] isModule, IntMap numbers, CompilationBudget budget)
    {
        // A part of another conjunction is walked through and not listed.
        var nodes = new List<int> { module };
        var pending = new Stack<int>();
        numbers.Set(module, 0);
        pending.Push(module);
        while (pending.TryPop(out int node))
        {
            budget.Step();
            foreach (LineageRef operand in graph.Operands(node))
            {
                if (!operand.IsNode || isModule[operand.Index])
                {
                    continue;
                }

                if (IsPart(graph, operand))
                {
                    pending.Push(operand.Index);
                }
                else if (!numbers.TryGet(operand.Index, out _))
                {
                    numbers.Set(operand.Index, 0);
                    nodes.Add(operand.Index);
                    pending.Push(operand.Index);
                }
            }
        }

        return nodes;
    }
}
