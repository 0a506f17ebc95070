using Uncertain.Lineages;
using Uncertain.Worlds;

namespace Uncertain.Inference.Compilation;

/// <summary>
/// The part of an arena that one formula reaches, renumbered: conjunctions from 1 with operands before users, literals
/// as atoms.
/// </summary>
internal sealed class FormulaGraph
{
    private readonly int[] _first;
    private readonly LineageRef[] _operands;

    private FormulaGraph(int[] first, LineageRef[] operands, LineageRef root, AtomTable atoms)
    {
        _first = first;
        _operands = operands;
        Root = root;
        Atoms = atoms;
        Users = new int[first.Length];
        foreach (LineageRef operand in operands)
        {
            if (operand.IsNode)
            {
                Users[operand.Index]++;
            }
        }
    }

    public LineageRef Root { get; }

    public AtomTable Atoms { get; }

    /// <summary>Largest number of a conjunction.</summary>
    public int NodeCount => _first.Length - 2;

    /// <summary>How many operand places a conjunction takes.</summary>
    public int[] Users { get; }

    public ReadOnlySpan<LineageRef> Operands(int node) => _operands.AsSpan(_first[node], _first[node + 1] - _first[node]);

    public static FormulaGraph Collect(LineageArena arena, LineageRef root, FormBuilder form, CompilationBudget budget)
    {
        var numbers = new IntMap(16);
        int[] reached = Reach(arena, root, numbers, budget, out int operandCount);
        budget.Bytes(24L * reached.Length + 12L * operandCount);
        Sort(reached, root.Index, budget);
        var local = new IntMap(reached.Length);
        for (int i = 0; i < reached.Length; i++)
        {
            local.Add(reached[i], i + 1);
        }

        var atoms = new Renumbering(arena.Worlds.Variables, form);
        var first = new int[reached.Length + 2];
        var operands = new LineageRef[operandCount];
        int position = 0;
        for (int i = 0; i < reached.Length; i++)
        {
            first[i + 1] = position;
            foreach (LineageRef operand in arena.Operands(reached[i]))
            {
                operands[position++] = atoms.Local(operand, local);
            }

            budget.Step();
        }

        first[^1] = position;
        return new FormulaGraph(first, operands, atoms.Local(root, local), atoms.Atoms);
    }

    // Marked and swept in linear time where that touches hardly more than the formula.
    private static void Sort(int[] reached, int last, CompilationBudget budget)
    {
        const int Sparse = 16;
        if (reached.Length < last / Sparse)
        {
            Array.Sort(reached);
            return;
        }

        var isReached = new bool[last + 1];
        foreach (int index in reached)
        {
            isReached[index] = true;
        }

        int next = 0;
        for (int index = 0; next < reached.Length; index++)
        {
            if (isReached[index])
            {
                reached[next++] = index;
                budget.Step();
            }
        }
    }

    private static int[] Reach(LineageArena arena, LineageRef root, IntMap seen, CompilationBudget budget, out int operandCount)
    {
        var reached = new List<int>();
        var pending = new Stack<int>();
        operandCount = 0;
        if (root.IsNode)
        {
            seen.Add(root.Index, 0);
            pending.Push(root.Index);
        }

        while (pending.TryPop(out int index))
        {
            reached.Add(index);
            ReadOnlySpan<LineageRef> operands = arena.Operands(index);
            operandCount += operands.Length;
            foreach (LineageRef operand in operands)
            {
                if (operand.IsNode && !seen.TryGet(operand.Index, out _))
                {
                    seen.Add(operand.Index, 0);
                    pending.Push(operand.Index);
                }
            }

            budget.Step(operands.Length);
        }

        return [.. reached];
    }

    private sealed class Renumbering(VariableTable table, FormBuilder form)
    {
        private readonly IntMap _atomOfSlot = new(16);
        private readonly IntMap _manyOutcome = new(1);

        public AtomTable Atoms { get; } = new();

        public LineageRef Local(LineageRef operand, IntMap nodes)
        {
            if (operand.IsConstant)
            {
                return operand;
            }

            if (operand.IsNode)
            {
                nodes.TryGet(operand.Index, out int node);
                return LineageRef.Node(node).NegateIf(operand.IsNegated);
            }

            int slot = operand.Index;
            if (!_atomOfSlot.TryGet(slot, out int atom))
            {
                atom = Atoms.Add(Variable(slot), form.Literal(slot), slot);
                _atomOfSlot.Add(slot, atom);
            }

            return LineageRef.Literal(atom).NegateIf(operand.IsNegated);
        }

        private int Variable(int slot)
        {
            if (!table.IsAlternative(slot))
            {
                return Atoms.AddVariable();
            }

            int world = table.VariableOf(slot);
            if (!_manyOutcome.TryGet(world, out int variable))
            {
                variable = Atoms.AddVariable(world);
                _manyOutcome.Add(world, variable);
            }

            return variable;
        }
    }
}
