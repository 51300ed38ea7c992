using System.Text.RegularExpressions;
using BenchRunner.Acceptance.Benches;
using BenchRunner.Acceptance.Files;
using BenchRunner.Acceptance.Plans;
using BenchRunner.Acceptance.Sequences;
using BenchRunner.Signals.Analysis;
using BenchRunner.Signals.Traces;

namespace BenchRunner.Acceptance.Tests.Plans;

/// <summary>Each refusal fires on files whose only flaw it is, and says where, what, what was expected and what to do.</summary>
public sealed partial class RefusalTests
{
    [GeneratedRegex(@"^.+\.yaml(:\d+:\d+)?: .+; expected .+; .+\.$")]
    private static partial Regex Form();

    private static void Refused(Sequence sequence, Bench bench, params string[] words)
    {
        IReadOnlyList<Problem> refusals = Planner.Plan(sequence, bench).Refusals;
        string all = string.Join('\n', refusals);
        Assert.Contains(refusals, problem => words.All(word => problem.ToString().Contains(word, StringComparison.Ordinal)));
        Assert.True(refusals.Count <= 2, all);
        Assert.All(refusals, problem => Assert.Matches(Form(), problem.ToString()));
    }

    private static void Refused(Func<OperatingPoint, OperatingPoint> change, params string[] words) =>
        Refused(Shipped.With(change), Shipped.Bench, words);

    private static void Refused(Func<Bench, Bench> change, params string[] words) =>
        Refused(Shipped.Rated, change(Shipped.Bench), words);

    private static Bench With(Channel channel, Func<ChannelSetup, ChannelSetup> change) => Shipped.Bench with
    {
        Channels = [.. Shipped.Bench.Channels.Select(setup => setup.Channel == channel ? change(setup) : setup)],
    };

    private static Bench With(string role, Func<InstrumentSetup, InstrumentSetup> change) => Shipped.Bench with
    {
        Roles = Shipped.Bench.Roles.ToDictionary(pair => pair.Key, pair => pair.Key == role ? change(pair.Value) : pair.Value),
    };

    private static Sequence Limited(string quantity, double? lower = null, double? upper = 1e-3) => Shipped.Rated with
    {
        Limits = [Shipped.Rated.Limits[0] with { Quantity = quantity, Lower = lower, Upper = upper }],
    };

    [Fact]
    public void A_bus_above_the_envelope_is_refused_where_it_is_written()
    {
        Bench low = Shipped.Bench with { Envelope = Shipped.Bench.Envelope with { Voltage = 500 } };
        Refused(Shipped.Rated, low, "winch-drive-incoming.yaml:24:18: bus-voltage is 600 V; expected at most the bench envelope of 500 V");
    }

    [Fact]
    public void A_current_above_the_envelope_is_refused() =>
        Refused(
            bench => bench with { Envelope = bench.Envelope with { Current = 39 } }, "load-current is 40 A", "envelope of 39 A");

    [Fact]
    public void A_second_pulse_that_ends_above_the_envelope_is_refused() =>
        Refused(bench => bench with { Envelope = bench.Envelope with { Current = 50 } }, "second pulse", "54.75 A", "50 A");

    [Fact]
    public void A_bank_that_stores_more_than_the_envelope_is_refused() =>
        Refused(bench => bench with { Envelope = bench.Envelope with { Energy = 8 } }, "stores 9 J", "8 J");

    [Fact]
    public void A_first_pulse_longer_than_the_envelope_is_refused() =>
        Refused(bench => bench with { Envelope = bench.Envelope with { Pulse = 5e-6 } }, "first pulse of 8.0", "5 us");

    [Fact]
    public void A_peak_at_the_second_turn_off_above_the_blocking_voltage_is_refused() =>
        Refused(
            Shipped.Rated with { Ratings = Shipped.Rated.Ratings with { BlockingVoltage = 750 } }, Shipped.Bench,
            "second turn-off", "peaks at about 786", "blocking voltage of 750 V");

    [Fact]
    public void A_bus_above_the_blocking_voltage_is_refused() =>
        Refused(
            Shipped.Rated with { Ratings = Shipped.Rated.Ratings with { BlockingVoltage = 590 } }, Shipped.Bench,
            "bus-voltage is 600 V", "blocking voltage of 590 V");

    [Fact]
    public void A_second_turn_off_above_the_peak_current_is_refused() =>
        Refused(
            Shipped.Rated with { Ratings = Shipped.Rated.Ratings with { PeakCurrent = 50 } }, Shipped.Bench,
            "second turn-off is at 54.75 A", "50 A");

    [Fact]
    public void Gate_levels_beyond_the_ratings_are_refused()
    {
        Refused(point => point with { GateOn = 23 }, "the gate is on at 23 V", "22 V");
        Refused(point => point with { GateOff = -9 }, "the gate is off at -9 V", "-8 V");
    }

    [Fact]
    public void A_junction_above_its_maximum_is_refused() =>
        Refused(
            Shipped.Rated with { Ratings = Shipped.Rated.Ratings with { JunctionMaximum = 25 } }, Shipped.Bench,
            "the junction reaches", "25 degC");

