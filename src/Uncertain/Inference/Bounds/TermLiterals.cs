using Uncertain.Lineages;

namespace Uncertain.Inference.Bounds;

/// <summary>
/// The literals of a list of terms, numbered densely, with their variables and chances. 'None of these outcomes of one variable' counts
/// as one literal.
/// </summary>
internal sealed class TermLiterals(OutcomeChances chances)
{
    private readonly DenseNumbers _literals = new();
    private readonly DenseNumbers _variables = new();
    private int[] _variableOf = new int[64];
    private TailBounds[] _bounds = new TailBounds[64];
    private int _merged;

    public int Count => _literals.Count;

    public long Bytes => _literals.Bytes + _variables.Bytes + (36L * _bounds.Length);

    public int VariableCount => _variables.Count;

    public void Clear()
    {
        _literals.Clear();
        _variables.Clear();
        _merged = 0;
    }

    public int VariableOf(int literal) => _variableOf[literal];

    public ref readonly TailBounds this[int literal] => ref _bounds[literal];

    /// <summary>How many of the literals, from the first on, are of its variable.</summary>
    public int RunLength(ReadOnlySpan<LineageRef> literals)
    {
        int run = 1;
        if (chances.Table.IsAlternative(literals[0].Index))
        {
            int variable = chances.Table.VariableOf(literals[0].Index);
            while (run < literals.Length && chances.Table.VariableOf(literals[run].Index) == variable)
            {
                run++;
            }
        }

        return run;
    }

    public int Number(LineageRef literal)
    {
        int known = Count;
        int number = _literals.Of(literal.Word);
        if (number == known)
        {
            Describe(number, chances.Table.VariableOf(literal.Index), chances.Literal(literal));
        }

        return number;
    }

    /// <summary>The number of 'none of these outcomes', given as negated literals of one variable.</summary>
    public int NumberOfNone(ReadOnlySpan<LineageRef> literals)
    {
        int[] slots = new int[literals.Length];
        for (int i = 0; i < slots.Length; i++)
        {
            slots[i] = literals[i].Index;
        }

        int variable = chances.Table.VariableOf(slots[0]);
        int number = _literals.Of(~_merged++);
        Describe(number, variable, !chances.OneOf(variable, slots));
        return number;
    }

    private void Describe(int number, int variable, TailBounds bounds)
    {
        if (number == _bounds.Length)
        {
            Array.Resize(ref _bounds, number * 2);
            Array.Resize(ref _variableOf, number * 2);
        }

        _variableOf[number] = _variables.Of(variable);
        _bounds[number] = bounds;
    }
}
