using Uncertain.Lineages;
using Uncertain.Tests.Execution;

namespace Uncertain.Tests.Lineages;

/// <summary>What nodes and variables cost: bytes as counted by the arena and as allocated by the runtime.</summary>
[Collection(nameof(QuietCollection))]
public sealed class LineageArenaMemoryTests
{
    private const int Million = 1_000_000;

    [Fact]
    public void Bytes_ManyBinaryNodes_AreAtMostSixteenEach()
    {
        var worlds = new WorldSpace();
        LineageRef[] literals = Literals(worlds, 3000);
        var arena = new LineageArena(worlds);
        var whenFull = new List<double>();
        for (int i = 0; arena.Count <= 2 * Million; i++)
        {
            for (int j = i + 1; j < literals.Length && arena.Count <= 2 * Million; j++)
            {
                (long bytes, int count) = (arena.Bytes, arena.Count);
                arena.And(literals[i], literals[j]);

                // The array of nodes grows by half, 4 bytes a node; the hash table by 2.5. Just before, no node's place was spare.
                if (arena.Bytes - bytes >= 3.5 * count && count > 1000)
                {
                    whenFull.Add((double)bytes / count);
                }
            }
        }

        Assert.True(whenFull.Count >= 10, $"The arena grew {whenFull.Count} times only.");
        Assert.All(whenFull, used => Assert.InRange(used, 8, 16));
    }

    [Fact]
    public void And_ManyNodes_AllocatesNoObjectForEach()
    {
        var worlds = new WorldSpace();
        LineageRef[] literals = Literals(worlds, 3000);
        var arena = new LineageArena(worlds);
        long before = GC.GetAllocatedBytesForCurrentThread();

        for (int i = 0; arena.Count <= Million; i++)
        {
            for (int j = i + 1; j < literals.Length && arena.Count <= Million; j++)
            {
                arena.And(literals[i], literals[j]);
            }
        }

        // All arrays that ever were while growing by half: at most three times the last ones. An object takes at least 24 bytes.
        double allocated = (double)(GC.GetAllocatedBytesForCurrentThread() - before) / arena.Count;
        double held = (double)arena.Bytes / arena.Count;
        Assert.True(allocated <= 3.1 * held, $"{allocated:0.0} bytes allocated for each node, {held:0.0} held");
    }

    [Fact]
    public void Independent_ManyRecords_TakesSixteenBytesForEachVariable()
    {
        var worlds = new WorldSpace();
        int[] records = [.. Enumerable.Range(0, Million)];
        long before = GC.GetTotalMemory(forceFullCollection: true);

        UncertainSet<int> set = worlds.Independent(records, i => 0.5);

        // 8 for the chance and 8 beside it, and the source's own copy of the record (4) and its lineage (4); half as much spare room.
        long used = GC.GetTotalMemory(forceFullCollection: true) - before;
        GC.KeepAlive(set);
        Assert.Equal(Million, worlds.VariableCount);
        Assert.True(used <= Million * ((16 * 1.5) + 8) * 1.05, $"{(double)used / Million:0.0} bytes a record");
    }

    [Fact]
    public void Certain_ManyRecords_CostNoVariable()
    {
        var worlds = new WorldSpace();
        int[] records = [.. Enumerable.Range(0, Million)];
        long before = GC.GetTotalMemory(forceFullCollection: true);

        UncertainSet<int> set = worlds.Certain(records);

        long used = GC.GetTotalMemory(forceFullCollection: true) - before;
        GC.KeepAlive(set);
        Assert.True(used <= Million * 8 * 1.05, $"{(double)used / Million:0.0} bytes a record");
    }

    private static LineageRef[] Literals(WorldSpace worlds, int count) =>
        [.. worlds.Independent(Enumerable.Range(0, count), i => 0.5).Derive().Select(record => record.Lineage.Ref)];
}