    [Fact]
    public void An_inductor_too_small_for_the_shortest_pulse_is_refused() =>
        Refused(
            Shipped.With(point => point with { LoadCurrent = 2, SecondPulse = 1e-6 }),
            Shipped.Bench with { LoadInductance = 120e-6 },
            "first pulse is 400 ns", "at least 500 ns", "120 uH is too small");

    [Fact]
    public void A_bank_too_small_for_the_droop_is_refused()
    {
        Refused(bench => bench with { BusCapacitance = 5e-6 }, "takes 5.", "5 uF", "bus-droop of 3 %");
        Refused(
            bench => bench with { BusCapacitance = 0.1e-6 }, "is never reached from 100 nF");
    }

    [Fact]
    public void A_gap_or_a_second_pulse_in_which_the_ringing_does_not_decay_is_refused()
    {
        Refused(point => point with { Gap = 700e-9 }, "the gap is 700 ns", "ringing of 42 MHz");
        Refused(point => point with { SecondPulse = 300e-9 }, "the second pulse is 300 ns", "500 ns");
    }

    [Fact]
    public void A_gap_in_which_the_current_dies_is_refused() =>
        Refused(point => point with { Gap = 1e-3 }, "in a gap of 1 ms", "half of it");

    [Fact]
    public void Trains_faster_than_the_inductor_decays_are_refused() =>
        Refused(point => point with { RepeatEvery = 1e-3 }, "repeat-every is 1 ms", "at least 1.");

    [Fact]
    public void Gate_resistors_other_than_fitted_are_refused()
    {
        Refused(point => point with { ResistanceOn = 10 }, "resistance-on is 10 Ohm", "4.7 Ohm that bench fake has fitted");
        Refused(point => point with { ResistanceOff = 10 }, "resistance-off is 10 Ohm", "2.2 Ohm");
        Assert.Empty(Planner.Plan(
            Shipped.With(point => point with { ResistanceOn = null, ResistanceOff = null }), Shipped.Bench).Refusals);
    }

    [Fact]
    public void A_hot_point_without_a_hotplate_is_refused() =>
        Refused(point => point with { Temperature = 125 }, "temperature is 125 degC", "no hotplate");

    [Fact]
    public void A_record_longer_than_the_memory_is_refused() =>
        Refused(bench => bench with { ScopeMemory = 10_000 }, "samples of 1 ns", "10000");

    [Fact]
    public void A_scope_too_slow_for_edge_and_ringing_is_refused()
    {
        Refused(bench => bench with { ScopeFastestInterval = 2e-9 }, "every 2 ns at best", "at most 1 ns");
        Refused(
            Shipped.Rated with { Expected = Shipped.Rated.Expected with { RingFrequency = 200e6 } }, Shipped.Bench,
            "every 1 ns at best", "at most 500 ps");
    }

    [Theory]
    [InlineData("bus_voltage", "bus-within")]
    [InlineData("bus_droop", "bus-droop")]
    [InlineData("i_off", "current-within")]
    [InlineData("ramp_straightness", "ramp-straightness")]
    [InlineData("ramp_slope", "bus-agrees")]
    [InlineData("vgs_on", "gate-levels")]
    [InlineData("vgs_off", "gate-levels")]
    public void A_limit_on_what_a_criterion_uses_is_refused(string quantity, string criterion) =>
        Refused(Limited(quantity), Shipped.Bench, $"on {quantity}", criterion, "selected");

    [Theory]
    [InlineData("eon", DeviceKind.Mosfet, DevicePosition.Low, true)]
    [InlineData("qrr", DeviceKind.Mosfet, DevicePosition.Low, false)]
    [InlineData("vds_high_peak_1", DeviceKind.Mosfet, DevicePosition.Low, false)]
    [InlineData("ring_damping", DeviceKind.Mosfet, DevicePosition.Low, true)]
    [InlineData("id_peak_on", DeviceKind.Mosfet, DevicePosition.Low, true)]
    [InlineData("qrr", DeviceKind.Diode, DevicePosition.High, true)]
    [InlineData("eoff", DeviceKind.Diode, DevicePosition.High, false)]
    [InlineData("qrr", DeviceKind.Mosfet, DevicePosition.Both, true)]
    public void A_limit_that_belongs_to_the_companion_is_refused(
        string quantity, DeviceKind kind, DevicePosition position, bool allowed)
    {
        Sequence sequence = Limited(quantity) with { Kind = kind, Position = position };
        if (allowed)
        {
            Assert.Empty(Planner.Plan(sequence, Shipped.Bench).Refusals.Select(problem => problem.ToString()));
        }
        else
        {
            Refused(sequence, Shipped.Bench, $"on {quantity}", "companion");
        }
    }

    [Fact]
    public void A_limit_without_its_channel_is_refused()
    {
        Refused(
            Limited("vds_high_peak_1"),
            Shipped.Bench with { Channels = [.. Shipped.Bench.Channels.Where(setup => setup.Channel != Channel.VdsHigh)] },
            "on vds_high_peak_1", "needs vds_high");
        Assert.Empty(Planner.Plan(Limited("qrr"), Shipped.Bench).Refusals);
    }

