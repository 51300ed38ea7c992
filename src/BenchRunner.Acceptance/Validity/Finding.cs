using BenchRunner.Signals.Traces;

namespace BenchRunner.Acceptance.Validity;

/// <summary>Why a capture is not as it must be.</summary>
/// <param name="Criterion">The criterion, e.g. <c>current-within</c>.</param>
/// <param name="Class">What it does.</param>
/// <param name="Channel">The channel, where one is to blame.</param>
/// <param name="Seen">The value seen, SI; null where there is none.</param>
/// <param name="Bound">The bound, SI; null where there is none.</param>
/// <param name="At">Time in the capture, s; null where there is none.</param>
/// <param name="Message">The finding in words, with units.</param>
public sealed record Finding(
    string Criterion, FindingClass Class, Channel? Channel, double? Seen, double? Bound, double? At, string Message);
