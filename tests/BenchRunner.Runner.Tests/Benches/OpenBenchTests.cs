using BenchRunner.Acceptance.Benches;
using BenchRunner.Instruments.Roles;
using BenchRunner.Runner.Benches;
using BenchRunner.Runner.Tests.Workplaces;

namespace BenchRunner.Runner.Tests.Benches;

public sealed class OpenBenchTests : IDisposable
{
    private readonly Workplace _place = new();

    private static CancellationToken Cancel => TestContext.Current.CancellationToken;

    public void Dispose() => _place.Dispose();

    [Fact]
    public async Task Every_instrument_says_what_it_is_and_that_it_is_simulated()
    {
        Bench bench = _place.Bench();
        await using FakeBenchProcess fake = await Start(bench);
        await using OpenBench open = await Open(bench, fake.Links);

        Assert.All(
            (string[])["supply", "pulser", "scope", "voltmeter", "interlock"],
            role => Assert.Contains(
                $"FAKEBENCH-{role.ToUpperInvariant()}", open.Identities[role].Text, StringComparison.Ordinal));
        Assert.True(open.IsSimulated);
    }

    [Fact]
    public async Task Safety_has_connections_of_its_own_where_the_instrument_serves_more_than_one()
    {
        Bench bench =
            _place.Bench(("dialect: generic-pulser, connections: 3", "dialect: generic-pulser, connections: 1"));
        await using FakeBenchProcess fake = await Start(bench);
        await using OpenBench open = await Open(bench, fake.Links);

        Assert.NotSame(open.Supply, open.Safety.Supply);
        Assert.NotSame(open.Voltmeter, open.Safety.Voltmeter);
        Assert.Same(open.Pulser, open.Safety.Pulser);
    }

    [Fact]
    public async Task A_wrong_identity_is_refused_with_the_place_that_asks_for_another()
    {
        Bench bench = _place.Bench(("'.*FAKEBENCH-SCOPE.*'", "'.*OTHER-SCOPE.*'"));
        int line = 1 + Array.FindIndex(
            File.ReadAllLines(_place.BenchFile), text => text.Contains("OTHER-SCOPE", StringComparison.Ordinal));
        await using FakeBenchProcess fake = await Start(bench);

        var refused = await Assert.ThrowsAsync<BenchException>(() => Open(bench, fake.Links));

        Assert.StartsWith($"{_place.BenchFile}:{line}:", refused.Message, StringComparison.Ordinal);
        Assert.Contains("FAKEBENCH-SCOPE", refused.Message, StringComparison.Ordinal);
        Assert.Contains(".*OTHER-SCOPE.*", refused.Message, StringComparison.Ordinal);
    }

    [Fact]
    public async Task An_identity_must_match_as_a_whole()
    {
        Bench bench = _place.Bench(("'.*FAKEBENCH-SCOPE.*'", "'FAKEBENCH-SCOPE'"));
        await using FakeBenchProcess fake = await Start(bench);

        await Assert.ThrowsAsync<BenchException>(() => Open(bench, fake.Links));
    }

    [Fact]
    public async Task A_real_instrument_among_simulated_ones_is_refused()
    {
        Bench bench = _place.Bench(("'.*FAKEBENCH-VOLTMETER.*'", "'.*VOLTMETER.*'"));
        await using FakeBenchProcess fake = await Start(bench);
        using var real = new Disguise(fake.Links["voltmeter"]);

        var refused = await Assert.ThrowsAsync<BenchException>(
            () => Open(bench, new Dictionary<string, string>(fake.Links) { ["voltmeter"] = real.Link }));

        Assert.Contains(
            "scope, interlock are simulated, voltmeter are not", refused.Message, StringComparison.Ordinal);
    }

    [Fact]
    public async Task An_instrument_that_is_not_there_is_named()
    {
        Bench bench = _place.Bench();
        await using FakeBenchProcess fake = await Start(bench);
        var nowhere = new Dictionary<string, string>(fake.Links) { ["scope"] = "tcp 127.0.0.1 1" };
        var without = new Dictionary<string, string>(fake.Links);
        without.Remove("scope");

        var unreachable = await Assert.ThrowsAsync<BenchException>(() => Open(bench, nowhere));
        var missing = await Assert.ThrowsAsync<BenchException>(() => Open(bench, without));

        Assert.StartsWith("scope: tcp 127.0.0.1 1", unreachable.Message, StringComparison.Ordinal);
        Assert.Contains("no scope", missing.Message, StringComparison.Ordinal);
    }

    private static Task<FakeBenchProcess> Start(Bench bench) =>
        FakeBenchProcess.Start(bench, Workplace.Device, null, TimeProvider.System, Cancel);

    private static Task<OpenBench> Open(Bench bench, IReadOnlyDictionary<string, string> links) =>
        OpenBench.Open(
            bench, Workplace.Dialects(bench), links, new RecordingSink(), InstrumentConnection.Wire, TimeProvider.System,
            Cancel);
}