    [Fact]
    public void An_unknown_quantity_or_definition_is_refused()
    {
        Refused(Limited("qrx"), Shipped.Bench, "on qrx", "catalogue");
        Sequence other = Shipped.Rated with
        {
            Limits = [Shipped.Rated.Limits[0] with { Quantity = "qrr", Definition = "qrr/guess" }],
        };
        Refused(other, Shipped.Bench, "qrr/guess", "qrr/chord-90-25");
    }

    [Fact]
    public void Guard_bands_that_leave_no_room_are_refused()
    {
        // u = √((0.5 % · 700 V)² + (0.2 V)²) = 3.5 V, U = 6.9 V, two bands 13.7 V.
        Sequence narrow = Limited("vds_peak_off", 695, 705);
        Refused(narrow, Shipped.Bench, "10 V apart", "13.7 V", "no device can be accepted");
        Assert.Empty(Planner.Plan(narrow with { Decision = new DecisionRule(Guarded: false) }, Shipped.Bench).Refusals);
        Assert.Empty(Planner.Plan(Limited("vds_peak_off", 650, 750), Shipped.Bench).Refusals);
    }

    [Theory]
    [InlineData("supply")]
    [InlineData("pulser")]
    [InlineData("voltmeter")]
    public void A_role_that_the_guardian_cannot_reach_is_refused(string role)
    {
        Refused(Shipped.Rated, With(role, setup => setup with { Connections = 1 }), $"{role} serves one connection", "guardian");
        Refused(
            Shipped.Rated,
            Shipped.Bench with { Roles = Shipped.Bench.Roles.Where(pair => pair.Key != role).ToDictionary() },
            $"has no {role}");
    }

    [Fact]
    public void A_voltmeter_away_from_the_bank_is_refused()
    {
        Refused(Shipped.Rated, With("voltmeter", setup => setup with { At = "output" }), "the voltmeter is at output", "at: bank");
        Refused(Shipped.Rated, With("voltmeter", setup => setup with { At = null }), "states no place");
    }

    [Fact]
    public void A_load_on_the_wrong_rail_is_refused() =>
        Refused(bench => bench with { LoadToPositive = false }, "the low switch fires", "positive rail");

    [Fact]
    public void A_bench_that_does_not_record_the_firing_switch_is_refused() =>
        Refused(
            Limited("ring_damping", 0.04, null),
            Shipped.Bench with { Channels = [.. Shipped.Bench.Channels.Where(setup => setup.Channel != Channel.IdLow)] },
            "does not record id_low");

    [Theory]
    [InlineData(Channel.VdsHigh, "ground-referenced")]
    [InlineData(Channel.VgsHigh, "ground-referenced")]
    public void An_earthed_probe_on_the_high_side_is_refused(Channel channel, string probe) =>
        Refused(Shipped.Rated, With(channel, setup => setup with { Probe = probe }), $"{channel.Name()} has a {probe} probe");

    [Fact]
    public void A_channel_without_uncertainty_is_refused()
    {
        Refused(
            Shipped.Rated, With(Channel.IdLow, setup => setup with { GainUncertainty = 0 }), "id_low states no uncertainty of its gain");
        Refused(
            Shipped.Rated, With(Channel.IdLow, setup => setup with { SkewUncertainty = 0 }), "id_low states no uncertainty of its skew");
    }

    [Fact]
    public void Two_earth_points_are_refused() =>
        Refused(
            Shipped.Rated, With(Channel.VdsLow, setup => setup with { Probe = "ground-referenced" }),
            "vds_low is earthed at the low source", "id_low at the negative rail", "one earth point");

    [Theory]
    [InlineData(Channel.VdsLow, 700, "786")]
    [InlineData(Channel.IdLow, 50, "54.75 A")]
    [InlineData(Channel.Vbus, 500, "600 V")]
    [InlineData(Channel.VgsLow, 10, "18 V")]
    public void A_probe_beyond_its_rating_is_refused(Channel channel, double rating, string sees) =>
        Refused(
            Shipped.Rated, With(channel, setup => setup with { Rating = rating }), $"probe of {channel.Name()}", "rated", sees);

    [Fact]
    public void All_refusals_come_at_once_in_the_order_of_their_places()
    {
        Bench bad = Shipped.Bench with
        {
            Envelope = Shipped.Bench.Envelope with { Voltage = 300 }, LoadToPositive = false, ScopeMemory = 100,
        };
        IReadOnlyList<Problem> refusals = Planner.Plan(Shipped.Sequence, bad).Refusals;
        Assert.Equal(5, refusals.Count);
        Assert.Equal(refusals.OrderBy(p => p.Where.File, StringComparer.Ordinal).ThenBy(p => p.Where.Line), refusals);
    }

    [Fact]
    public void A_sequence_without_points_has_no_plan()
    {
        Planned planned = Planner.Plan(Shipped.Rated with { OperatingPoints = [], Limits = [] }, Shipped.Bench);
        Assert.Null(planned.Plan);
        Assert.Single(planned.Refusals);
    }
}
