namespace Uncertain.Inference.Compilation;

/// <summary>
/// What a compilation takes as indivisible: outcomes of variables, and modules, which are compiled and then count as
/// two-outcome variables of their own.
/// </summary>
internal sealed class AtomTable
{
    private int[] _edges = new int[16];
    private int[] _variables = new int[16];
    private int[] _slots = new int[16];
    private int[] _manyOutcome = new int[16];
    private int[] _selectors = new int[16];

    /// <summary>Number of atoms.</summary>
    public int Count { get; private set; }

    /// <summary>Number of variables that the atoms belong to.</summary>
    public int VariableCount { get; private set; }

    /// <summary>Adds a variable with only two outcomes, or a many-outcome one given by its number in the world space.</summary>
    public int AddVariable(int manyOutcome = -1)
    {
        if (VariableCount == _manyOutcome.Length)
        {
            Array.Resize(ref _manyOutcome, VariableCount * 2);
            Array.Resize(ref _selectors, VariableCount * 2);
        }

        _manyOutcome[VariableCount] = manyOutcome;
        return VariableCount++;
    }

    /// <summary>Adds an atom; <paramref name="slot"/> matters for many-outcome variables only.</summary>
    public int Add(int variable, int edge, int slot)
    {
        if (Count == _edges.Length)
        {
            Array.Resize(ref _edges, Count * 2);
            Array.Resize(ref _variables, Count * 2);
            Array.Resize(ref _slots, Count * 2);
        }

        _edges[Count] = edge;
        _variables[Count] = variable;
        _slots[Count] = slot;
        _selectors[variable] = edge;
        return Count++;
    }

    /// <summary>The edge of the form that stands for the atom.</summary>
    public int Edge(int atom) => _edges[atom];

    /// <summary>The edge of the only atom of a two-outcome variable.</summary>
    public int SelectorOf(int variable) => _selectors[variable];

    public int Variable(int atom) => _variables[atom];

    public int Slot(int atom) => _slots[atom];

    public bool IsManyOutcome(int variable) => _manyOutcome[variable] >= 0;

    /// <summary>The number in the world space of a many-outcome variable.</summary>
    public int ManyOutcome(int variable) => _manyOutcome[variable];
}
