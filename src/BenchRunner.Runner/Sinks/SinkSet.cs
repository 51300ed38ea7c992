using BenchRunner.Acceptance.Events;
using BenchRunner.Runner.Cases;
using BenchRunner.Runner.Devices;

namespace BenchRunner.Runner.Sinks;

/// <summary>Several sinks as one. A sink that throws is heard no more; the run goes on.</summary>
public sealed class SinkSet(IEnumerable<IRunSink> sinks) : IRunSink
{
    private readonly Lock _gate = new();
    private readonly List<IRunSink> _sinks = [.. sinks];

    /// <inheritdoc/>
    public void Receive(BenchEvent happened) => Tell(sink => sink.Receive(happened));

    /// <inheritdoc/>
    public void Progress(RunProgress progress) => Tell(sink => sink.Progress(progress));

    /// <inheritdoc/>
    public void CaseEnded(CaseResult result) => Tell(sink => sink.CaseEnded(result));

    /// <inheritdoc/>
    public void DeviceEnded(DeviceReport report) => Tell(sink => sink.DeviceEnded(report));

    private void Tell(Action<IRunSink> what)
    {
        // The watch and the runner speak from tasks of their own; a sink hears one at a time.
        lock (_gate)
        {
            for (int i = _sinks.Count - 1; i >= 0; i--)
            {
                try
                {
                    what(_sinks[i]);
                }
                catch (Exception)
                {
                    _sinks.RemoveAt(i);
                }
            }
        }
    }
}
