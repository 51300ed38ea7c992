using System.Globalization;
using System.Text.Json;
using BenchRunner.Signals.Switching;
using BenchRunner.Signals.Tests.Support;

namespace BenchRunner.Signals.Tests.ClosedForm;

/// <summary>
/// Analytic waveforms and the values that each definition must give for them, in 40-digit arithmetic:
/// tests/reference/closed-form.json. Every case is run, every value in it is compared.
/// </summary>
public sealed class ClosedFormTests
{
    private const int Cases = 69;
    private const int Values = 517;

    private static readonly JsonDocument _document = Reference.Json("closed-form.json");

    public static TheoryData<string> Ids => [.. All().Select(c => c.GetProperty("id").GetString()!)];

    [Fact]
    public void The_file_holds_all_its_cases_and_values()
    {
        Assert.Equal(Cases, All().Length);
        Assert.Equal(Values, All().Sum(c => Expected(c).Count()));
    }

    [Theory]
    [MemberData(nameof(Ids))]
    public void A_case_gives_its_closed_form(string id)
    {
        JsonElement of = Case(id);
        Dictionary<string, double?> got = Run(of);
        List<string> wrong = [];
        foreach (JsonProperty expected in Expected(of))
        {
            if (!got.TryGetValue(expected.Name, out double? value))
            {
                wrong.Add($"{expected.Name}: not formed");
            }
            else if (expected.Value.ValueKind == JsonValueKind.Null)
            {
                if (value is not null)
                {
                    wrong.Add($"{expected.Name}: {value} where there is none");
                }
            }
            else
            {
                double wanted = expected.Value.GetDouble();
                double allowed = Allowed(of, expected.Name, wanted);
                if (!(Math.Abs((value ?? double.NaN) - wanted) <= allowed))
                {
                    wrong.Add(string.Create(
                        CultureInfo.InvariantCulture,
                        $"{expected.Name}: {value:G12}, closed form {wanted:G12}, allowed {allowed:G3}"));
                }
            }
        }

        Assert.True(wrong.Count == 0, string.Join('\n', wrong));
    }

    private static JsonElement[] All() => [.. _document.RootElement.GetProperty("cases").EnumerateArray()];

    private static JsonElement Case(string id) => All().Single(c => c.GetProperty("id").GetString() == id);

    private static IEnumerable<JsonProperty> Expected(JsonElement of)
    {
        IEnumerable<JsonProperty> expected = of.GetProperty("expect").EnumerateObject();
        return of.TryGetProperty("also", out JsonElement also) ? expected.Concat(also.EnumerateObject()) : expected;
    }

    private static Dictionary<string, double?> Run(JsonElement of)
    {
        JsonElement waveform = of.GetProperty("waveform");
        string id = of.GetProperty("id").GetString()!;
        double Number(string name) => waveform.GetProperty(name).GetDouble();
        return id switch
        {
            _ when id.StartsWith("skew-", StringComparison.Ordinal) => SwitchingCases.Skewed(
                Case("on-1").GetProperty("waveform"), Case("off-1").GetProperty("waveform"), Number("id_low_shift_s")),
            "ramp-straight" => LevelCases.Ramp(0.3, 5e6, 0),
            "ramp-bent-2.0e+10" => LevelCases.Ramp(0, 5e6, 2e10),
            "ramp-bent-1.0e+11" => LevelCases.Ramp(0, 5e6, 1e11),
            "first-pulse" => LevelCases.FirstPulse(Number("L"), Number("I"), Number("V")),
            "bus-mean" => LevelCases.BusMean(waveform),
            "bus-from-vds" => LevelCases.BusFromVds(Number("V_F")),
            "load-line" => LevelCases.LoadLineAtTurnOn(waveform),
            "droop" => LevelCases.DroopOf(),
            "parabola" => LevelCases.TopThree(waveform),
            "parabola-20" => LevelCases.TopFifth(waveform),
            _ when id.StartsWith("exponential-", StringComparison.Ordinal) =>
                RecoveryCases.Exponential(Number("irm"), Number("ta"), Number("tau")),
            _ when id.StartsWith("half-sine-", StringComparison.Ordinal) =>
                RecoveryCases.HalfSine(Number("irm"), Number("f")),
            _ when waveform.TryGetProperty("irr", out _) => RecoveryCases.Lines(waveform),
            _ when waveform.TryGetProperty("i_on", out _) => SwitchingCases.Edge(waveform, turnsOn: true),
            _ when waveform.TryGetProperty("i_off", out _) => SwitchingCases.Edge(waveform, turnsOn: false),
            _ when waveform.TryGetProperty("modes", out _) => RingCases.Ring(waveform),
            _ when id.StartsWith("inductance-", StringComparison.Ordinal) => new()
            {
                ["inductance"] = RingInductance.Form(Number("f"), Number("damping"), Number("C")),
            },
            _ when id.StartsWith("copy-times-", StringComparison.Ordinal) => ComparisonCases.Copy(Number("s")),
            _ when id.StartsWith("sine-shift-", StringComparison.Ordinal) => ComparisonCases.Late(Number("phase")),
            "shunt-ramp" => RingCases.ShuntRamp(Number("R"), Number("L"), Number("didt")),
            _ => [],
        };
    }

    /// <summary>The tolerance of the file; where the waveform has corners, what sampling them costs comes on
    /// top.</summary>
    private static double Allowed(JsonElement of, string key, double wanted)
    {
        double relative = of.GetProperty("tol_rel").GetDouble();
        JsonElement waveform = of.GetProperty("waveform");
        double allowed = relative * (wanted == 0 ? 1 : Math.Abs(wanted));
        if (waveform.TryGetProperty("id_low_shift_s", out JsonElement shift))
        {
            JsonElement on = Case("on-1").GetProperty("waveform");
            return allowed + SwitchingCases.Trapezoid(
                on.GetProperty("vds_low"), on.GetProperty("id_low"), shift.GetDouble());
        }

        if (of.TryGetProperty("relative_standard_deviation_bound", out _))
        {
            return RingCases.Noise(of, key, wanted);
        }

        if (waveform.TryGetProperty("irr", out JsonElement irr))
        {
            JsonElement[] points = [.. irr.EnumerateArray()];
            int top = Array.FindIndex(points, p => p[1].GetDouble() == points.Max(q => q[1].GetDouble()));
            double peak = points[top][0].GetDouble();
            double fall = (points[top + 1][0].GetDouble() - peak)
                * points[top][1].GetDouble() / (points[top][1].GetDouble() - points[top + 1][1].GetDouble());
            return allowed + RecoveryCases.Sampling(key, wanted, points[top][1].GetDouble(), peak, fall, 1e-12);
        }

        return waveform.TryGetProperty("tau", out JsonElement tau)
            ? allowed + RecoveryCases.Sampling(
                key,
                wanted,
                waveform.GetProperty("irm").GetDouble(),
                waveform.GetProperty("ta").GetDouble(),
                tau.GetDouble(),
                0.5e-12)
            : allowed;
    }
}
