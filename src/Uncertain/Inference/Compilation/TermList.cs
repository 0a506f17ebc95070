namespace Uncertain.Inference.Compilation;

/// <summary>
/// A disjunction of terms, each a conjunction of literals (atom * 2 + 1 if negated), in two flat arrays. A conjunction of
/// clauses is the negation of one.
/// </summary>
internal sealed class TermList
{
    private int[] _literals;
    private int[] _ends;

    public TermList(int terms = 4, int literals = 8)
    {
        _ends = new int[Math.Max(1, terms)];
        _literals = new int[Math.Max(1, literals)];
    }

    /// <summary>Number of terms.</summary>
    public int Count { get; private set; }

    /// <summary>Number of literals in all terms.</summary>
    public int LiteralCount { get; private set; }

    public ReadOnlySpan<int> Literals => _literals.AsSpan(0, LiteralCount);

    public ReadOnlySpan<int> this[int term] => _literals.AsSpan(Start(term), _ends[term] - Start(term));

    public Span<int> Writable(int term) => _literals.AsSpan(Start(term), _ends[term] - Start(term));

    /// <summary>Adds a literal to the term that <see cref="EndTerm"/> will close.</summary>
    public void AddLiteral(int literal)
    {
        if (LiteralCount == _literals.Length)
        {
            Array.Resize(ref _literals, LiteralCount * 2);
        }

        _literals[LiteralCount++] = literal;
    }

    public void EndTerm()
    {
        if (Count == _ends.Length)
        {
            Array.Resize(ref _ends, Count * 2);
        }

        _ends[Count++] = LiteralCount;
    }

    public void AddTerm(ReadOnlySpan<int> literals)
    {
        foreach (int literal in literals)
        {
            AddLiteral(literal);
        }

        EndTerm();
    }

    /// <summary>Shortens the last term to its first <paramref name="length"/> literals.</summary>
    public void CutLast(int length) => LiteralCount = _ends[Count - 1] = Start(Count - 1) + length;

    /// <summary>Takes the last term away.</summary>
    public void RemoveLast() => LiteralCount = Start(--Count);

    private int Start(int term) => term == 0 ? 0 : _ends[term - 1];
}
