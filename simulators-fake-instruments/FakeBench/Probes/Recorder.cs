using System.Buffers;
using FakeBench.Physics;

namespace FakeBench.Probes;

/// <summary>From the noiseless train to the codes of one scope channel.</summary>
public static class Recorder
{
    /// <summary>Records one channel.</summary>
    /// <param name="train">The noiseless train.</param>
    /// <param name="probe">What lies before the scope.</param>
    /// <param name="digitiser">The channel's converter as it is set.</param>
    /// <param name="noise">Key of the channel's noise: <see cref="CaptureKey.Noise"/>.</param>
    /// <param name="jitter">How much later than the trigger says it happens, s: <see cref="CaptureKey.Jitter"/>, the
    /// same
    /// for all channels of a capture.</param>
    /// <returns>One code a sample of the train; equal arguments, equal codes.</returns>
    public static short[] Record(
        TrainTrajectory train, ProbeChannel probe, Digitiser digitiser, ulong noise, double jitter)
    {
        ArgumentNullException.ThrowIfNull(train);
        ArgumentNullException.ThrowIfNull(probe);
        ArgumentNullException.ThrowIfNull(digitiser);
        var codes = GC.AllocateUninitializedArray<short>(train.Points);
        double[] rented = ArrayPool<double>.Shared.Rent(train.Points);
        try
        {
            var values = rented.AsSpan(0, train.Points);
            Lowpass.Delay(train[probe.Signal], (probe.Skew + jitter) / train.Interval, values);
            AddSlope(values, probe.Lead / train.Interval);
            Lowpass.Filter(values, 2 * Math.PI * probe.Bandwidth * train.Interval);
            for (int i = 0; i < values.Length; i++) values[i] = probe.Gain * values[i] + probe.Offset;
            GaussianNoise.Add(values, probe.Noise, noise);
            digitiser.Code(values, codes);
        }
        finally
        {
            ArrayPool<double>.Shared.Return(rented);
        }

        return codes;
    }

    /// <summary>Adds a multiple of the slope, by central differences.</summary>
    private static void AddSlope(Span<double> values, double samples)
    {
        if (samples == 0) return;
        double before = values[0];
        for (int i = 1; i < values.Length - 1; i++)
        {
            double here = values[i];
            values[i] = here + samples * 0.5 * (values[i + 1] - before);
            before = here;
        }
    }
}
