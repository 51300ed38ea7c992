using System.Text.Json;
using BenchRunner.Signals.Analysis;
using BenchRunner.Signals.Corrections;
using BenchRunner.Signals.Traces;

namespace BenchRunner.Signals.Tests.Support;

/// <summary>Records as a bench would make them of one clean waveform: the recording chain of
/// tests/reference/waveforms/README.md with a skew of one channel and a seed of one's own.</summary>
internal sealed class SkewDraw
{
    /// <summary>Estimators were judged on other seeds than those from here on.</summary>
    public const int FirstSeed = 1001;

    private readonly Waveform _clean;
    private readonly JsonDocument _chain;
    private readonly Channel _skewed;
    private readonly Dictionary<double, Dictionary<Channel, double[]>> _late = [];

    public SkewDraw(string scenario, Channel skewed)
    {
        _skewed = skewed;
        _clean = Reference.Waveform($"{scenario}-clean.csv.gz");
        _chain = Reference.Json($"waveforms/{scenario}-measured.json");
        Settings = Reference.Settings(scenario, measured: false);
    }

    public double Interval => _clean.SampleInterval;

    public AnalysisSettings Settings { get; }

    /// <summary>lowpass, late by the skew (one channel alone), noise, quantised; gain 1, offset 0.</summary>
    public Waveform Of(int seed, double skew)
    {
        if (!_late.TryGetValue(skew, out Dictionary<Channel, double[]>? late))
        {
            _late[skew] = late = Late(skew);
        }

        var random = new Random(seed);
        Dictionary<Channel, double[]> recorded = [];
        foreach ((Channel channel, double[] samples) in late)
        {
            JsonElement facts = _chain.RootElement.GetProperty("channels").GetProperty(channel.Name());
            double noise = facts.GetProperty("noise_rms").GetDouble();
            double lsb = facts.GetProperty("lsb").GetDouble();
            recorded[channel] =
                [.. samples.Select(x => lsb * Math.Round((x + (noise * Normal(random))) / lsb))];
        }

        return new Waveform(_clean.TimeOrigin, Interval, recorded);
    }

    /// <summary>Holds an estimator to its own uncertainty: the truth within twice of it in 95 % of 200 draws, a draw
    /// without an answer counting as outside.</summary>
    /// <param name="estimate">The estimator.</param>
    /// <param name="samples">The true skew, in samples.</param>
    /// <param name="output">Receives the figures.</param>
    public void Holds(
        Func<Waveform, AnalysisSettings, SkewEstimate> estimate, double samples, ITestOutputHelper output)
    {
        const int draws = 200;
        double truth = samples * Interval;
        int held = 0, none = 0;
        for (int seed = FirstSeed; seed < FirstSeed + draws; seed++)
        {
            SkewEstimate found = estimate(Of(seed, truth), Settings);
            none += found.Skew is null ? 1 : 0;
            held += Math.Abs((found.Skew - truth) / found.StandardUncertainty ?? 99) <= 2 ? 1 : 0;
        }

        string figures = $"seeds from {FirstSeed}: {held} of {draws} held, {none} without an answer";
        output.WriteLine(figures);
        Assert.True(held >= 0.95 * draws, figures);
    }

    /// <summary>The front of some channels of a waveform.</summary>
    public static Waveform Only(Waveform waveform, int count, params Channel[] channels) => new(
        waveform.TimeOrigin,
        waveform.SampleInterval,
        channels.ToDictionary(channel => channel, channel => waveform[channel][..count].ToArray()));

    private Dictionary<Channel, double[]> Late(double skew)
    {
        double tau = 1 / (2 * Math.PI * _chain.RootElement.GetProperty("bandwidth_hz").GetDouble());
        Dictionary<Channel, double[]> late = [];
        foreach (JsonProperty one in _chain.RootElement.GetProperty("channels").EnumerateObject())
        {
            Channel channel = ChannelNames.Parse(one.Name)!.Value;
            double[] slow = Lowpass(_clean[channel], tau / Interval);
            late[channel] = channel == _skewed
                ? [.. Enumerable.Range(0, slow.Length).Select(i => Between(slow, i - (skew / Interval)))]
                : slow;
        }

        return late;
    }

    /// <summary>One pole, exact for straight lines between the samples.</summary>
    private static double[] Lowpass(ReadOnlySpan<double> x, double tau)
    {
        double keep = Math.Exp(-1 / tau);
        double[] y = new double[x.Length];
        y[0] = x[0];
        for (int i = 1; i < x.Length; i++)
        {
            double slope = x[i] - x[i - 1];
            y[i] = x[i] - (tau * slope) + ((y[i - 1] - x[i - 1] + (tau * slope)) * keep);
        }

        return y;
    }

    /// <summary>Cubic through four samples.</summary>
    private static double Between(double[] x, double at)
    {
        int i = Math.Clamp((int)Math.Floor(at), 1, x.Length - 3);
        double p = at - i;
        return (-p * (p - 1) * (p - 2) / 6 * x[i - 1]) + ((p + 1) * (p - 1) * (p - 2) / 2 * x[i])
            - ((p + 1) * p * (p - 2) / 2 * x[i + 1]) + ((p + 1) * p * (p - 1) / 6 * x[i + 2]);
    }

    private static double Normal(Random random) =>
        Math.Sqrt(-2 * Math.Log(1 - random.NextDouble())) * Math.Cos(2 * Math.PI * random.NextDouble());
}
