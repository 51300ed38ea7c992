using BenchRunner.Acceptance.Benches;
using BenchRunner.Acceptance.Decisions;
using BenchRunner.Runner.Benches;
using BenchRunner.Runner.Sessions;
using BenchRunner.Runner.Tests.Workplaces;
using BenchRunner.Safety;
using BenchRunner.Safety.Latches;

namespace BenchRunner.Runner.Tests.Sessions;

/// <summary>Trips while a person exchanges devices.</summary>
public sealed class TripByHandTests : IDisposable
{
    private const string Rest = """
        captures: { valid: 2, at-most: 4 }
        limits:
          - { quantity: eon, at: half, at-most: 1 mJ }
        """;

    private readonly Workplace _place = new();
    private readonly RecordingSink _heard = new();

    private static CancellationToken Cancel => TestContext.Current.CancellationToken;

    public void Dispose() => _place.Dispose();

    [Fact]
    public async Task A_bus_that_rises_while_a_device_is_exchanged_trips_and_the_next_gets_no_run()
    {
        await using FakeBenchProcess instruments = await FakeBenchProcess.Start(
            _place.Bench(), Workplace.Device, null, TimeProvider.System, Cancel);
        Bench bench = _place.OtherBench(instruments.Links, "by-hand");
        var person = new Person("A. Person");

        Task<RunSummary> running = Session(bench, person).Run(new Serials("W1200-0001", "W1200-0002"), Cancel);
        await Eventually.True(() => _heard.Count("exchange") == 1, "a request to exchange");
        await Stranger.Charges(instruments.Links["supply"], 100);
        RunSummary summary = await running;

        Assert.Equal(Outcome.Accepted, Assert.Single(summary.Devices).Decision.Outcome);
        Assert.Equal(["W1200-0002"], summary.NotRun);
        Assert.Contains(
            "the bus rose to", Assert.IsType<SafetyException>(summary.BrokenOff).Message,
            StringComparison.Ordinal);
        Assert.NotNull(new LatchFile(bench.Source.Path).Read());
        Assert.Single(person.Asked);
    }

    private RunSession Session(Bench bench, Person person) =>
        new(_place.Request(_place.Sequence(Rest), bench), _heard, person, TimeProvider.System)
        {
            Guardian = LivingGuardian.Start,
        };
}
