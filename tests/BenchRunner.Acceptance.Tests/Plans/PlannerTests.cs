using BenchRunner.Acceptance.Benches;
using BenchRunner.Acceptance.Plans;
using BenchRunner.Acceptance.Sequences;
using BenchRunner.Signals.Analysis;
using BenchRunner.Signals.Traces;

namespace BenchRunner.Acceptance.Tests.Plans;

public sealed class PlannerTests
{
    private static readonly Plan _shipped = Planner.Plan(Shipped.Sequence, Shipped.Bench).Plan!;

    [Fact]
    public void The_shipped_sequence_is_refused_by_neither_shipped_bench()
    {
        Assert.Empty(Planner.Plan(Shipped.Sequence, Shipped.Bench).Refusals.Select(problem => problem.ToString()));
        Assert.Empty(Planner.Plan(Shipped.Sequence, Shipped.FourChannels)
            .Refusals.Select(problem => problem.ToString()));
    }

    [Fact]
    public void The_rated_point_is_planned_from_the_physics_of_the_bench_file()
    {
        PlannedPoint rated = _shipped.Points.Single(planned => planned.Point.Name == "rated");

        // ½ C V² and ½ L i², i = i_on + V t2/L: 40 A less (3 V + 2 V) · 6 µs / 120 µH, plus 15 A.
        Assert.Equal(9, rated.StoredEnergy, 1e-9);
        Assert.Equal(54.75, rated.Off2Current, 0.01);
        Assert.Equal(0.5 * 120e-6 * 54.75 * 54.75, rated.LoadEnergy, 1e-3);
        Assert.Equal(600 + (34e-9 * 54.75 / 10e-9), rated.Off2PeakVoltage, 1);

        // L I/V is 8 µs; resistance and droop add half a percent. The droop is ½ I t1/C over the bus.
        Assert.InRange(rated.FirstPulse, 8.0e-6, 8.1e-6);
        Assert.Equal(0.5 * 40 * 8.04e-6 / 50e-6 / 600, rated.BusDroop, 1e-4);
        Assert.Equal(1e-9, rated.SampleInterval);
        Assert.InRange(rated.Samples, 18_000, 22_000);
    }

    [Fact]
    public void Points_run_by_temperature_then_bus_then_current_unless_as_written()
    {
        OperatingPoint rated = Shipped.Rated.OperatingPoints[0];
        Sequence mixed = Shipped.Rated with
        {
            OperatingPoints =
            [
                rated with { Name = "hot", Temperature = 125, BusVoltage = 100 },
                rated with { Name = "high", LoadCurrent = 41 },
                rated with { Name = "low", BusVoltage = 300 },
                rated,
            ],
        };
        string[] Order(Sequence sequence) =>
            [.. Planner.Plan(sequence, Shipped.Bench).Plan!.Points.Select(planned => planned.Point.Name)];
        Assert.Equal(["low", "rated", "high", "hot"], Order(mixed));
        Assert.Equal(["hot", "high", "low", "rated"], Order(mixed with { AsWritten = true }));
    }

    [Fact]
    public void Ranges_hold_what_a_sound_part_does()
    {
        // Peaks of the nominal part at 600 V, 40 A, and at 60 V, 4 A (2.7 times the bus, 5 times the current).
        PlannedPoint rated = _shipped.Points.Single(planned => planned.Point.Name == "rated");
        Assert.True(Top(rated, Channel.VdsHigh) > 1.3 * 837);
        Assert.True(Top(rated, Channel.IdLow) > 2.5 * 40);
        Assert.True(Top(_shipped.Proving!, Channel.VdsHigh) > 161 * 48 / 60.0);
        Assert.True(Top(_shipped.Proving!, Channel.IdLow) > 19);
        Assert.All(rated.Ranges, range => Assert.True(range.Span > 0));
    }

