using BenchmarkDotNet.Attributes;
using Uncertain.Benchmarks.Baselines;

namespace Uncertain.Benchmarks;

/// <summary>The same gates in 8192 worlds: by hand on ready bits, by the library on ready bits, and with the bits drawn.</summary>
public class SamplingBenchmark
{
    private const int Worlds = 8192;

    private GateInstance _instance = null!;
    private ReadyBits _byHand = null!;

    /// <summary>Operands of gates for each variable.</summary>
    [Params(10, 85)]
    public int Operands { get; set; }

    [GlobalSetup]
    public void Setup()
    {
        _instance = new GateInstance(Operands);
        _byHand = _instance.ByHand(words: 32);
    }

    [Benchmark(Baseline = true)]
    public void ByHand()
    {
        for (int world = 0; world < Worlds; world += 64 * 32)
        {
            _byHand.Run();
        }
    }

    [Benchmark]
    public void Gates() => _instance.Gates(Worlds);

    [Benchmark]
    public void DrawsAndGates() => _instance.Worlds(Worlds);
}
