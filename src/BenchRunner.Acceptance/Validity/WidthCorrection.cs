namespace BenchRunner.Acceptance.Validity;

/// <summary>How far the first pulse may be corrected so that the current meets its target.</summary>
/// <remarks>A larger error is not a matter of width: the bench is not what its file says (a current probe at 1x reads a
/// tenth).</remarks>
public static class WidthCorrection
{
    /// <summary>Largest change from one capture to the next, relative.</summary>
    public const double PerCapture = 0.10;

    /// <summary>Largest distance from the planned width, relative.</summary>
    public const double InAll = 0.25;

    /// <summary>The next width.</summary>
    /// <param name="planned">The planned width, s.</param>
    /// <param name="set">The width of the capture, s.</param>
    /// <param name="target">The target current, A.</param>
    /// <param name="seen">The current seen, A.</param>
    /// <returns>t1 · target/seen, moved by at most 10 %, s; null where that lies beyond 25 % of the planned
    /// width.</returns>
    public static double? Next(double planned, double set, double target, double seen)
    {
        double wanted = set * target / seen;
        if (!double.IsFinite(wanted) || wanted <= 0 || Math.Abs(wanted - planned) > InAll * planned)
        {
            return null;
        }

        return Math.Clamp(wanted, set * (1 - PerCapture), set * (1 + PerCapture));
    }
}