    [Fact]
    public void Ranges_follow_what_a_probe_makes_of_the_signal()
    {
        Bench tenth = Shipped.Bench with
        {
            Channels = [.. Shipped.Bench.Channels.Select(setup => setup with { Gain = 0.1, Offset = 1 })],
        };
        PlannedRange plain = Shipped.Point(Shipped.Rated, Shipped.Bench).Ranges[1];
        PlannedRange scaled = Shipped.Point(Shipped.Rated, tenth).Ranges[1];
        Assert.Equal(plain.Span / 10, scaled.Span, 1e-9);
        Assert.Equal((plain.Offset / 10) + 1, scaled.Offset, 1e-9);
    }

    [Fact]
    public void The_proving_train_stays_below_sixty_volts_at_a_tenth_of_the_lowest_current()
    {
        Assert.Equal(48, _shipped.Proving!.Point.BusVoltage);
        Assert.Equal(2, _shipped.Proving.Point.LoadCurrent, 1e-12);
    }

    [Fact]
    public void Bytes_and_time_are_those_of_all_captures()
    {
        long samples = _shipped.Points.Sum(planned => (long)planned.Samples);
        Assert.InRange(_shipped.Bytes, samples * 20 * 6 * 2, (samples * 20 * 6 * 2) + (7L * 25_000 * 6 * 2));

        // 10 captures 250 ms apart, 12 ms of charging at 2.5 A, 0.6 s of bleeding 50 µF through 5 kΩ.
        Assert.Equal(2.5 + 0.012 + (0.25 * Math.Log(600 / 48.0)), _shipped.Duration, 0.01);
    }

    [Fact]
    public void The_junction_warms_with_current_and_only_where_an_impedance_is_stated()
    {
        double cool = Shipped.Point(Shipped.With(point => point with { LoadCurrent = 20 }), Shipped.Bench)
            .JunctionRise!.Value.Warmer;
        double warm = Shipped.Point(Shipped.Rated, Shipped.Bench).JunctionRise!.Value.Warmer;
        Assert.InRange(cool, 0.1, warm);
        Assert.InRange(warm, 1, 15);
        Assert.Null(Shipped.Point(Shipped.Rated with { ThermalImpedance = [] }, Shipped.Bench).JunctionRise);
    }

    [Fact]
    public void Both_junctions_are_warmed_and_the_second_turn_off_counts()
    {
        // An impedance that does not depend on time gives P · Zth while the power lasts: at off2 the switch loses
        // V · i, the diode V_F · i, a sixteenth of a straight decay long. An hour between trains adds next to nothing.
        Sequence flat = Shipped.With(point => point with { RepeatEvery = 3600 }) with
        {
            ThermalImpedance = [new ThermalPoint(double.PositiveInfinity, 1e-3)],
            Limits = [],
        };
        JunctionRise rise = Shipped.Point(flat, Shipped.Bench).JunctionRise!.Value;
        Assert.Equal(1e-3 * 600 * 54.75, rise.Low, 0.02);
        Assert.Equal(1e-3 * 3 * 54.75 * 31 / 32, rise.High, 0.001);

        Sequence longer = flat with { OperatingPoints = [flat.OperatingPoints[0] with { SecondPulse = 5e-6 }] };
        Assert.Equal(
            1e-3 * 600 * (54.75 + 10), Shipped.Point(longer, Shipped.Bench).JunctionRise!.Value.Low, 0.02);
    }

    [Fact]
    public void The_places_are_those_that_fire_and_freewheel()
    {
        JunctionRise low = Shipped.Point(Shipped.Rated with { Limits = [] }, Shipped.Bench).JunctionRise!.Value;
        JunctionRise high = Shipped.Point(
            Shipped.Rated with { Limits = [], Position = DevicePosition.High },
            Shipped.Bench with { LoadToPositive = false }).JunctionRise!.Value;
        Assert.Equal((low.Low, low.High), (high.High, high.Low));
    }

    [Theory]
    [InlineData(DevicePosition.Low, "high")]
    [InlineData(DevicePosition.High, "low")]
    [InlineData(DevicePosition.Both, null)]
    public void The_companion_sits_in_the_other_place(DevicePosition position, string? place) =>
        Assert.Equal(place, HalfBridge.CompanionPlace(Shipped.Sequence with { Position = position }));

