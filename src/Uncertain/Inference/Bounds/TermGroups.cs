namespace Uncertain.Inference.Bounds;

/// <summary>Places, in a pool of numbers, of the groups of one list of terms.</summary>
/// <param name="Count">Number of groups.</param>
/// <param name="SharesVariables">Whether a variable occurs in several groups.</param>
/// <param name="Terms">Number of terms of the list.</param>
/// <param name="Base">Start of the arrays, each of which has a place for every term.</param>
internal readonly record struct TermGroups(int Count, bool SharesVariables, int Terms, int Base)
{
    /// <summary>Numbers that the arrays take.</summary>
    public static int Size(int terms) => (6 * terms) + 1;

    /// <summary>Array of terms: their groups.</summary>
    public int GroupOfTerm => Base;

    /// <summary>Array of terms, group by group: where each begins.</summary>
    public int Order => Base + Terms;

    /// <summary>Array of groups: the literal that all terms of it have; -1 for a term of its own.</summary>
    public int Literals => Base + (2 * Terms);

    /// <summary>Array of groups: 1 if one of the variables occurs with several literals in the list.</summary>
    public int Clashes => Base + (3 * Terms);

    /// <summary>Array of groups: the length of what is left of it.</summary>
    public int Kept => Base + (4 * Terms);

    /// <summary>Array of groups, and one more: the first place of each in <see cref="Order"/>.</summary>
    public int Starts => Base + (5 * Terms);
}
