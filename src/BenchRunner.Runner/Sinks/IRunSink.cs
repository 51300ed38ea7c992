using BenchRunner.Acceptance.Events;
using BenchRunner.Runner.Cases;
using BenchRunner.Runner.Devices;

namespace BenchRunner.Runner.Sinks;

/// <summary>Somebody who follows a run: console, file, live page. A sink cannot fail a run.</summary>
public interface IRunSink : IEventSink
{
    /// <summary>The run stands here; comes several times a second.</summary>
    void Progress(RunProgress progress);

    /// <summary>A case has ended, in exactly one result.</summary>
    void CaseEnded(CaseResult result);

    /// <summary>A device has ended.</summary>
    void DeviceEnded(DeviceReport report);
}
