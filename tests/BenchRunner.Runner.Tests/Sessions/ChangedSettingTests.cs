using BenchRunner.Acceptance.Benches;
using BenchRunner.Acceptance.Decisions;
using BenchRunner.Acceptance.Sequences;
using BenchRunner.Runner.Benches;
using BenchRunner.Runner.Devices;
using BenchRunner.Runner.Sessions;
using BenchRunner.Runner.Tests.Workplaces;
using BenchRunner.Safety.Latches;

namespace BenchRunner.Runner.Tests.Sessions;

/// <summary>Somebody turns the scope's attenuation while a device is measured.</summary>
public sealed class ChangedSettingTests : IDisposable
{
    private const string Rest = """
        captures: { valid: 3, at-most: 6 }
        limits:
          - { quantity: eon, at: half, at-most: 1 mJ }
        """;

    private readonly Workplace _place = new();
    private readonly RecordingSink _heard = new();

    private static CancellationToken Cancel => TestContext.Current.CancellationToken;

    public void Dispose() => _place.Dispose();

    [Fact]
    public async Task It_stops_the_device_and_the_next_session_sets_it_anew()
    {
        await using FakeBenchProcess instruments = await FakeBenchProcess.Start(
            _place.Bench(("pace: 5 }", "pace: 5, faults: [probe-factor-changes] }")), Workplace.Device, null,
            TimeProvider.System, Cancel);
        Bench bench = _place.OtherBench(instruments.Links);
        Sequence sequence = _place.Sequence(Rest);

        DeviceReport stopped = await Run(sequence, bench, "W1200-0001");
        new LatchFile(bench.Source.Path).Clear(DateTimeOffset.UnixEpoch, "A. Person", "seen");
        DeviceReport next = await Run(sequence, bench, "W1200-0002");

        Assert.Equal((Outcome.Stopped, BenchEnding.Tripped), (stopped.Decision.Outcome, stopped.Ending));
        Assert.Contains("attenuation of id_low (input 3) is 10", stopped.Decision.Reason, StringComparison.Ordinal);
        Assert.Contains("where 1 was set", stopped.Decision.Reason, StringComparison.Ordinal);
        Assert.Equal((Outcome.Accepted, BenchEnding.Proved), (next.Decision.Outcome, next.Ending));
    }

    private async Task<DeviceReport> Run(Sequence sequence, Bench bench, string device)
    {
        RunSummary summary = await new RunSession(
            _place.Request(sequence, bench), _heard, new Person("A. Person"), TimeProvider.System)
        {
            Guardian = LivingGuardian.Start,
        }
                .Run(new Serials(device), Cancel);
        return Assert.Single(summary.Devices);
    }
}
