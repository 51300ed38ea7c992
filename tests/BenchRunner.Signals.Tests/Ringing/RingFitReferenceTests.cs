using System.Text.Json;
using BenchRunner.Signals.Ringing;

namespace BenchRunner.Signals.Tests.Ringing;

/// <summary>The ring fit against tests/reference/closed-form.json: values and Cramér-Rao bounds in 40 digits.</summary>
public sealed class RingFitReferenceTests
{
    private const int Draws = 200;

    public static TheoryData<string> Clean => [.. Names(noisy: false)];

    public static TheoryData<string> Noisy => [.. Names(noisy: true)];

    [Theory]
    [MemberData(nameof(Clean))]
    public void Exact_damped_cosines_come_out_as_they_went_in(string id)
    {
        JsonElement waveform = Case(id).GetProperty("waveform");
        RingRecord record = RingRecord.Of(waveform);

        RingFitResult ring = RingFit.Fit(record.Samples(), record.Dt, RingFit.MostModes);

        Assert.Null(ring.Reason);
        Assert.Equal(record.Modes.Length, ring.Order);
        foreach ((double f, double damping, double amplitude, double phase) in record.Modes)
        {
            RingMode mode = Nearest(ring, f);
            // The file asks for 1e-6; exact data leave rounding alone.
            Near(f, mode.Frequency, 1e-10);
            Near(damping, mode.Damping, 1e-9);
            Near(amplitude, mode.Amplitude, 1e-9);
            Assert.Equal(phase, mode.Phase, 1e-8);
        }

        double swing = record.Modes.Sum(mode => mode.Amplitude);
        Assert.Equal(record.C, ring.Offset, swing * 1e-9);
        Assert.Equal(record.D, ring.Slope, swing / (record.Dt * record.Count) * 1e-9);
    }

    [Theory]
    [MemberData(nameof(Noisy))]
    public void One_noisy_record_lies_within_four_bounds(string id)
    {
        JsonElement item = Case(id);
        RingRecord record = RingRecord.Of(item.GetProperty("waveform"));

        RingFitResult ring = RingFit.Fit(record.Samples(), record.Dt, RingFit.MostModes);

        Assert.Equal(record.Modes.Length, ring.Order);
        for (int i = 0; i < record.Modes.Length; i++)
        {
            (double f, double damping) = Bounds(item, i);
            RingMode mode = Nearest(ring, record.Modes[i].F);
            Near(record.Modes[i].F, mode.Frequency, 4 * f);
            Near(record.Modes[i].Damping, mode.Damping, 4 * damping);
        }
    }

    [Theory]
    [MemberData(nameof(Noisy))]
    public void Scatter_reaches_the_Cramer_Rao_bound_without_bias(string id)
    {
        JsonElement item = Case(id);
        RingRecord record = RingRecord.Of(item.GetProperty("waveform"));
        List<RingFitResult> rings = [];
        for (ulong draw = 0; draw < Draws; draw++)
        {
            double[] samples = (record with { Seed = 900_000 + (7919 * draw) }).Samples();
            rings.Add(RingFit.Fit(samples, record.Dt, RingFit.MostModes));
        }

        Assert.All(rings, ring => Assert.Null(ring.Reason));
        // 1 in 100: the penalty of the order lets noise pass as a mode about that often.
        Assert.InRange(rings.Count(ring => ring.Order != record.Modes.Length), 0, Draws / 100);
        for (int i = 0; i < record.Modes.Length; i++)
        {
            (double f, double damping, _, _) = record.Modes[i];
            (double boundF, double boundDamping) = Bounds(item, i);
            RingMode[] modes = [.. rings.Select(ring => Nearest(ring, f))];
            HoldsBound([.. modes.Select(mode => (mode.Frequency / f) - 1)], boundF);
            HoldsBound([.. modes.Select(mode => (mode.Damping / damping) - 1)], boundDamping);
            Near(boundF, modes.Average(mode => mode.FrequencyUncertainty) / f, 0.1);
            Near(boundDamping, modes.Average(mode => mode.DampingUncertainty) / damping, 0.1);
        }
    }

    /// <summary>What the file accepts over 200 seeds: scatter within 1.2 bounds, mean within 0.3 bounds.</summary>
    private static void HoldsBound(double[] errors, double bound)
    {
        double mean = errors.Average();
        double scatter = Math.Sqrt(errors.Sum(error => (error - mean) * (error - mean)) / (errors.Length - 1));
        Assert.InRange(scatter, 0.8 * bound, 1.2 * bound);
        Assert.InRange(mean, -0.3 * bound, 0.3 * bound);
    }

    private static RingMode Nearest(RingFitResult ring, double frequency) =>
        ring.Modes.MinBy(mode => Math.Abs(mode.Frequency - frequency));

    private static (double F, double Damping) Bounds(JsonElement item, int mode)
    {
        JsonElement bounds = item.GetProperty("relative_standard_deviation_bound");
        return (bounds.GetProperty($"mode {mode + 1}|f").GetDouble(),
            bounds.GetProperty($"mode {mode + 1}|damping").GetDouble());
    }

    private static void Near(double expected, double actual, double relative) =>
        Assert.InRange((actual / expected) - 1, -relative, relative);

    private static IEnumerable<string> Names(bool noisy) =>
        Cases().Select(item => item.GetProperty("id").GetString()!)
            .Where(id => id.StartsWith("ring-", StringComparison.Ordinal))
            .Where(id => id.EndsWith("-noise", StringComparison.Ordinal) == noisy);

    private static JsonElement Case(string id) => Cases().First(item => item.GetProperty("id").GetString() == id);

    private static JsonElement.ArrayEnumerator Cases() =>
        JsonDocument.Parse(File.ReadAllBytes(Find())).RootElement.GetProperty("cases").EnumerateArray();

    private static string Find()
    {
        for (DirectoryInfo? folder = new(AppContext.BaseDirectory); folder is not null; folder = folder.Parent)
        {
            string file = Path.Combine(folder.FullName, "tests", "reference", "closed-form.json");
            if (File.Exists(file))
            {
                return file;
            }
        }

        throw new FileNotFoundException("tests/reference/closed-form.json is in no folder above the tests.");
    }
}
