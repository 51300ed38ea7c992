namespace EndToEnd;

/// <summary>A part in the high place whose partner in the low place is a companion, as shipped.</summary>
public sealed class CompanionTests : IDisposable
{
    private readonly Workplace _place = new();

    public void Dispose() => _place.Dispose();

    [Fact]
    [Trait("kind", "slow")]
    public async Task A_companion_s_captures_are_counted_over_its_devices()
    {
        string[] run =
        [
            "run", Workplace.Repository("sequences", "winch-drive-high.yaml"), "--bench",
            Workplace.Repository("sequences", "benches", "negative-load.yaml"), "--companion", "W1200-0099",
        ];
        Finished both = (await _place.Run([.. run, "--device", "W1200-0001", "--device", "W1200-0002"])).Expect(0);
        Finished asked = (await _place.Run(
            "query", "companions", "--companion", "W1200-0099", "--evidence", _place.Evidence, "--json")).Expect(0);

        Assert.Contains("through the high place", both.Output, StringComparison.Ordinal);
        long measured = _place.Ask<long>("select sum(captures_taken) from device_outcomes");
        Assert.InRange(measured, 20, 80);
        object[] counted = Assert.Single(_place.Rows(
            "select runs, captures_taken, proving_captures from companions where companion = 'W1200-0099'"));
        Assert.Equal([2L, measured, 4L], counted);
        Assert.Contains($"{measured}", asked.Output, StringComparison.Ordinal);
        Assert.Equal(
            0, _place.Ask<long>(
                "select count(*) from captures where operating_point like 'proving%' and not valid"));
    }

    [Fact]
    public async Task The_companion_itself_gets_no_run()
    {
        Finished refused = (await _place.Run(
            "run", Workplace.Repository("sequences", "winch-drive-high.yaml"), "--bench",
            Workplace.Repository("sequences", "benches", "negative-load.yaml"), "--companion", "W1200-0001",
            "--device", "W1200-0001")).Expect(2);

        Assert.Contains("a part cannot be in both places", refused.Error, StringComparison.Ordinal);
    }
}
