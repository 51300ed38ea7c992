using BenchRunner.Evidence.Audits;

namespace EndToEnd;

/// <summary>The shipped sequence for the high place on its bench: the high switch fires, a companion freewheels.</summary>
[Trait("kind", "slow")]
public sealed class HighPlaceTests : IDisposable
{
    private readonly Workplace _place = new();

    public void Dispose() => _place.Dispose();

    [Fact]
    public async Task A_sound_device_is_accepted_and_its_companion_is_counted()
    {
        Finished run = await Run("W1200-0101", "W1200-0500");

        run.Expect(0);
        Assert.Equal("accepted high W1200-0500", Ask("outcome || ' ' || position || ' ' || companion"));
        Assert.Contains("leak through the high place", run.Output, StringComparison.Ordinal);
        Assert.DoesNotContain("leak through the low place", run.Output, StringComparison.Ordinal);
        Assert.Equal(
            "10 10", _place.Ask<string>(
                "select count(*) || ' ' || sum(channels like '%id_high%') from captures where operating_point in "
                    + "('half', 'rated')"));
    }

    [Theory]
    // By `FakeBench devices`: leaky, shorted, open. What is changed there is the place that the device fills.
    [InlineData("W1200-9005", "the high place leaks")]
    [InlineData("W1200-9009", "a position is shorted")]
    [InlineData("W1200-9011", "desaturated: vds_high")]
    public async Task A_bad_device_is_rejected_by_what_its_place_shows(string device, string reason)
    {
        (await Run(device, "W1200-0500")).Expect(1);

        Assert.Equal("rejected 0", Ask("outcome || ' ' || captures_taken"));
        Assert.Contains(reason, Ask("reason"), StringComparison.Ordinal);
        Assert.Equal(0, _place.Ask<long>("select count(*) from events where kind = 'trip'"));
        Assert.Empty(EvidenceAudit.Verify(_place.Evidence, cancel: TestContext.Current.CancellationToken).Problems);
    }

    [Theory]
    // The same parts as companions: the device under test is not to blame.
    [InlineData("W1200-9009", "or the other place conducts")]
    [InlineData("W1200-9012", "the freewheeling place does not conduct")]
    public async Task A_bad_companion_stops_the_session_and_rejects_no_device(string companion, string reason)
    {
        (await Run("W1200-0101", companion)).Expect(4);

        Assert.Equal("stopped 0", Ask("outcome || ' ' || captures_taken"));
        Assert.Contains(reason, Ask("reason"), StringComparison.Ordinal);
        Assert.Empty(EvidenceAudit.Verify(_place.Evidence, cancel: TestContext.Current.CancellationToken).Problems);
    }

    private static string Sequence { get; } = Workplace.Repository("sequences", "winch-drive-high.yaml");

    private static string Bench { get; } = Workplace.Repository("sequences", "benches", "negative-load.yaml");

    private Task<Finished> Run(string device, string companion) =>
        _place.Run("run", Sequence, "--bench", Bench, "--device", device, "--companion", companion);

    private string Ask(string columns) => _place.Ask<string>($"select {columns} from device_outcomes");
}
