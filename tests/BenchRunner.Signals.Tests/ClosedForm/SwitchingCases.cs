using System.Text.Json;
using BenchRunner.Signals.Edges;
using BenchRunner.Signals.Energy;
using BenchRunner.Signals.Levels;
using BenchRunner.Signals.Quantities;
using BenchRunner.Signals.Switching;

namespace BenchRunner.Signals.Tests.ClosedForm;

/// <summary>Piecewise-linear edges: times, slopes, energies, delays, loop inductance.</summary>
internal static class SwitchingCases
{
    private static readonly Grid _grid = new(-1.2e-6, 700e-9, 0.1e-9);
    private static readonly Grid _fine = new(-50e-9, 150e-9, 1e-12);

    /// <summary>An edge given by channels and levels.</summary>
    public static Dictionary<string, double?> Edge(JsonElement waveform, bool turnsOn)
    {
        Dictionary<string, double?> got = [];
        double departure = 0;
        if (waveform.TryGetProperty("vgs_low", out JsonElement gate))
        {
            GateEdge edge = OnlyEdge(_grid, _grid.Lines(gate));
            departure = edge.Departure;
            got["edge|vgs-50"] = _grid.Time(edge.At);
        }

        double[] vds = _grid.Lines(waveform.GetProperty("vds_low"));
        double[] id = _grid.Lines(waveform.GetProperty("id_low"));
        SwitchingEvent form = Event(_grid, waveform, vds, id, turnsOn, departure);
        Fill(got, form);
        if (waveform.TryGetProperty("vds_high", out JsonElement high))
        {
            got["loop_inductance|loop/flux"] = Value(LoopInductance.Form(
                form, _grid.Lines(high), null, waveform.GetProperty("shunt").GetDouble()));
        }

        return got;
    }

    /// <summary>Two edges with the current recorded late.</summary>
    public static Dictionary<string, double?> Skewed(JsonElement on, JsonElement off, double shift)
    {
        Dictionary<string, double?> got = [];
        double sum = 0;
        foreach ((string name, JsonElement waveform, bool turnsOn) in new[] { ("eon", on, true), ("eoff", off, false) })
        {
            double[] vds = _fine.Lines(waveform.GetProperty("vds_low"));
            double[] id = _fine.Lines(waveform.GetProperty("id_low"));
            double[] late = _fine.Lines(waveform.GetProperty("id_low"), shift);
            double true0 = SwitchingEnergy.Form(Event(_fine, waveform, vds, id, turnsOn, 0), 0.1).Value;
            double skewed = SwitchingEnergy.Form(Event(_fine, waveform, vds, late, turnsOn, 0), 0.1).Value;
            got[$"{name}|e/10-10"] = skewed;
            got[$"{name}|e/10-10|change"] = skewed - true0;
            got[$"{name}|whole-overlap"] =
                Integral.OfProduct(vds, late, 0, _fine.Count - 1) * _fine.Interval;
            sum += skewed - true0;
            if (!turnsOn)
            {
                got["first-order|V I delta"] = shift * SkewSensitivity.Form(
                    vds, id, _fine.Interval, 0, _fine.Count - 1, fromMoves: false, toMoves: false);
            }
        }

        got["eon+eoff|e/10-10|change"] = sum;
        return got;
    }

    /// <summary>The one edge of a gate whose levels are its extremes.</summary>
    public static GateEdge OnlyEdge(Grid grid, double[] gate)
    {
        TwoLevels levels = new(gate.Min(), gate.Max());
        return Assert.Single(GateEdges.Find(gate, grid.Interval, levels, 0.01 * levels.Swing, 250e-9));
    }

    public static double? Value(Reading reading) => reading.HasValue ? reading.Value : null;

    /// <summary>What the trapezoidal rule costs where voltage and current both change: dt²/12 times the product's
    /// curvature over the overlap, J. Twice where an energy is a difference of two.</summary>
    public static double Trapezoid(JsonElement voltage, JsonElement current, double shift) =>
        2 * _fine.Interval * _fine.Interval / 12 * 2 * Steepest(voltage) * Steepest(current) * Math.Abs(shift);

    private static double Steepest(JsonElement points)
    {
        JsonElement[] p = [.. points.EnumerateArray()];
        return p.Zip(p.Skip(1)).Max(s => Math.Abs(
            (s.Second[1].GetDouble() - s.First[1].GetDouble()) / (s.Second[0].GetDouble() - s.First[0].GetDouble())));
    }

    private static SwitchingEvent Event(
        Grid grid, JsonElement waveform, double[] vds, double[] id, bool turnsOn, double departure) => new()
        {
            Vds = vds,
            Id = id,
            SampleInterval = grid.Interval,
            TurnsOn = turnsOn,
            Departure = departure,
            End = grid.Count - 1,
            Bus = Reading.Stated(waveform.GetProperty("bus_voltage").GetDouble()),
            OnState = Reading.Stated(waveform.TryGetProperty("on_state", out JsonElement on) ? on.GetDouble() : 0),
            Current = Reading.Stated(waveform.GetProperty(turnsOn ? "i_on" : "i_off").GetDouble()),
        };

    private static void Fill(Dictionary<string, double?> got, in SwitchingEvent edge)
    {
        string side = edge.TurnsOn ? "on" : "off";
        got[$"e{side}|e/10-10"] = Value(SwitchingEnergy.Form(edge, 0.10));
        got[$"e{side}|e/10-2"] = Value(SwitchingEnergy.Form(edge, 0.02));
        got[$"e{side}|whole-overlap"] =
            Integral.OfProduct(edge.Vds, edge.Id, 0, edge.Vds.Length - 1) * edge.SampleInterval;
        got[edge.TurnsOn ? "tr|mos/90-10" : "tf|mos/10-90"] = Value(SwitchingTime.VoltageTransition(edge));
        got[edge.TurnsOn ? "tr|igbt/10-90" : "tf|igbt/90-10"] = Value(SwitchingTime.CurrentTransition(edge));
        got[edge.TurnsOn ? "td_on|mos/10-90" : "td_off|mos/90-10"] = Value(SwitchingTime.VoltageDelay(edge));
        got[edge.TurnsOn ? "td_on|igbt/10-10" : "td_off|igbt/90-90"] = Value(SwitchingTime.CurrentDelay(edge));
        got[$"dvdt_{side}|slope/20-80"] = Value(SwitchingSlope.Voltage(edge, 0.2));
        got[$"dvdt_{side}|slope/10-90"] = Value(SwitchingSlope.Voltage(edge, 0.1));
        got[edge.TurnsOn ? "didt_on|slope/10-90" : "didt_off|slope/90-10"] = Value(SwitchingSlope.Current(edge));
    }
}
