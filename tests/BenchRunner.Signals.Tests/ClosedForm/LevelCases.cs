using System.Text.Json;
using BenchRunner.Signals.Edges;
using BenchRunner.Signals.Levels;
using BenchRunner.Signals.LoadCurrent;
using BenchRunner.Signals.Peaks;
using BenchRunner.Signals.Quantities;
using BenchRunner.Signals.Switching;

namespace BenchRunner.Signals.Tests.ClosedForm;

/// <summary>Ramps of the load, levels of the bus, peaks.</summary>
internal static class LevelCases
{
    /// <summary>A first pulse from 0 to 5 µs on a current a + b t + c t². The expected straightness is that of single
    /// samples, so the window is divided into as many parts as it has samples.</summary>
    public static Dictionary<string, double?> Ramp(double a, double b, double c)
    {
        Grid grid = new(0, 5.5e-6, 1e-9);
        FirstRamp ramp = FirstRamp.Fit(
            grid.Sample(t => a + (b * t) + (c * t * t)), grid.Interval, 0, grid.At(5e-6), grid.At(5e-6), parts: 3251);
        return new()
        {
            ["ramp_slope|iload/ramp"] = ramp.Slope.Value,
            ["ramp_straightness|iload/ramp"] = ramp.Straightness.Value,
            ["i_off|iload/ramp"] = ramp.OffCurrent.Value,
            ["growth of the slope, last quarter against first third"] = ramp.Growth.Value,
        };
    }

    /// <summary>The pulse that takes a load to its current, by the slope of the ramp it makes on the bus.</summary>
    public static Dictionary<string, double?> FirstPulse(double inductance, double current, double bus)
    {
        Dictionary<string, double?> ramp = Ramp(0, bus / inductance, 0);
        return new() { ["pulse-width"] = current / ramp["ramp_slope|iload/ramp"] };
    }

    public static Dictionary<string, double?> BusMean(JsonElement waveform)
    {
        Grid grid = new(-400e-9, 400e-9, 1e-9);
        double[] bus = grid.Sample(t => 800 - (2e7 * t));
        GateEdge edge = SwitchingCases.OnlyEdge(grid, grid.Lines(waveform.GetProperty("vgs_low")));
        return new()
        {
            ["bus_voltage|levels/window"] = BusVoltage.Before(bus, grid.Interval, edge.Departure).Value,
        };
    }

    public static Dictionary<string, double?> BusFromVds(double forwardVoltage)
    {
        Grid grid = new(-400e-9, 0, 1e-9);
        double[] vds = grid.Sample(_ => 801.5);
        return new()
        {
            ["bus_voltage|levels/window-vds"] = BusVoltage.FromBlocking(
                BusVoltage.Before(vds, grid.Interval, grid.At(0)), forwardVoltage).Value,
        };
    }

    public static Dictionary<string, double?> LoadLineAtTurnOn(JsonElement waveform)
    {
        Grid grid = new(-100e-9, 2e-6, 1e-9);
        double[] vds = grid.Lines(waveform.GetProperty("vds_low"));
        double[] id = grid.Sample(t => t > 0.5e-6 ? 40 + (5e6 * t) : t > 0 ? 60 : 0);
        SwitchingEvent turnOn = new()
        {
            Vds = vds,
            Id = id,
            SampleInterval = grid.Interval,
            TurnsOn = true,
            Departure = grid.At(0),
            End = grid.Count - 1,
            Bus = Reading.Stated(waveform.GetProperty("bus_voltage").GetDouble()),
            OnState = Reading.Stated(0),
            Current = Reading.None("not formed yet"),
        };
        double knee = turnOn.Voltage(0.5, decided: false).At;
        double pulse = grid.At(2e-6) - grid.At(0);
        LoadLine line = LoadLine.Fit(
            id, grid.At(0), grid.At(2e-6), knee, grid.At(0) + (0.25 * pulse) + 1, null, 0, out string? reason);
        Assert.Null(reason);
        Assert.Equal(line.OnCurrent, line.At(grid.At(0)));
        return new() { ["i_on|iload/ramp"] = line.ToReading().Value };
    }

    public static Dictionary<string, double?> DroopOf() => new()
    {
        ["bus_droop|droop/first-pulse"] = Droop.Form(Reading.Of(800, 0, 1), Reading.Of(790, 9, 10)).Value,
    };

    public static Dictionary<string, double?> TopThree(JsonElement waveform)
    {
        double[] samples = [.. waveform.GetProperty("samples").EnumerateArray().Select(s => s.GetDouble())];
        Peak peak = Peak.Raw(samples, 0, 2)!.Value;
        return new() { ["vds_peak_off|peak/raw"] = peak.Height, ["position"] = peak.Position - 1 };
    }

    public static Dictionary<string, double?> TopFifth(JsonElement waveform)
    {
        double[] samples = [.. waveform.GetProperty("samples").EnumerateArray().Select(s => s.GetDouble())];
        Reading peak = Peak.TopFifth(samples, 0, samples.Length - 1, waveform.GetProperty("base").GetDouble());
        Assert.Equal(9, peak.To - peak.From + 1);
        Assert.True(Peak.Parabola(samples.AsSpan((int)peak.From, 9), out _, out double position));
        return new()
        {
            ["id_peak_on|peak/parabola-20"] = peak.Value,
            ["position"] = position + peak.From - 9,
        };
    }
}
