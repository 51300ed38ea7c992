using BenchRunner.Signals.Levels;
using BenchRunner.Signals.Traces;

namespace BenchRunner.Signals.Analysis;

/// <summary>Where the corrections are called.</summary>
internal static class CorrectionSeam
{
    // After off1 the current rings; a quarter of the gap later it is at rest.
    private const double GapPart = 0.25;

    public static Waveform Correct(Waveform waveform, AnalysisSettings settings) => waveform;

    /// <summary>Takes the resting current off every current whose offset is not stated: its mean before on1, or, without
    /// on1 in the record, over the gap from a quarter on.</summary>
    public static Waveform RemoveBaseline(Waveform waveform, Record record, Train train, AnalysisSettings settings)
    {
        (double from, double to) = train.On1 is { Departure: >= 1 } on1 ? (0, on1.Departure)
            : train.Off1 is { } off1 && train.On2 is { } on2
                ? (off1.At + (GapPart * (on2.Departure - off1.At)), on2.Departure)
                : (0, 0);
        if (!(to > from))
        {
            return waveform;
        }

        Channel current = record.Measured(Channel.IdLow);
        bool stated = settings.Corrections.TryGetValue(current, out ChannelCorrection? c) && c.Offset is not null;
        if (stated || !waveform.Has(current))
        {
            return waveform;
        }

        double[] samples = waveform[current].ToArray();
        double rest = Integral.Mean(samples, from, to);
        for (int i = 0; i < samples.Length; i++)
        {
            samples[i] -= rest;
        }

        return waveform.With(new Dictionary<Channel, double[]> { [current] = samples });
    }
}
