using System.Globalization;
using System.Text.RegularExpressions;
using BenchRunner.Acceptance.Events;
using BenchRunner.Runner.Cases;
using BenchRunner.Runner.Devices;
using BenchRunner.Runner.Sinks;
using BenchRunner.Soak.Simulated;

namespace BenchRunner.Soak.Mixes;

/// <summary>Writes down what a run says, without what no seed decides: identities of runs, names of folders.</summary>
internal sealed partial class Recorder(VirtualTime time, string folder) : IRunSink
{
    private readonly List<string> _lines = [];

    /// <summary>What was said, with its simulated time.</summary>
    public IReadOnlyList<string> Lines => _lines;

    /// <summary>The events.</summary>
    public List<BenchEvent> Events { get; } = [];

    /// <summary>The devices that ended.</summary>
    public List<DeviceReport> Reports { get; } = [];

    /// <inheritdoc/>
    public void Receive(BenchEvent happened)
    {
        Events.Add(happened);
        Note($"{happened.Source} {happened.Severity} {happened.Kind}: {happened.Message}");
    }

    /// <inheritdoc/>
    public void Progress(RunProgress progress)
    {
    }

    /// <inheritdoc/>
    public void CaseEnded(CaseResult result) => Note($"{result.Limit.Quantity} at {result.Limit.At}: {result.Ending}");

    /// <inheritdoc/>
    public void DeviceEnded(DeviceReport report)
    {
        Reports.Add(report);
        Note($"{report.Device}: {report.Decision.Outcome}, {report.Ending}, {report.Decision.Reason}");
    }

    /// <summary>Takes a line of the trial's own.</summary>
    public void Note(string what) => _lines.Add(
        string.Create(CultureInfo.InvariantCulture, $"{time.Now.TotalSeconds:0.000000} ")
            + Identity().Replace(what, "IDENTITY").Replace(folder, "FOLDER", StringComparison.Ordinal));

    [GeneratedRegex("[0-9a-f]{8}-[0-9a-f]{4}-[0-9a-f]{4}-[0-9a-f]{4}-[0-9a-f]{12}")]
    private static partial Regex Identity();
}
