using System.Text.Json;
using BenchRunner.Signals.Energy;
using BenchRunner.Signals.Quantities;
using BenchRunner.Signals.Recovery;
using BenchRunner.Signals.Switching;

namespace BenchRunner.Signals.Tests.ClosedForm;

/// <summary>Recovery currents: triangles, exponential tails, half sines, near misses.</summary>
internal static class RecoveryCases
{
    private static readonly double[] _falls = [0.02, 0.05, 0.10, 0.25];

    public static Dictionary<string, double?> Lines(JsonElement waveform)
    {
        Grid grid = new(-100e-9, 300e-9, 1e-12);
        double[] irr = grid.Lines(waveform.GetProperty("irr"));
        Dictionary<string, double?> got = Read(grid, irr, grid.At(-99e-9), out RecoveryEvent recovery);
        Reading on = Reading.Stated(waveform.GetProperty("i_on").GetDouble());
        got["dif_dt|slope/50-50"] = SwitchingCases.Value(RecoverySlope.Commutation(recovery, irr, on));
        if (waveform.TryGetProperty("vds_high", out JsonElement voltage))
        {
            Reading charge = RecoveryCharge.UntilEnd(recovery, RecoveryTime.ChordEnd(recovery));
            got["err|e/recovery"] = SwitchingCases.Value(
                RecoveryEnergy.Form(grid.Lines(voltage), irr, grid.Interval, charge));
        }

        return got;
    }

    public static Dictionary<string, double?> Exponential(double irm, double ta, double tau)
    {
        double Irr(double t) => t <= ta ? irm * t / ta : irm * Math.Exp(-(t - ta) / tau);
        Grid grid = new(-0.1e-9, 300e-9, 0.5e-12);
        Dictionary<string, double?> got = Read(grid, grid.Sample(Irr), 0, out _);
        double interval = ta / Math.Round(ta * 20_000 / tau);
        Grid whole = new(-2 * interval, ta + (25 * tau), interval);
        RecoveryEvent all = new(whole.Sample(Irr), interval, 0, whole.Count - 1, 0, 0);
        got["charge to infinity"] = RecoveryCharge.OverTime(all, ta + (24 * tau)).Value;
        return got;
    }

    public static Dictionary<string, double?> HalfSine(double irm, double frequency)
    {
        Grid grid = new(-0.25 / frequency, 1 / frequency, 0.1e-12);
        return Read(grid, grid.Sample(t => irm * Math.Sin(2 * Math.PI * frequency * t)), 0, out _);
    }

    /// <summary>What sampling costs: the parabola through a corner overshoots by up to
    /// irm dt/8 (1/ta + 1/tb) and moves the peak by up to half a sample; the trapezoidal rule on the product of
    /// two lines that change over tb by (dt/tb)².</summary>
    public static double Sampling(string key, double value, double irm, double ta, double tb, double dt)
    {
        double corner = dt / 8 * ((1 / ta) + (1 / tb));
        return key.Split('|')[0] switch
        {
            "irm" => irm * corner,
            "ta" or "tb" => (dt / 2) + (tb * corner),
            "softness" => (dt / 2 * ((1 / ta) + (tb / (ta * ta)))) + (value * corner),
            "trr" => tb * corner,
            "qrr" => irm * tb * corner,
            "dirr_dt" => value * corner,
            "err" => value * (dt / tb) * (dt / tb),
            _ => 0,
        };
    }

    private static Dictionary<string, double?> Read(Grid grid, double[] irr, double from, out RecoveryEvent recovery)
    {
        recovery = new RecoveryEvent(irr, grid.Interval, from, grid.Count - 1, 0, 0);
        Instant chord = RecoveryTime.ChordEnd(recovery);
        Dictionary<string, double?> got = new()
        {
            ["irm|peak/above-load"] = SwitchingCases.Value(RecoveryPeak.AboveLoad(recovery)),
            ["trr|trr/chord-90-25"] = SwitchingCases.Value(RecoveryTime.Whole(recovery, chord)),
            ["ta|trr/chord-90-25"] = SwitchingCases.Value(RecoveryTime.Rise(recovery, chord)),
            ["tb|trr/chord-90-25"] = SwitchingCases.Value(RecoveryTime.Decay(recovery, chord)),
            ["softness|trr/chord-90-25"] = SwitchingCases.Value(RecoveryTime.Softness(recovery, chord)),
            ["qrr|qrr/chord-90-25"] = SwitchingCases.Value(RecoveryCharge.UntilEnd(recovery, chord)),
            ["qrr|qrr/to-zero"] = SwitchingCases.Value(RecoveryCharge.UntilZero(recovery)),
            ["dirr_dt|slope/90-25"] = SwitchingCases.Value(RecoverySlope.Fall(recovery)),
        };
        foreach (double time in (ReadOnlySpan<double>)[20e-9, 100e-9, 200e-9])
        {
            got[$"qrr|{DefinitionId.Window(time)}"] = SwitchingCases.Value(RecoveryCharge.OverTime(recovery, time));
        }

        foreach (double fall in _falls)
        {
            Instant end = RecoveryTime.FallEnd(recovery, fall);
            got[$"trr|trr/fall-{100 * fall:F0}"] = SwitchingCases.Value(RecoveryTime.Whole(recovery, end));
            got[$"qrr|qrr/fall-{100 * fall:F0}"] = SwitchingCases.Value(RecoveryCharge.UntilEnd(recovery, end));
        }

        return got;
    }
}
