namespace Uncertain.Worlds;

/// <summary>The records of a source that are in some world and satisfy conditions.</summary>
internal abstract class RecordFilter
{
    /// <summary>The numbers of the records that pass, in order; null for all records.</summary>
    /// <param name="threads">Threads to use.</param>
    /// <param name="leastRecords">Fewer records than this are not worth a thread.</param>
    /// <param name="cancellationToken">Looked at for each record where the caller's code may be slow.</param>
    public abstract int[]? Choose(int threads, int leastRecords, CancellationToken cancellationToken);
}
