using BenchRunner.Signals.Traces;

namespace BenchRunner.Signals.Comparisons;

/// <summary>One channel of two aligned waveforms, sample by sample over the window.</summary>
/// <param name="Channel">The channel.</param>
/// <param name="Nrmse">Root mean square of measured − reference over the reference's span (largest − smallest) in the
/// window, 1; null where there is none.</param>
/// <param name="SpragueGeers">Errors of size and timing; null where there are none.</param>
/// <param name="FeatureSelective">Errors of envelope and features; null where there are none.</param>
/// <param name="OwnShift">By how much this channel alone would be shifted beyond the common shift, s: what is left of
/// its skew; null where its own correlation has no maximum near.</param>
/// <param name="Reason">Why there are no errors; null where there are some.</param>
public sealed record ChannelComparison(
    Channel Channel,
    double? Nrmse,
    SpragueGeers? SpragueGeers,
    FeatureSelective? FeatureSelective,
    double? OwnShift,
    string? Reason)
{
    private const int FewestSamples = 32;

    /// <summary>Compares two aligned stretches of a channel.</summary>
    /// <param name="channel">The channel.</param>
    /// <param name="measured">Measured samples, V or A; finite.</param>
    /// <param name="reference">The reference on the same grid, V or A; finite.</param>
    /// <param name="ownShift">See <see cref="OwnShift"/>.</param>
    /// <returns>The errors; a reason for fewer than 32 samples, or a reference that is flat.</returns>
    /// <exception cref="ArgumentException">The spans differ in length, or a sample is NaN or infinite.</exception>
    public static ChannelComparison Form(
        Channel channel, ReadOnlySpan<double> measured, ReadOnlySpan<double> reference, double? ownShift)
    {
        if (measured.Length != reference.Length)
        {
            throw new ArgumentException("Compared waveforms have one length.", nameof(reference));
        }

        Finite.Require(measured, nameof(measured));
        Finite.Require(reference, nameof(reference));
        if (measured.Length < FewestSamples)
        {
            return None(channel, $"fewer than {FewestSamples} samples");
        }

        double squares = 0, low = reference[0], high = reference[0];
        for (int i = 0; i < measured.Length; i++)
        {
            double error = measured[i] - reference[i];
            squares += error * error;
            low = Math.Min(low, reference[i]);
            high = Math.Max(high, reference[i]);
        }

        double nrmse = Math.Sqrt(squares / measured.Length) / (high - low);
        SpragueGeers? sprague = Comparisons.SpragueGeers.Form(measured, reference);
        return double.IsFinite(nrmse) && sprague is not null
            ? new ChannelComparison(
                channel, nrmse, sprague, Comparisons.FeatureSelective.Form(measured, reference), ownShift, null)
            : None(channel, "flat in one of the two");
    }

    /// <summary>No errors, and why.</summary>
    /// <param name="channel">The channel.</param>
    /// <param name="reason">Why.</param>
    public static ChannelComparison None(Channel channel, string reason) =>
        new(channel, null, null, null, null, reason);
}
