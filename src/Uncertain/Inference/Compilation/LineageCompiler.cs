using Uncertain.Lineages;
using Uncertain.Numerics;

namespace Uncertain.Inference.Compilation;

/// <summary>
/// From a lineage to its compiled form: modules apart, innermost first; in each, lists of terms are factored, and what
/// neither shows independence nor factors is decided variable by variable.
/// </summary>
internal sealed class LineageCompiler
{
    private readonly CompilationBudget _budget;
    private readonly FormBuilder _form = new();
    private readonly FormulaGraph _graph;
    private readonly AtomTable _atoms;
    private readonly LineageRef[] _resolved;
    private readonly IntMap _numbers = new(16);
    private readonly bool[] _isModule;
    private readonly TermSimplifier _simplifier;
    private readonly TermFactoring _factoring;
    private readonly CircuitCompiler _circuits;

    private readonly FormValues? _values;

    private LineageCompiler(LineageArena arena, LineageRef root, CompilationBudget budget, ChanceSetting? setting)
    {
        _budget = budget;
        _values = setting is null ? null : new FormValues(_form, setting);
        _graph = FormulaGraph.Collect(arena, root, _form, budget);
        _atoms = _graph.Atoms;
        _resolved = new LineageRef[_graph.NodeCount + 1];
        _isModule = ModuleFinder.Find(_graph, budget);
        var workspace = new Workspace(_atoms);
        _simplifier = new TermSimplifier(_atoms, workspace, budget);
        _factoring = new TermFactoring(_atoms, workspace, _form, budget, _values);
        _circuits = new CircuitCompiler(_atoms, workspace, _form, budget, _simplifier, _values);
    }

    /// <summary>The compiled form.</summary>
    /// <exception cref="BudgetSpentException">A budget ran out.</exception>
    public static CompiledForm Compile(LineageArena arena, LineageRef root, CompilationBudget budget)
    {
        if (!root.IsNode)
        {
            var form = new FormBuilder();
            int edge = root.IsConstant ? FormBuilder.True : form.Literal(root.Index);
            return form.Finish(edge ^ (root.IsNegated ? 1 : 0));
        }

        var compiler = new LineageCompiler(arena, root, budget, null);
        return compiler._form.Finish(compiler.Run());
    }

    /// <summary>
    /// As <see cref="Compile"/>, for one evaluation: parts may be computed on the way, without a form. Then <paramref name="tails"/>
    /// are those of the whole, and the form is of no use but for its size.
    /// </summary>
    /// <exception cref="BudgetSpentException">A budget ran out.</exception>
    public static CompiledForm CompileOrEvaluate(
        LineageArena arena, LineageRef root, CompilationBudget budget, out Tails<ExtendedDouble>? tails)
    {
        tails = null;
        if (!root.IsNode)
        {
            return Compile(arena, root, budget);
        }

        var compiler = new LineageCompiler(arena, root, budget, new ChanceSetting(arena.Worlds.Variables));
        int edge = compiler.Run();
        tails = compiler._values!.HasKnown ? compiler._values.Of(edge) : null;
        return compiler._form.Finish(edge);
    }

    private int Run()
    {
        for (int node = 1; node <= _graph.NodeCount; node++)
        {
            if (_isModule[node])
            {
                int edge = Module(node);
                _resolved[node] = edge <= FormBuilder.False
                    ? LineageRef.True.NegateIf(edge == FormBuilder.False)
                    : LineageRef.Literal(_atoms.Add(_atoms.AddVariable(), edge, -1));
            }

            _budget.Step();
        }

        LineageRef root = _resolved[_graph.Root.Index];
        int result = root.IsLiteral ? _atoms.Edge(root.Index) : FormBuilder.True;
        return result ^ (root.IsNegated != _graph.Root.IsNegated ? 1 : 0);
    }

    private int Module(int node)
    {
        if (AreIndependent(node))
        {
            ReadOnlySpan<LineageRef> operands = _graph.Operands(node);
            Span<int> edges = operands.Length <= 64 ? stackalloc int[operands.Length] : new int[operands.Length];
            for (int i = 0; i < edges.Length; i++)
            {
                LineageRef operand = Resolve(operands[i]);
                edges[i] = (operand.IsLiteral ? _atoms.Edge(operand.Index) : FormBuilder.True) ^ (operand.IsNegated ? 1 : 0);
            }

            return _form.Conjunction(edges);
        }

        ModuleFormula module = ModuleFormula.Extract(_graph, node, _isModule, _resolved, _numbers, _budget);
        TermList? terms = TermExpansion.TryExpand(module, _budget, out bool isNegated);
        return terms is null
            ? _circuits.Compile(module)
            : _factoring.Compile(_simplifier.Simplify(terms)) ^ (isNegated ? 1 : 0);
    }

    /// <summary>Whether all operands are modules or literals of different variables.</summary>
    private bool AreIndependent(int node)
    {
        foreach (LineageRef operand in _graph.Operands(node))
        {
            if (operand.IsNode ? !_isModule[operand.Index] : _atoms.IsManyOutcome(_atoms.Variable(operand.Index)))
            {
                return false;
            }
        }

        return true;
    }

    private LineageRef Resolve(LineageRef operand) =>
        operand.IsNode ? _resolved[operand.Index].NegateIf(operand.IsNegated) : operand;
}
