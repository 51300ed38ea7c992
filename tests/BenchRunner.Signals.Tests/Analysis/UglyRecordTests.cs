using System.Text.Json;
using BenchRunner.Signals.Analysis;
using BenchRunner.Signals.Files;
using BenchRunner.Signals.Quantities;
using BenchRunner.Signals.Tests.Support;
using BenchRunner.Signals.Traces;

namespace BenchRunner.Signals.Tests.Analysis;

/// <summary>Ugly records give right values or reasons, never wrong numbers.</summary>
/// <remarks>The records and the truth beside them are those of the simulated half bridge before probes, noise and
/// converter (tests/FakeBench.Tests/Ugly makes them); the truth is found by a walk of its own over finer
/// samples.</remarks>
public sealed class UglyRecordTests
{
    /// <summary>The gate follows its driver within so much, s.</summary>
    private const double GateDelay = 40e-9;

    private static readonly string _folder = Path.Combine(Reference.Folder, "ugly");

    public static TheoryData<string> Names =>
    [
        .. Directory.GetFiles(_folder, "*.json").Select(file => Path.GetFileNameWithoutExtension(file))
            .Order(StringComparer.Ordinal),
    ];

    [Theory]
    [MemberData(nameof(Names))]
    public void Every_edge_is_found_once_and_where_the_driver_put_it(string name)
    {
        (AnalysisResult result, JsonElement truth, _) = Analyse(name);
        TrainFacts train = result.Train;
        (string Name, PulseEdge? Edge)[] named =
            [("on1", train.On1), ("off1", train.Off1), ("on2", train.On2), ("off2", train.Off2)];
        JsonElement edges = truth.GetProperty("edges");

        Assert.Equal(edges.EnumerateObject().Count(), train.Edges.Count);
        foreach ((string edge, PulseEdge? found) in named)
        {
            if (edges.TryGetProperty(edge, out JsonElement driver))
            {
                Assert.NotNull(found);
                Assert.InRange(found.Value.At - driver.GetDouble(), 0, GateDelay);
                Assert.InRange(found.Value.Departure - driver.GetDouble(), -2e-9, GateDelay);
            }
            else
            {
                Assert.Null(found);
            }
        }
    }

    [Theory]
    [MemberData(nameof(Names))]
    public void Every_value_is_within_its_tolerance_of_the_truth_or_has_a_reason(string name)
    {
        (AnalysisResult result, JsonElement truth, Waveform waveform) = Analyse(name);
        List<string> wrong = [];
        int values = 0;

        foreach (JsonProperty one in truth.GetProperty("truth").EnumerateObject())
        {
            QuantityValue found = result.Quantities.Single(value => value.Quantity == one.Name);
            double expected = one.Value.GetProperty("value").GetDouble();
            double tolerance = one.Value.GetProperty("tolerance").GetDouble();
            if (found.Value is { } number)
            {
                values++;
                if (Math.Abs(number - expected) > tolerance * Math.Abs(expected))
                {
                    wrong.Add($"{one.Name} is {number:G5} where {expected:G5} is true, {tolerance:P0} allowed");
                }
            }
            else
            {
                bool known = found.Reason is "vds_high is not measured" or "vds_high is clipped" or "id_low is clipped";
                Assert.True(known, $"{one.Name}: {found.Reason}");
            }
        }

        Assert.Empty(wrong);
        Assert.True(values >= (waveform.Has(Channel.VdsHigh) ? 9 : 14), $"only {values} values");
    }

    [Fact]
    public void What_is_clipped_in_one_record_leaves_nothing_behind_for_the_next()
    {
        string[] alone = Values();
        for (int i = 0; i < 5; i++)
        {
            Analyse("clipped-peak");
            Assert.Equal(alone, Values());
        }

        string[] Values() => [.. Analyse("everything").Result.Quantities.Select(value => value.ToString())];
    }

    [Fact]
    public void The_set_is_as_ugly_as_it_says()
    {
        Waveform gate = Read("ringing-gate");
        ReadOnlySpan<double> vgs = gate[Channel.VgsLow];
        int crossings = 0;
        double peak = 0;
        for (int i = 1; i < vgs.Length; i++)
        {
            crossings += vgs[i - 1] > 7 != vgs[i] > 7 ? 1 : 0;
            peak = Math.Max(peak, vgs[i]);
        }

        Assert.InRange(crossings, 20, 200);
        Assert.InRange(peak, 1.9 * 18, 3 * 18);
        Waveform below = Read("below-zero");
        Assert.True(below[Channel.VdsLow].ToArray().Min() < -40, "vds does not fall far below zero");
        Assert.Contains(double.PositiveInfinity, Read("clipped-peak")[Channel.VdsHigh].ToArray());
        double[] steps = [.. Read("coarse-steps")[Channel.VdsLow].ToArray().Distinct().Order()];
        Assert.InRange(steps[1] - steps[0], 0.0099 * 400, 0.0101 * 400);
    }

    private static Waveform Read(string name)
    {
        WaveformRead read = WaveformFile.Read(Path.Combine(_folder, name + ".csv.gz"));
        Assert.Empty(read.Problems.Select(problem => problem.ToString()));
        return read.Waveform!;
    }

    private static (AnalysisResult Result, JsonElement Truth, Waveform Waveform) Analyse(string name)
    {
        using JsonDocument document = Reference.Json($"ugly/{name}.json");
        Dictionary<Channel, ChannelCorrection> corrections = [];
        foreach (JsonProperty channel in document.RootElement.GetProperty("stated").EnumerateObject())
        {
            JsonElement offset = channel.Value.GetProperty("offset");
            corrections[ChannelNames.Parse(channel.Name)!.Value] = new ChannelCorrection(
                channel.Value.GetProperty("gain").GetDouble(),
                offset.ValueKind == JsonValueKind.Null ? null : offset.GetDouble(),
                channel.Value.GetProperty("skew").GetDouble());
        }

        Waveform waveform = Read(name);
        // Shunt and forward voltage of the simulated bench.
        AnalysisSettings settings = new()
        {
            Corrections = corrections,
            Shunt = new Shunt(5e-3, 0),
            ForwardVoltage = 3,
        };
        return (WaveformAnalysis.Analyse(waveform, settings), document.RootElement.Clone(), waveform);
    }
}
