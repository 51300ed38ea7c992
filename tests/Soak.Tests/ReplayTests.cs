using BenchRunner.Soak.Mixes;

namespace BenchRunner.Soak.Tests;

/// <summary>A seed replays: the same log, byte for byte.</summary>
public sealed class ReplayTests : IDisposable
{
    private readonly Trials _trials = new();

    public void Dispose() => _trials.Dispose();

    [Theory]
    [InlineData(3ul)]
    [InlineData(362ul)]
    public void A_seed_gives_the_same_log_each_time(ulong seed)
    {
        Judged one = _trials.OfSeed(seed), other = _trials.OfSeed(seed);

        Assert.NotEmpty(one.Log);
        Assert.Equal(one.Log, other.Log);
        Assert.Equal(one.Mix.ToString(), other.Mix.ToString());
        Assert.Empty(one.Wrong);
    }
}
