namespace BenchRunner.Signals.RingWindows;

/// <summary>Where the fit of damped cosines is called.</summary>
internal static class RingSeam
{
    public static RingMode[] Fit(ReadOnlySpan<double> samples, double dt, int maximumModes, out string? reason)
    {
        reason = "the fit of ringing is not available";
        return [];
    }
}
