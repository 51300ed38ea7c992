namespace EndToEnd;

/// <summary>A whole run over HiSLIP, and what a second controller's lock does to one (IVI-6.1, 6.5).</summary>
public sealed class HislipRunTests : IDisposable
{
    private readonly Workplace _place = new();

    public void Dispose() => _place.Dispose();

    [Fact]
    public async Task A_whole_run_goes_over_HiSLIP()
    {
        using HislipBench bench = await HislipBench.Start(_place);
        Finished ended = (await Run(bench.File)).Expect(0);
        Assert.Contains("ACCEPTED", ended.Output, StringComparison.Ordinal);
        Assert.Equal(10, _place.Ask<long>("select captures_valid from device_outcomes"));
        Assert.Equal(
            0, _place.Ask<long>("select count(*) from events where kind in ('link-doubt', 'link-broken')"));
    }

    [Fact]
    public async Task An_instrument_that_another_controller_has_locked_is_not_used_until_it_is_free()
    {
        using HislipBench bench = await HislipBench.Start(_place);
        await bench.LockSupply();
        Finished refused = (await Run(bench.File)).Expect(5);
        Assert.Contains("locked by another controller", refused.All, StringComparison.Ordinal);
        Assert.Contains("nothing was energised", refused.All, StringComparison.Ordinal);
    }

    private Task<Finished> Run(string bench) => _place.Run(
        "run", Workplace.Sequence, "--bench", bench, "--operator", "A", "--armed-by", "A", "--device", "W1200-0001",
        "--evidence", _place.Evidence);
}
