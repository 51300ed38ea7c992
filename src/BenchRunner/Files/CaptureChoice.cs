using System.Globalization;
using BenchRunner.Acceptance.Sequences;
using BenchRunner.Evidence.Captures;

namespace BenchRunner.Files;

/// <summary>Which stored captures a user means.</summary>
/// <param name="Device">Serial of the device.</param>
/// <param name="Number">Number of the capture, as the view <c>captures</c> has it.</param>
/// <param name="Run">Identity of the run; null: the device's newest one that has such a capture.</param>
/// <param name="OperatingPoint">The operating point; null: each one of the run's sequence.</param>
internal sealed record CaptureChoice(string Device, int Number, string? Run, string? OperatingPoint)
{
    private const int MostShown = 12;

    /// <summary>Reads what the command line says.</summary>
    /// <exception cref="InputException">Device or number is missing, or the number is none.</exception>
    public static CaptureChoice Of(string? device, string? number, string? run, string? operatingPoint)
    {
        if (device is null || number is null)
        {
            throw new InputException(
                "name waveform files, or a stored capture by --device and --capture; "
                    + "'benchrunner analyse --help' shows both");
        }

        return int.TryParse(number, NumberStyles.None, CultureInfo.InvariantCulture, out int found) && found > 0
            ? new CaptureChoice(device, found, run, operatingPoint)
            : throw new InputException(
                $"--capture: '{number}'; expected a whole number from 1, as the view captures has it; "
                    + "ask for instance: benchrunner query --sql \"select * from captures\"");
    }

    /// <summary>Finds the captures.</summary>
    /// <param name="evidence">The evidence.</param>
    /// <param name="file">Its file, for messages.</param>
    /// <param name="note">Receives what was chosen among several runs; null where there was no choice.</param>
    /// <returns>At least one; several where the number is held at several operating points.</returns>
    /// <exception cref="InputException">There is none; the message lists what there is.</exception>
    public IReadOnlyList<FoundCapture> Find(EvidenceReader evidence, string file, out string? note)
    {
        note = null;
        IReadOnlyList<FoundCapture> all = evidence.CapturesOf(Device);
        if (all.Count == 0)
        {
            throw new InputException(
                $"{file}: no capture of '{Device}'; expected one of {List(evidence.Devices(MostShown + 1))}; "
                    + "correct --device or name another file by --evidence");
        }

        FoundCapture[] ofRun = [.. all.Where(one => Run is null || one.Run == Run)];
        if (ofRun.Length == 0)
        {
            throw new InputException(
                $"{file}: {Device} has no run '{Run}'; expected one of {List(all.Select(one => one.Run))}; "
                    + "correct --run or leave it out");
        }

        FoundCapture[] numbered =
        [
            .. ofRun.Where(
                one => one.Number == Number && (OperatingPoint is null || one.OperatingPoint == OperatingPoint)),
        ];
        if (numbered.Length == 0)
        {
            string at = OperatingPoint is null ? "" : $" at '{OperatingPoint}'";
            throw new InputException(
                $"{file}: {Device} has no capture {Number}{at}; expected one of {There(ofRun)}; "
                    + "correct --capture or --operating-point");
        }

        FoundCapture[] newest = [.. numbered.Where(one => one.Run == numbered[^1].Run)];
        string[] others = [.. numbered.Select(one => one.Run).Distinct().Where(run => run != newest[0].Run)];
        note = others.Length == 0
            ? null
            : $"capture {Number} of {Device} is in {others.Length + 1} runs; this is the newest, {newest[0].Run} of "
                + $"{newest[0].StartedAt}; --run takes another: {List(others)}";
        FoundCapture[] counted = [.. newest.Where(one => !UncountedPoints.Has(one.OperatingPoint))];
        return counted.Length > 0 ? counted : newest;
    }

    private static string There(IEnumerable<FoundCapture> captures) => string.Join("; ", captures
        .GroupBy(one => (one.Run, one.OperatingPoint))
        .Select(point =>
        {
            (int first, int last) = (point.Min(one => one.Number), point.Max(one => one.Number));
            return $"{point.Key.OperatingPoint} {first}" + (last > first ? $" to {last}" : "");
        })
        .Distinct()
        .Take(MostShown));

    private static string List(IEnumerable<string> names)
    {
        string[] distinct = [.. names.Distinct().Take(MostShown + 1)];
        return string.Join(", ", distinct.Take(MostShown)) + (distinct.Length > MostShown ? ", …" : "");
    }
}
