using BenchRunner.Acceptance.Benches;
using BenchRunner.Acceptance.Files;
using BenchRunner.Acceptance.Sequences;

namespace BenchRunner.Acceptance.Decisions;

/// <summary>
/// Decides a device from the valid captures of its operating points. Pure: the run and every rescoring call it.
/// </summary>
public static class Decider
{
    /// <summary>Decides a device.</summary>
    /// <param name="sequence">The sequence: limits and decision rule.</param>
    /// <param name="bench">The bench: channels and stated uncertainties.</param>
    /// <param name="points">What the points gave; a point of the sequence that is not here was not run.</param>
    /// <returns>
    /// Rejected where a limit fails; else not measured where a point has too few valid captures; else undecided where a
    /// limit is; else accepted. A limited quantity without a value is undecided.
    /// </returns>
    public static DeviceDecision Decide(Sequence sequence, Bench bench, IReadOnlyList<PointCaptures> points)
    {
        ArgumentNullException.ThrowIfNull(sequence);
        ArgumentNullException.ThrowIfNull(bench);
        ArgumentNullException.ThrowIfNull(points);
        var values = new List<MeasuredValue>();
        var lacking = new List<string>();
        foreach (OperatingPoint point in sequence.OperatingPoints)
        {
            PointCaptures captures = points.FirstOrDefault(one => one.OperatingPoint == point.Name)
                ?? new PointCaptures(point.Name, 0, [], null);
            values.AddRange(PointValues.Of(sequence, bench, captures));
            if (captures.Valid.Count < sequence.ValidCaptures)
            {
                lacking.Add(captures.Taken == 0
                    ? $"{point.Name} was not run"
                    : $"{point.Name}: {captures.Valid.Count} valid of {captures.Taken} captures, "
                        + $"{sequence.ValidCaptures} wanted");
            }
        }

        MeasuredValue[] failing = [.. values.Where(value => value.Conformity == Conformity.Fails)];
        MeasuredValue[] open = [.. values.Where(value => value.Conformity == Conformity.Undecided)];
        return failing.Length > 0 ? new DeviceDecision(Outcome.Rejected, Listed(failing), values)
            : lacking.Count > 0 ? new DeviceDecision(Outcome.NotMeasured, string.Join("; ", lacking), values)
            : open.Length > 0 ? new DeviceDecision(Outcome.Undecided, Listed(open), values)
            : new DeviceDecision(
                Outcome.Accepted, sequence.Limits.Count == 0 ? "the sequence states no limit" : null, values);
    }

    /// <summary>
    /// Whether every limit of a point is decided, so that <c>until: decided</c> needs no further capture.
    /// </summary>
    /// <param name="sequence">The sequence.</param>
    /// <param name="bench">The bench.</param>
    /// <param name="captures">What the point gave so far.</param>
    public static bool IsEverythingDecided(Sequence sequence, Bench bench, PointCaptures captures)
    {
        ArgumentNullException.ThrowIfNull(sequence);
        ArgumentNullException.ThrowIfNull(bench);
        ArgumentNullException.ThrowIfNull(captures);
        return captures.Valid.Count >= sequence.ValidCaptures
            && PointValues.Of(sequence, bench, captures).All(value => value.Conformity != Conformity.Undecided);
    }

    /// <summary>Whether the points above one are left out because a limit failed there that says so.</summary>
    /// <param name="sequence">The sequence.</param>
    /// <param name="bench">The bench.</param>
    /// <param name="captures">What the point gave.</param>
    public static bool SkipsHigher(Sequence sequence, Bench bench, PointCaptures captures)
    {
        ArgumentNullException.ThrowIfNull(sequence);
        ArgumentNullException.ThrowIfNull(bench);
        ArgumentNullException.ThrowIfNull(captures);
        string name = captures.OperatingPoint;
        bool whole = sequence.OperatingPoints.Any(point => point.Name == name && point.ElseSkipHigher);
        return PointValues.Of(sequence, bench, captures).Any(value => value.Conformity == Conformity.Fails
            && (whole || sequence.Limits.Any(
                limit => limit.At == name && limit.Quantity == value.Quantity && limit.ElseSkipHigher)));
    }

    private static string Listed(IEnumerable<MeasuredValue> values) => string.Join("; ", values.Select(Described));

    private static string Described(MeasuredValue value)
    {
        string found = value.Value is { } mean
            ? SiText.Format(mean, value.Unit)
                + (value.ExpandedUncertainty is { } expanded ? $" ± {SiText.Format(expanded, value.Unit, 2)}" : "")
            : "no value";
        string limits = (value.Lower, value.Upper) switch
        {
            ({ } low, { } high) => $"{SiText.Format(low, value.Unit)} to {SiText.Format(high, value.Unit)}",
            ({ } low, null) => $"at least {SiText.Format(low, value.Unit)}",
            (null, { } high) => $"at most {SiText.Format(high, value.Unit)}",
            _ => "no limit",
        };
        string why = value is { Reason: { } reason, Conformity: Conformity.Undecided } ? $" ({reason})" : "";
        return $"{value.Quantity} at {value.OperatingPoint}: {found}, limit {limits}{why}";
    }
}
