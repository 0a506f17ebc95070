namespace Uncertain.Inference.Safe.Codes;

/// <summary>Pairs of rows of two tables, in the order in which they were found; grows.</summary>
internal sealed class RowPairs(Workspace workspace, int expected)
{
    private int[] _left = workspace.Rent<int>(expected);
    private int[] _right = workspace.Rent<int>(expected);

    public int Count { get; private set; }

    public ReadOnlySpan<int> Left => _left.AsSpan(0, Count);

    public ReadOnlySpan<int> Right => _right.AsSpan(0, Count);

    public void Add(int left, int right)
    {
        if (Count == Math.Min(_left.Length, _right.Length))
        {
            Grow();
        }

        _left[Count] = left;
        _right[Count++] = right;
    }

    private void Grow()
    {
        workspace.Control.Checkpoint();
        int length = (int)Math.Min(2L * Count, Array.MaxLength);
        int[] left = workspace.Rent<int>(length);
        int[] right = workspace.Rent<int>(length);
        Left.CopyTo(left);
        Right.CopyTo(right);
        (_left, _right) = (left, right);
    }
}
