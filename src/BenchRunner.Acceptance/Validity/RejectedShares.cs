namespace BenchRunner.Acceptance.Validity;

/// <summary>The share of captures that each criterion rejected, for the end of a device's log. Pure.</summary>
public static class RejectedShares
{
    /// <summary>Counts the verdicts of one device.</summary>
    /// <param name="verdicts">Those of all its captures of measurements; zero and proving captures select
    /// nothing.</param>
    /// <returns>
    /// A row for each criterion that rejected a capture or could not be evaluated on one, in the order of the
    /// catalogue; a capture counts once for each criterion that rejected it. Findings of class warn reject nothing.
    /// </returns>
    public static IReadOnlyList<RejectedShare> Of(IReadOnlyCollection<Verdict> verdicts)
    {
        ArgumentNullException.ThrowIfNull(verdicts);
        return
        [
            .. Criteria.All
                .Select(criterion => new RejectedShare(
                    criterion.Name,
                    verdicts.Count(verdict => verdict.Findings.Any(finding =>
                        finding.Criterion == criterion.Name && finding.Class != FindingClass.Warn)),
                    verdicts.Count(verdict => verdict.NotEvaluated.Contains(criterion.Name)),
                    verdicts.Count))
                .Where(share => share.Rejected > 0 || share.NotEvaluated > 0),
        ];
    }
}
