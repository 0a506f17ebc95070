namespace Uncertain.Tests.Queries.Rows;

/// <summary>Takes numbers for equal when both are even or both are odd.</summary>
public sealed class ParityComparer : IEqualityComparer<int>
{
    public bool Equals(int x, int y) => (x - y) % 2 == 0;

    public int GetHashCode(int obj) => Math.Abs(obj % 2);
}
