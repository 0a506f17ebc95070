using Uncertain.Inference.Sampling;

namespace Uncertain.Tests.Sampling;

public class AliasTableTests
{
    [Fact]
    public void Pick_AllWords_HaveTheWeights()
    {
        // 2^16 evenly spaced words stand for all: each number's part is right to its two ends in each column.
        double[] weights = [0.5, 1e-9, 3, 0, 1.25, 7, 0.001];
        var table = new AliasTable(weights);
        const int words = 1 << 16;
        var counts = new int[weights.Length];
        for (ulong i = 0; i < words; i++)
        {
            counts[table.Pick((i << 48) + (1UL << 47))]++;
        }

        for (int i = 0; i < weights.Length; i++)
        {
            Assert.Equal(weights[i] / weights.Sum(), counts[i] / (double)words, (weights.Length + 1.0) / words);
        }

        Assert.Equal(0, counts[3]);
    }
}
