using System.Globalization;
using System.Text;
using FakeBench.Physics;
using FakeBench.Probes;

namespace FakeBench.Tests.Ugly;

/// <summary>Makes the two files of an ugly record: the waveform, and the truth from the noiseless simulation.</summary>
internal static class UglyRecord
{
    private const int Seed = 4;

    /// <summary>How much finer the truth is sampled than the record.</summary>
    private const int Finer = 4;

    /// <summary>The recorded samples of each channel, V or A.</summary>
    public static double[][] Samples(UglyCase ugly)
    {
        TrainTrajectory train = HalfBridge.Simulate(ugly.Parts, ugly.Train, ugly.Start, ugly.Interval, ugly.Points);
        Spoil(ugly, train);
        var key = new CaptureKey(Seed, ugly.Name, 1);
        return
        [
            .. ugly.Channels.Select((channel, i) => Recorder
                .Record(train, channel.Probe, channel.Digitiser, key.Noise(i + 1), key.Jitter(20e-12))
                .Select(code => Value(ugly, channel.Digitiser, code)).ToArray()),
        ];
    }

    /// <summary>The waveform file.</summary>
    public static string Csv(UglyCase ugly, double[][] samples)
    {
        StringBuilder text = new("t," + string.Join(',', ugly.Channels.Select(channel => channel.Channel)) + "\n");
        for (int i = 0; i < ugly.Points; i++)
        {
            text.Append(Number(ugly.Start + (i * ugly.Interval), 9));
            foreach (double[] channel in samples)
            {
                text.Append(',').Append(Number(channel[i], 6));
            }

            text.Append('\n');
        }

        return text.ToString();
    }

    /// <summary>The truth beside it.</summary>
    public static string Json(UglyCase ugly)
    {
        TrainTrajectory fine = HalfBridge.Simulate(
            ugly.Parts, ugly.Train, ugly.Start - 1e-7, ugly.Interval / Finer,
            Finer * (ugly.Points + (int)(2e-7 / ugly.Interval)));
        Spoil(ugly, fine);
        PulseTrain train = ugly.Train;
        double end = ugly.Start + (ugly.Interval * (ugly.Points - 1));
        var edges = new (string Name, double At)[]
            { ("on1", 0), ("off1", train.Off1), ("on2", train.On2), ("off2", train.Off2) };
        var text = new StringBuilder("{\n");
        text.Append($"  \"what\": \"{ugly.What}\",\n");
        text.Append("  \"edges\": { ").AppendJoin(", ", edges.Where(edge => edge.At > ugly.Start && edge.At < end)
            .Select(edge => $"\"{edge.Name}\": {Number(edge.At, 9)}")).Append(" },\n");
        text.Append("  \"stated\": {\n").AppendJoin(",\n", ugly.Stated.Select(one =>
            $"    \"{one.Key}\": {{ \"gain\": {Number(one.Value.Gain, 9)}, "
            + $"\"offset\": {(one.Value.Offset is { } offset ? Number(offset, 9) : "null")}, "
            + $"\"skew\": {Number(one.Value.Skew, 9)} }}")).Append("\n  },\n");
        text.Append("  \"truth\": {\n").AppendJoin(",\n", Truth.Of(fine, train).Select(one =>
            $"    \"{one.Key}\": {{ \"value\": {Number(one.Value, 7)}, "
            + $"\"tolerance\": {Number(Tolerance(ugly, one.Key, one.Value), 3)} }}"));
        return text.Append("\n  }\n}\n").ToString();
    }

    private static double Value(UglyCase ugly, Digitiser digitiser, short code) =>
        ugly.MarksClipped && code == digitiser.Highest ? double.PositiveInfinity
        : ugly.MarksClipped && code == digitiser.Lowest ? double.NegativeInfinity
        : digitiser.Value(code);

    private static void Spoil(UglyCase ugly, TrainTrajectory train)
    {
        ugly.Spoil(train);
        if (ugly.GateResonance is { } resonance)
        {
            Resonate(train[Signal.VgsLow], resonance.Frequency, resonance.Damping, train.Interval);
        }
    }

    /// <summary>How far the mean of a channel may be off where its noise is below its step: half a step.</summary>
    private static double Tolerance(UglyCase ugly, string quantity, double value)
    {
        double step = ugly.Channels.Single(channel => channel.Channel == "vds_low").Digitiser.Step;
        return quantity == "vds_on" ? 0.5 * step / value : ugly.Tolerances.GetValueOrDefault(quantity, ugly.Tolerance);
    }

    private static string Number(double value, int digits) => double.IsInfinity(value) ? value > 0 ? "inf" : "-inf" :
        value.ToString("G" + digits.ToString(CultureInfo.InvariantCulture), CultureInfo.InvariantCulture);

    /// <summary>A gate loop that rings: y'' = w² (x − y) − 2 z w y', solved in small steps with x straight
    /// between samples.</summary>
    private static void Resonate(double[] samples, double frequency, double damping, double interval)
    {
        const int Steps = 64;
        double w = 2 * Math.PI * frequency, dt = interval / Steps;
        double y = samples[0], slope = 0, before = samples[0];
        for (int i = 1; i < samples.Length; i++)
        {
            double now = samples[i];
            for (int k = 1; k <= Steps; k++)
            {
                double x = before + ((now - before) * k / Steps);
                slope += dt * ((w * w * (x - y)) - (2 * damping * w * slope));
                y += dt * slope;
            }

            (before, samples[i]) = (now, y);
        }
    }
}
