using System.Runtime.InteropServices;
using Uncertain.Lineages;

namespace Uncertain.Inference.Compilation.Decisions;

/// <summary>
/// A module read as decisions and conjunctions, as far as its shape shows them: 'x and A, or not x and B' is a decision, all
/// else a conjunction. Linear time. That the parts are independent is not known yet; see <see cref="DecisionOrder"/>.
/// </summary>
/// <remarks>Edges are literals of atoms, constants, and nodes i + 1 as in a <see cref="ModuleFormula"/>.</remarks>
internal sealed class DecisionCircuit
{
    // Longer conjunctions are not searched for selectors: a shared one would be searched for each of its users.
    private const int MostSearched = 16;

    private readonly ModuleFormula _module;
    private readonly AtomTable _atoms;
    private readonly Workspace _workspace;
    private readonly List<DecisionNode> _nodes = [];
    private readonly List<LineageRef> _edges = [];
    private readonly LineageRef[] _edgeOf;
    private readonly List<LineageRef> _branch = [];
    private readonly List<LineageRef> _operands = [];
    private readonly List<LineageRef> _rest = [];

    private DecisionCircuit(ModuleFormula module, AtomTable atoms, Workspace workspace)
    {
        _module = module;
        _atoms = atoms;
        _workspace = workspace;
        _edgeOf = new LineageRef[module.Count];
    }

    /// <summary>Number of nodes; operands come before users.</summary>
    public int Count => _nodes.Count;

    /// <summary>The edge to the whole module.</summary>
    public LineageRef Root => _edgeOf[^1];

    public DecisionNode this[int node] => _nodes[node];

    /// <summary>Reads a module whose variables the workspace has numbered in an order that is likely to be that of deciding.</summary>
    public static DecisionCircuit Read(ModuleFormula module, AtomTable atoms, Workspace workspace, CompilationBudget budget)
    {
        var circuit = new DecisionCircuit(module, atoms, workspace);
        for (int node = 0; node < module.Count; node++)
        {
            ReadOnlySpan<LineageRef> operands = module.Operands(node);
            circuit._edgeOf[node] = circuit.ReadNode(operands);
            budget.Step(1 + operands.Length);
        }

        return circuit;
    }

    public ReadOnlySpan<LineageRef> Edges(int node) =>
        CollectionsMarshal.AsSpan(_edges).Slice(_nodes[node].First, _nodes[node].Count);

    private LineageRef ReadNode(ReadOnlySpan<LineageRef> operands)
    {
        if (operands.Length == 2 && Searched(operands[0], out ReadOnlySpan<LineageRef> one)
            && Searched(operands[1], out ReadOnlySpan<LineageRef> other) && FindSelector(one, other) is { IsConstant: false } selector)
        {
            LineageRef then = !Conjunction(Without(one, selector));
            LineageRef otherwise = !Conjunction(Without(other, !selector));
            return then == otherwise ? then : Append(selector, [then, otherwise]);
        }

        return Conjunction(operands);
    }

    /// <summary>The literal of one conjunction whose negation is in the other; the constant if there is none.</summary>
    private LineageRef FindSelector(ReadOnlySpan<LineageRef> one, ReadOnlySpan<LineageRef> other)
    {
        LineageRef best = LineageRef.True;
        foreach (LineageRef literal in one)
        {
            if (literal.IsLiteral && other.Contains(!literal) && (best.IsConstant || Number(literal) < Number(best)))
            {
                best = literal;
            }
        }

        return best;
    }

    /// <summary>
    /// A conjunction, its literals also put into the negated conjunctions beside them, since they hold where those matter.
    /// </summary>
    private LineageRef Conjunction(ReadOnlySpan<LineageRef> operands)
    {
        int[] mark = _workspace.LiteralMark;
        int stamp = _workspace.NextStamp();
        bool hasLiterals = false;
        foreach (LineageRef operand in operands)
        {
            if (operand.IsLiteral)
            {
                mark[Literal(operand)] = stamp;
                hasLiterals = true;
            }
        }

        _operands.Clear();
        foreach (LineageRef operand in operands)
        {
            _operands.Add(hasLiterals && Searched(operand, out ReadOnlySpan<LineageRef> inner)
                ? !GivenMarked(inner, mark, stamp, operand)
                : EdgeOf(operand));
        }

        return Plain(_operands);
    }

    /// <summary>A conjunction given the marked literals.</summary>
    private LineageRef GivenMarked(ReadOnlySpan<LineageRef> inner, int[] mark, int stamp, LineageRef negated)
    {
        _rest.Clear();
        foreach (LineageRef operand in inner)
        {
            if (operand.IsLiteral && mark[Literal(!operand)] == stamp)
            {
                return LineageRef.False;
            }

            if (!operand.IsLiteral || mark[Literal(operand)] != stamp)
            {
                _rest.Add(EdgeOf(operand));
            }
        }

        return _rest.Count == inner.Length ? !EdgeOf(negated) : Plain(_rest);
    }

    private LineageRef Plain(List<LineageRef> operands)
    {
        if (operands.Contains(LineageRef.False))
        {
            return LineageRef.False;
        }

        operands.RemoveAll(operand => operand == LineageRef.True);
        return operands.Count switch
        {
            0 => LineageRef.True,
            1 => operands[0],
            _ => Append(LineageRef.True, CollectionsMarshal.AsSpan(operands)),
        };
    }

    private LineageRef Append(LineageRef selector, ReadOnlySpan<LineageRef> edges)
    {
        _nodes.Add(new DecisionNode(selector, _edges.Count, edges.Length));
        _edges.AddRange(edges);
        return LineageRef.Node(_nodes.Count);
    }

    private ReadOnlySpan<LineageRef> Without(ReadOnlySpan<LineageRef> operands, LineageRef literal)
    {
        _branch.Clear();
        foreach (LineageRef operand in operands)
        {
            if (operand != literal)
            {
                _branch.Add(operand);
            }
        }

        return CollectionsMarshal.AsSpan(_branch);
    }

    private bool Searched(LineageRef operand, out ReadOnlySpan<LineageRef> inner)
    {
        inner = operand.IsNode && operand.IsNegated ? _module.Operands(operand.Index - 1) : default;
        return inner.Length is > 0 and <= MostSearched;
    }

    private LineageRef EdgeOf(LineageRef operand) =>
        operand.IsNode ? _edgeOf[operand.Index - 1].NegateIf(operand.IsNegated) : operand;

    private static int Literal(LineageRef operand) => (operand.Index << 1) | (operand.IsNegated ? 1 : 0);

    private int Number(LineageRef literal) => _workspace.VertexOfVariable[_atoms.Variable(literal.Index)];
}
