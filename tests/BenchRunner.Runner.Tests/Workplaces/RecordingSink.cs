using System.Collections.Concurrent;
using BenchRunner.Acceptance.Events;
using BenchRunner.Instruments.Sessions;
using BenchRunner.Runner.Cases;
using BenchRunner.Runner.Devices;
using BenchRunner.Runner.Sinks;

namespace BenchRunner.Runner.Tests.Workplaces;

/// <summary>A sink that keeps what it hears, in order.</summary>
internal sealed class RecordingSink : IRunSink, IInstrumentLog
{
    private readonly ConcurrentQueue<object> _heard = new();

    public IReadOnlyList<BenchEvent> Events => [.. _heard.OfType<BenchEvent>()];

    public IReadOnlyList<CaseResult> Cases => [.. _heard.OfType<CaseResult>()];

    public IReadOnlyList<DeviceReport> Devices => [.. _heard.OfType<DeviceReport>()];

    public IReadOnlyList<RunProgress> Steps => [.. _heard.OfType<RunProgress>()];

    public int Count(string kind) => Events.Count(happened => happened.Kind == kind);

    public void Receive(BenchEvent happened) => _heard.Enqueue(happened);

    public void Progress(RunProgress progress) => _heard.Enqueue(progress);

    public void CaseEnded(CaseResult result) => _heard.Enqueue(result);

    public void DeviceEnded(DeviceReport report) => _heard.Enqueue(report);

    public void Report(InstrumentEvent what) => _heard.Enqueue(what);
}
