using System.Text.Json;
using BenchRunner.Acceptance.Benches;
using BenchRunner.Acceptance.Files;
using BenchRunner.Acceptance.Plans;
using BenchRunner.Acceptance.Sequences;
using BenchRunner.Acceptance.Validity;
using BenchRunner.Evidence.Captures;
using BenchRunner.Signals.Analysis;
using BenchRunner.Signals.Traces;

namespace BenchRunner.Files;

/// <summary>Analyses captures that the evidence holds, as the run that took them did.</summary>
/// <param name="evidence">The evidence.</param>
/// <param name="file">Its file, for messages.</param>
internal sealed class StoredAnalysis(EvidenceReader evidence, string file)
{
    /// <summary>What the run's analysis took as given: its stored bench and sequence, and the offsets that its zero
    /// capture found.</summary>
    /// <exception cref="InputException">The stored files cannot be read by this program.</exception>
    public AnalysisSettings SettingsOf(string run)
    {
        IReadOnlyList<SourceFile> files = evidence.Files(run);
        Sequence sequence = Value(SequenceFile.Read(One(files, "sequence", run)), run);
        Bench bench = Value(BenchFile.Read(One(files, "bench", run)), run);
        AnalysisSettings stated = Planner.AnalysisSettingsOf(bench, sequence);
        StoredCapture? zero = evidence.Captures(run).FirstOrDefault(one => one.OperatingPoint == UncountedPoints.Zero);
        // A run without a readable zero took what the bench file states.
        return zero?.BusVoltage is { } bank
            ? ZeroReading.Of(evidence.ReadTraces(zero.Id), bench, sequence, bank).ApplyTo(stated)
            : stated;
    }

    /// <summary>Analyses one capture.</summary>
    /// <param name="device">Serial of its device.</param>
    /// <param name="found">The capture.</param>
    /// <param name="settings">What is taken as given.</param>
    /// <param name="asStored">Whether that is what the run took, so that the stored verdict speaks of these
    /// values.</param>
    /// <exception cref="InputException">Its traces do not fit together.</exception>
    public AnalysedFile Analyse(string device, FoundCapture found, AnalysisSettings settings, bool asStored)
    {
        IReadOnlyList<RawTrace> traces = evidence.ReadTraces(found.Id);
        Waveform waveform;
        try
        {
            waveform = TraceConversion.ToWaveform(traces);
        }
        catch (ArgumentException error)
        {
            throw new InputException(
                $"{file}: {found.OperatingPoint}, capture {found.Number}: its traces are no waveform: "
                    + $"{error.Message} Name another capture");
        }

        AnalysisResult result = WaveformAnalysis.Analyse(waveform, settings);
        return new AnalysedFile(
            file, found.Sha256, waveform, settings, result,
            asStored ? Stored(found) : WaveformFindings.Judge(waveform, result, settings))
        {
            Capture = new CaptureName(device, found.Run, found.OperatingPoint, found.Number),
            Rails = traces.ToDictionary(trace => trace.Channel, Rails),
        };
    }

    /// <summary>The newest verdict of the run; without one no criterion was evaluated.</summary>
    private static Verdict Stored(FoundCapture found) => new(
        found.Findings is { } findings ? Findings(findings) : [],
        found.NotEvaluated is { } names
            ? JsonSerializer.Deserialize<string[]>(names)!
            : [.. Criteria.All.Select(criterion => criterion.Name)],
        null,
        new Dictionary<Channel, bool>());

    private static List<Finding> Findings(string json)
    {
        using JsonDocument document = JsonDocument.Parse(json);
        return [.. document.RootElement.EnumerateArray().Select(one => new Finding(
            one.GetProperty("criterion").GetString()!,
            Enum.Parse<FindingClass>(one.GetProperty("class").GetString()!, ignoreCase: true),
            one.GetProperty("channel").GetString() is { } name ? ChannelNames.Parse(name) : null,
            Number(one, "seen"),
            Number(one, "bound"),
            Number(one, "at"),
            one.GetProperty("message").GetString()!))];
    }

    private static double? Number(JsonElement finding, string name) =>
        finding.GetProperty(name) is { ValueKind: JsonValueKind.Number } number ? number.GetDouble() : null;

    private static (double Low, double High) Rails(RawTrace trace)
    {
        (double one, double other) = (trace.Value(trace.LowRail), trace.Value(trace.HighRail));
        return (Math.Min(one, other), Math.Max(one, other));
    }

    private SourceFile One(IReadOnlyList<SourceFile> files, string role, string run) =>
        files.FirstOrDefault(one => one.Role == role)
        ?? throw new InputException($"{file}: run {run} has no stored {role}; say what is known by --settings");

    private T Value<T>(Read<T> read, string run)
        where T : class =>
        read.Value ?? throw new InputException(
            $"{file}: the files stored with run {run} are not readable here; say what is known by --settings"
                + Environment.NewLine + string.Join(Environment.NewLine, read.Problems));
}
