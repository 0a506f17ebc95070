using Uncertain.Inference.Compilation;
using Uncertain.Inference.Sampling;
using Uncertain.Lineages;
using Uncertain.Worlds;

namespace Uncertain.Inference.Posteriors;

/// <summary>
/// Takes evidence apart: conjunctions into their operands, what concerns one variable into the outcomes that it may still have; what is
/// thereby known is put into the rest, until nothing new comes out. The rest is split where it shares no variables.
/// </summary>
internal sealed class FindingsReader
{
    private readonly VariableTable _table;
    private readonly LineageArena _arena;
    private readonly CancellationToken _cancellationToken;
    private readonly Dictionary<int, bool[]> _allowed = [];
    private readonly Dictionary<int, LineageRef> _known = [];
    private readonly List<(LineageRef Formula, int[] Variables)> _formulas = [];
    private readonly Dictionary<int, List<int>> _formulasOf = [];
    private readonly HashSet<int> _open = [];
    private readonly Stack<LineageRef> _pending = new();
    private SortedSet<int> _changed = [];
    private bool _isPossible = true;

    private FindingsReader(VariableTable table, LineageArena arena, CancellationToken cancellationToken)
    {
        _table = table;
        _arena = arena;
        _cancellationToken = cancellationToken;
    }

    /// <summary>Null if there is a contradiction among what is known of single variables.</summary>
    public static Findings? TryRead(WorldSpace worlds, ReadOnlySpan<Lineage> pieces, CancellationToken cancellationToken) =>
        TryRead(worlds.Variables, new LineageArena(worlds), pieces, cancellationToken);

    /// <summary>The same with other chances, and with formulas in a given arena, where equal parts are equal references.</summary>
    public static Findings? TryRead(
        VariableTable table, LineageArena arena, ReadOnlySpan<Lineage> pieces, CancellationToken cancellationToken)
    {
        var reader = new FindingsReader(table, arena, cancellationToken);
        var imports = new Dictionary<LineageArena, LineageImport>();
        foreach (Lineage piece in pieces)
        {
            if (!imports.TryGetValue(piece.Arena, out LineageImport? import))
            {
                imports.Add(piece.Arena, import = new LineageImport(piece.Arena, reader._arena));
            }

            reader.Add(import.Copy(piece.Ref));
        }

        reader.Propagate();
        return reader._isPossible ? new Findings(arena.Worlds, reader._allowed, reader._known, reader.Parts()) : null;
    }

    private void Add(LineageRef formula)
    {
        _pending.Push(formula);
        while (_isPossible && _pending.TryPop(out LineageRef next))
        {
            _cancellationToken.ThrowIfCancellationRequested();
            if (next.IsNode && !next.IsNegated)
            {
                foreach (LineageRef operand in _arena.Operands(next.Index))
                {
                    _pending.Push(operand);
                }
            }
            else if (next.IsConstant)
            {
                _isPossible = next == LineageRef.True;
            }
            else
            {
                AddConjunct(next);
            }
        }
    }

    private void AddConjunct(LineageRef formula)
    {
        if (formula.IsLiteral)
        {
            int variable = _table.VariableOf(formula.Index);
            int outcome = formula.Index - _table.FirstSlot(variable);
            Restrict(variable, other => (other == outcome) != formula.IsNegated);
            return;
        }

        var cone = new Cone(_arena);
        cone.Add(formula);
        int[] variables = [.. cone.Slots.Select(_table.VariableOf).Distinct().Order()];
        if (variables is [var only])
        {
            int first = _table.FirstSlot(only);
            var truth = new FormulaTruth(_arena, cone);
            Restrict(only, outcome => truth.Holds(formula, slot => slot - first == outcome));
            return;
        }

        foreach (int variable in variables)
        {
            if (!_formulasOf.TryGetValue(variable, out List<int>? users))
            {
                _formulasOf.Add(variable, users = []);
            }

            users.Add(_formulas.Count);
            if (_allowed.ContainsKey(variable))
            {
                _changed.Add(_formulas.Count);
            }
        }

        _open.Add(_formulas.Count);
        _formulas.Add((formula, variables));
    }

    private void Restrict(int variable, Func<int, bool> isAllowed)
    {
        int none = _table.OutcomeCount(variable);
        if (!_allowed.TryGetValue(variable, out bool[]? allowed))
        {
            allowed = new bool[none + 1];
            Array.Fill(allowed, true);
            allowed[none] = !_table.NoneChanceExtended(variable).IsZero;
            _allowed.Add(variable, allowed);
        }

        int left = 0;
        for (int outcome = 0; outcome <= none; outcome++)
        {
            allowed[outcome] = allowed[outcome] && isAllowed(outcome);
            left += allowed[outcome] ? 1 : 0;
        }

        _isPossible = left > 0;
        bool isNew = false;
        for (int outcome = 0; outcome < none; outcome++)
        {
            if (!allowed[outcome] || left == 1)
            {
                isNew |= _known.TryAdd(_table.FirstSlot(variable) + outcome, allowed[outcome] ? LineageRef.True : LineageRef.False);
            }
        }

        if (isNew && _formulasOf.TryGetValue(variable, out List<int>? users))
        {
            _changed.UnionWith(users.Where(_open.Contains));
        }
    }

    private void Propagate()
    {
        while (_isPossible && _changed.Count > 0)
        {
            SortedSet<int> changed = _changed;
            _changed = [];
            foreach (int number in changed)
            {
                _open.Remove(number);
                LineageRef formula = _formulas[number].Formula;
                LineageRef rest = new LineageImport(_arena, _arena, _known).Copy(formula);
                if (rest == formula)
                {
                    _open.Add(number);
                }
                else
                {
                    Add(rest);
                }
            }
        }
    }

    private EvidencePart[] Parts()
    {
        var numberOf = new Dictionary<int, int>();
        int[] open = [.. _open.Order()];
        foreach (int variable in open.SelectMany(number => _formulas[number].Variables))
        {
            numberOf.TryAdd(variable, numberOf.Count);
        }

        var sets = new DisjointSets(numberOf.Count);
        foreach (int number in open)
        {
            int[] variables = _formulas[number].Variables;
            for (int i = 1; i < variables.Length; i++)
            {
                sets.Union(numberOf[variables[0]], numberOf[variables[i]]);
            }
        }

        return
        [
            .. open.Select(number => _formulas[number]).GroupBy(formula => sets.Find(numberOf[formula.Variables[0]])).Select(group =>
                new EvidencePart(
                    _arena, _arena.And([.. group.Select(formula => formula.Formula)]),
                    [.. group.SelectMany(formula => formula.Variables).Distinct().Order()])),
        ];
    }
}
