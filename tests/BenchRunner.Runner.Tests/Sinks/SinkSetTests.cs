using BenchRunner.Acceptance.Decisions;
using BenchRunner.Acceptance.Events;
using BenchRunner.Acceptance.Files;
using BenchRunner.Acceptance.Sequences;
using BenchRunner.Runner.Cases;
using BenchRunner.Runner.Devices;
using BenchRunner.Runner.Sinks;
using BenchRunner.Runner.Tests.Workplaces;

namespace BenchRunner.Runner.Tests.Sinks;

public sealed class SinkSetTests
{
    private static readonly BenchEvent Happened =
        new(DateTimeOffset.UnixEpoch, "runner", Severity.Information, "kind", "message");

    private static readonly RunProgress Step = new("W1200-0001", "half", 1, 20, 0, 5, 400, null, TimeSpan.Zero);

    private static readonly CaseResult Case = new(
        "W1200-0001",
        new Limit("eon", null, "half", null, 1, false, new Place("s.yaml", 1, 1)),
        CaseEnding.NotMeasured,
        null,
        null);

    private static readonly DeviceReport Report = new(
        "run", "W1200-0001", new DeviceDecision(Outcome.Accepted, null, []), 0, 0, BenchEnding.Proved, null, null, null);

    public static TheoryData<string> Doors => ["event", "progress", "case", "device"];

    [Theory]
    [MemberData(nameof(Doors))]
    public void A_sink_that_throws_is_heard_no_more_and_the_others_go_on(string door)
    {
        var before = new RecordingSink();
        var broken = new BrokenSink();
        var after = new RecordingSink();
        var all = new SinkSet([before, broken, after]);

        Tell(all, door);
        Tell(all, door);

        Assert.Equal(1, broken.Told);
        Assert.Equal(2, Heard(before));
        Assert.Equal(2, Heard(after));
    }

    [Fact]
    public void A_set_without_sinks_takes_everything() =>
        Assert.All(Doors, door => Tell(new SinkSet([]), door.Data));

    [Fact]
    public void Sinks_hear_one_thing_at_a_time_whoever_speaks()
    {
        var narrow = new OneAtATime();
        var all = new SinkSet([narrow]);

        Parallel.For(0, 1000, _ => all.Receive(Happened));

        Assert.Equal(1000, narrow.Told);
        Assert.False(narrow.WasCrowded);
    }

    private static void Tell(SinkSet sinks, string door)
    {
        switch (door)
        {
            case "event":
                sinks.Receive(Happened);
                break;
            case "progress":
                sinks.Progress(Step);
                break;
            case "case":
                sinks.CaseEnded(Case);
                break;
            default:
                sinks.DeviceEnded(Report);
                break;
        }
    }

    private static int Heard(RecordingSink sink) =>
        sink.Events.Count + sink.Steps.Count + sink.Cases.Count + sink.Devices.Count;

    private sealed class BrokenSink : IRunSink
    {
        public int Told { get; private set; }

        public void Receive(BenchEvent happened) => Break();

        public void Progress(RunProgress progress) => Break();

        public void CaseEnded(CaseResult result) => Break();

        public void DeviceEnded(DeviceReport report) => Break();

        private void Break()
        {
            Told++;
            throw new IOException("the pipe is broken");
        }
    }

    private sealed class OneAtATime : IRunSink
    {
        private int _inside;

        public int Told { get; private set; }

        public bool WasCrowded { get; private set; }

        public void Receive(BenchEvent happened)
        {
            WasCrowded |= Interlocked.Increment(ref _inside) > 1;
            Told++;
            Interlocked.Decrement(ref _inside);
        }

        public void Progress(RunProgress progress)
        {
        }

        public void CaseEnded(CaseResult result)
        {
        }

        public void DeviceEnded(DeviceReport report)
        {
        }
    }
}
