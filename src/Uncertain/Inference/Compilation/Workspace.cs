using Uncertain.Lineages;

namespace Uncertain.Inference.Compilation;

/// <summary>
/// Arrays over all variables and literals of a compilation, shared by its many small steps so that a step costs what it
/// touches and not what there is.
/// </summary>
internal sealed class Workspace(AtomTable atoms)
{
    private int[] _rankOfVariable = new int[16];
    private int[] _vertexOfVariable = new int[16];
    private int[] _variableMark = new int[16];
    private int[] _literalMark = new int[32];
    private int[] _literalCount = new int[32];
    private int _stamp;

    /// <summary>When each variable is decided.</summary>
    public int[] RankOfVariable => Ensure(ref _rankOfVariable, atoms.VariableCount);

    /// <summary>A number of each variable that is valid while its <see cref="VariableMark"/> is the current stamp.</summary>
    public int[] VertexOfVariable => Ensure(ref _vertexOfVariable, atoms.VariableCount);

    public int[] VariableMark => Ensure(ref _variableMark, atoms.VariableCount);

    public int[] LiteralMark => Ensure(ref _literalMark, 2 * atoms.Count);

    /// <summary>Counters, all zero; who uses them sets them back.</summary>
    public int[] LiteralCount => Ensure(ref _literalCount, 2 * atoms.Count);

    public int NextStamp() => ++_stamp;

    /// <summary>Numbers the variables of a list in order of first occurrence and returns them.</summary>
    public int[] NumberVariables(TermList terms)
    {
        var variables = new List<int>();
        int[] mark = VariableMark;
        int[] vertex = VertexOfVariable;
        int stamp = NextStamp();
        foreach (int literal in terms.Literals)
        {
            int variable = atoms.Variable(literal >> 1);
            if (mark[variable] != stamp)
            {
                mark[variable] = stamp;
                vertex[variable] = variables.Count;
                variables.Add(variable);
            }
        }

        return [.. variables];
    }

    /// <summary>
    /// The same for a module, users before operands: for circuits that were built step by step, the last step first.
    /// </summary>
    public List<int> NumberVariables(ModuleFormula module, CompilationBudget budget)
    {
        var variables = new List<int>();
        int[] mark = VariableMark;
        int[] vertex = VertexOfVariable;
        int stamp = NextStamp();
        for (int node = module.Count - 1; node >= 0; node--)
        {
            foreach (LineageRef operand in module.Operands(node))
            {
                if (operand.IsLiteral && mark[atoms.Variable(operand.Index)] != stamp)
                {
                    int variable = atoms.Variable(operand.Index);
                    mark[variable] = stamp;
                    vertex[variable] = variables.Count;
                    variables.Add(variable);
                }
            }

            budget.Step();
        }

        return variables;
    }

    private static int[] Ensure(ref int[] array, int count)
    {
        if (array.Length < count)
        {
            Array.Resize(ref array, Math.Max(count, array.Length * 2));
        }

        return array;
    }
}
