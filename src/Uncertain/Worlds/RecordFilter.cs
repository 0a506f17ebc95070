namespace Uncertain.Worlds;

/// <summary>The records of a source that are in some world and satisfy conditions.</summary>
internal abstract class RecordFilter
{
    /// <summary>Whether it is known that every record passes, so that there is nothing to choose.</summary>
    public abstract bool PassesAll { get; }

    /// <summary>Finds the records that pass.</summary>
    /// <param name="chosen">Takes their numbers, in order; as long as the source.</param>
    /// <param name="threads">Threads to use.</param>
    /// <param name="leastRecords">Fewer records than this are not worth a thread.</param>
    /// <param name="cancellationToken">Looked at for each record where the caller's code may be slow.</param>
    /// <returns>How many pass.</returns>
    public abstract int Choose(int[] chosen, int threads, int leastRecords, CancellationToken cancellationToken);
}