    [Fact]
    public void Each_new_temperature_costs_a_soak()
    {
        OperatingPoint rated = Shipped.Rated.OperatingPoints[0];
        Sequence At(params double?[] temperatures) => Shipped.Rated with
        {
            AsWritten = true,
            OperatingPoints = [.. temperatures.Select((degrees, i) => rated with { Name = $"p{i}", Temperature = degrees })],
        };
        double Duration(Sequence sequence) => Planner.Plan(sequence, Shipped.Bench).Plan!.Duration;
        Assert.Equal(Duration(At(null, null, null)) + 240, Duration(At(null, 125, 150)), 1e-6);
        Assert.Equal(Duration(At(null, null, null)) + 60, Duration(At(125, 125, 125) with { Soak = 60 }), 1e-6);
    }

    [Theory]
    [InlineData(10e-6, 0.004)]
    [InlineData(2.5e-6, 0.002)]
    [InlineData(100e-6, 0.017)]
    [InlineData(1e-3, 0.03)]
    [InlineData(0.1, 0.45)]
    [InlineData(1000, 0.45)]
    public void Thermal_impedance_lies_on_the_logarithm_of_time_between_its_points(double time, double expected) =>
        Assert.Equal(expected, TransientImpedance.At(Shipped.Sequence.ThermalImpedance, time), 1e-9);

    [Fact]
    public void The_analysis_takes_what_bench_and_sequence_state()
    {
        AnalysisSettings settings = Planner.AnalysisSettingsOf(Shipped.Bench, Shipped.Sequence);
        Assert.Equal(DevicePosition.Both, settings.Position);
        Assert.Equal(3, settings.ForwardVoltage);
        Assert.Equal(0.5, settings.HighSideThreshold);
        Assert.Equal(6, settings.Corrections.Count);
        Assert.Null(settings.Corrections[Channel.IdLow].Offset);
        Assert.False(settings.EveryDefinition);
    }

    [Fact]
    public void A_definition_that_a_limit_asks_for_is_formed_and_two_of_them_form_every_one()
    {
        Limit qrr = Shipped.Sequence.Limits.First(limit => limit.Quantity == "qrr") with { Definition = "qrr/fall-10" };
        Sequence one = Shipped.Sequence with { Limits = [qrr] };
        Sequence two = Shipped.Sequence with { Limits = [qrr, qrr with { Definition = "qrr/to-zero", At = "rated" }] };
        Assert.Equal("qrr/fall-10", Planner.AnalysisSettingsOf(Shipped.Bench, one).Definitions["qrr"]);
        Assert.True(Planner.AnalysisSettingsOf(Shipped.Bench, two).EveryDefinition);
    }

    [Theory]
    [InlineData(DeviceKind.Mosfet, DevicePosition.Low, false, true)]
    [InlineData(DeviceKind.Mosfet, DevicePosition.High, true, true)]
    [InlineData(DeviceKind.Igbt, DevicePosition.Both, false, false)]
    [InlineData(DeviceKind.Diode, DevicePosition.High, false, true)]
    [InlineData(DeviceKind.Diode, DevicePosition.Low, true, true)]
    public void The_switch_under_test_or_the_diodes_companion_fires(
        DeviceKind kind, DevicePosition position, bool firesHigh, bool companion)
    {
        Sequence sequence = Shipped.Sequence with { Kind = kind, Position = position };
        Assert.Equal(firesHigh, HalfBridge.FiresHigh(sequence));
        Assert.Equal(companion, HalfBridge.NeedsCompanion(sequence));
    }

    [Fact]
    public void A_next_range_keeps_zero_in_its_place_or_its_middle()
    {
        var voltage = new PlannedRange(Channel.VdsLow, 2, 1100, 450);
        Assert.Equal((2200, 900), (voltage.Next(wider: true).Span, voltage.Next(wider: true).Offset));
        var bus = new PlannedRange(Channel.Vbus, 6, 300, 600);
        Assert.Equal((150, 600), (bus.Next(wider: false).Span, bus.Next(wider: false).Offset));
    }

    private static double Top(PlannedPoint planned, Channel channel)
    {
        PlannedRange range = planned.Ranges.Single(one => one.Channel == channel);
        return range.Offset + (range.Span / 2);
    }
}
