namespace EndToEnd;

/// <summary>Sound devices, drawn at random, pass the shipped sequence.</summary>
public sealed class PopulationTests : IDisposable
{
    private readonly Workplace _place = new Workplace().WithPatience(TimeSpan.FromMinutes(8));

    public void Dispose() => _place.Dispose();

    [Fact]
    [Trait("kind", "slow")]
    public async Task At_least_18_of_20_devices_drawn_at_random_are_accepted()
    {
        int seed = Environment.TickCount;
        TestContext.Current.SendDiagnosticMessage($"seed {seed}");
        var random = new Random(seed);
        string[] devices =
        [
            .. Enumerable.Range(0, 8000).OrderBy(_ => random.Next()).Take(20)
                .SelectMany(number => (string[])["--device", $"W1200-{number:0000}"]),
        ];

        Finished run = await _place.Run(["run", Workplace.Sequence, .. devices]);

        Assert.True(
            _place.Ask<long>("select count(*) from device_outcomes where outcome = "
                + "'accepted'") >= 18, $"seed {seed}\n{run.All}");
        Assert.Equal(20, _place.Ask<long>("select count(*) from device_outcomes where outcome in ('accepted', "
            + "'undecided', 'rejected')"));
    }
}
