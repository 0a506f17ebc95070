using System.Runtime.CompilerServices;

namespace Uncertain.Tests.Worlds;

public sealed class AsyncSourceTests
{
    private readonly WorldSpace _worlds = new();
    private readonly List<Reading> _readings = [new("S1", "L7", 0.5), new("S1", "L1", 0.25), new("S2", "L7", 0.125)];

    [Fact]
    public async Task AsyncSources_SameRecords_EqualTheSynchronousOnes()
    {
        UncertainSet<Reading> certain = await _worlds.CertainAsync(_readings.ToAsyncEnumerable());
        UncertainSet<Reading> independent = await _worlds.IndependentAsync(_readings.ToAsyncEnumerable(), reading => reading.Chance);
        UncertainSet<Reading> alternatives = await _worlds.AlternativesAsync(
            _readings.ToAsyncEnumerable(), reading => reading.Slip, reading => reading.Chance);

        Assert.Equal(_readings, certain.Derive().Select(record => record.Value));
        Assert.Equal([0.5, 0.25, 0.125], independent.Derive().Select(record => record.Lineage.Variable.ChanceOf(0)));
        Assert.Equal([0, 1, 0], alternatives.Derive().Select(record => record.Lineage.Outcome));
        Assert.Equal(5, _worlds.VariableCount);
    }

    [Fact]
    public async Task IndependentAsync_Cancelled_AddsNothing()
    {
        using var cancellation = new CancellationTokenSource();

        OperationCanceledException exception = await Assert.ThrowsAnyAsync<OperationCanceledException>(
            () => _worlds.IndependentAsync(
                CancelAfterFirst(cancellation), reading => reading.Chance, cancellationToken: cancellation.Token));

        Assert.Equal(cancellation.Token, exception.CancellationToken);
        Assert.Equal(0, _worlds.VariableCount);
    }

    [Fact]
    public async Task IndependentAsync_SequenceThrows_AddsNothing()
    {
        await Assert.ThrowsAsync<IOException>(() => _worlds.IndependentAsync(Failing(), reading => reading.Chance));

        Assert.Equal(0, _worlds.VariableCount);
    }

    private async IAsyncEnumerable<Reading> CancelAfterFirst(
        CancellationTokenSource source, [EnumeratorCancellation] CancellationToken cancellationToken = default)
    {
        yield return _readings[0];
        await source.CancelAsync();
        yield return _readings[1];
        cancellationToken.ThrowIfCancellationRequested();
    }

    private async IAsyncEnumerable<Reading> Failing()
    {
        yield return _readings[0];
        await Task.Yield();
        throw new IOException("The feed broke off.");
    }
}
