using BenchRunner.Acceptance.Events;
using BenchRunner.Acceptance.Files;
using BenchRunner.Acceptance.Validity;

namespace BenchRunner.Runner.Points;

/// <summary>Says what became of a capture, a line a finding.</summary>
internal static class CaptureWords
{
    /// <summary>Says it.</summary>
    /// <param name="events">Where.</param>
    /// <param name="capture">The capture in words.</param>
    /// <param name="verdict">What validity says.</param>
    /// <param name="offCurrent">Load current at the first turn-off, A; null where none was found.</param>
    public static void Say(EventSource events, string capture, Verdict verdict, double? offCurrent)
    {
        string current = offCurrent is { } amperes ? SiText.Format(amperes, "A") : "no current";
        string label = $"{capture}: {current}";
        if (verdict.Findings.Count == 0)
        {
            events.Say(Severity.Information, "capture-valid", $"{label}, valid");
        }

        foreach (Finding finding in verdict.Findings)
        {
            (Severity severity, string kind) = finding.Class switch
            {
                FindingClass.Warn => (Severity.Warning, "capture-warning"),
                FindingClass.Retry => (Severity.Warning, "capture-rejected"),
                _ => (Severity.Error, "capture-stops"),
            };
            events.Say(severity, kind, $"{label}, {finding.Criterion}: {finding.Message}");
        }
    }
}
