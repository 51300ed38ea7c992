using BenchRunner.Acceptance.Files;

namespace BenchRunner.Acceptance.Validity;

/// <summary>How many of a device's captures one criterion rejected.</summary>
/// <param name="Criterion">The criterion.</param>
/// <param name="Rejected">Captures in which it found what makes a capture invalid.</param>
/// <param name="NotEvaluated">Captures on which it could not be evaluated: these do not count as met.</param>
/// <param name="Captures">All captures.</param>
public sealed record RejectedShare(string Criterion, int Rejected, int NotEvaluated, int Captures)
{
    /// <summary>Rejected over all captures, 1.</summary>
    public double Share => (double)Rejected / Captures;

    /// <summary>Whether more than half of all captures were rejected: a bench, not chance.</summary>
    public bool IsAboveHalf => 2 * Rejected > Captures;

    /// <summary>The share in words.</summary>
    public string Message
    {
        get
        {
            string rejected = $"{Criterion} rejected {Rejected} of {Captures} captures ({SiText.Percent(Share, 2)})";
            string warning = IsAboveHalf ? ", more than half: look at the bench" : "";
            return (Rejected, NotEvaluated) switch
            {
                (_, 0) => rejected + warning,
                (0, _) => $"{Criterion} was not evaluated on {NotEvaluated} of {Captures} captures",
                _ => $"{rejected}{warning}; not evaluated on {NotEvaluated}",
            };
        }
    }
}
