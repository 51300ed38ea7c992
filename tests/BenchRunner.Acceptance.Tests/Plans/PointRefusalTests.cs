using BenchRunner.Acceptance.Benches;
using BenchRunner.Acceptance.Files;
using BenchRunner.Acceptance.Plans;
using BenchRunner.Acceptance.Sequences;
using static BenchRunner.Acceptance.Tests.Plans.Refusals;

namespace BenchRunner.Acceptance.Tests.Plans;

/// <summary>Each refusal of a point fires on files whose only flaw it is.</summary>
public sealed class PointRefusalTests
{
    [Fact]
    public void A_bus_above_the_envelope_is_refused_where_it_is_written()
    {
        Bench low = Shipped.Bench with { Envelope = Shipped.Bench.Envelope with { Voltage = 500 } };
        Refused(Shipped.Rated, low,
            "winch-drive-incoming.yaml:24:18: bus-voltage is 600 V; expected at most the bench envelope of 500 V");
    }

    [Fact]
    public void Volts_are_shown_as_files_write_them()
    {
        Sequence high = Shipped.With(point => point with { BusVoltage = 1250 });
        Bench large = Shipped.Bench with { Envelope = Shipped.Bench.Envelope with { Voltage = 1000, Energy = 100 } };
        Assert.Contains(
            Planner.Plan(high, large).Refusals,
            problem => problem.ToString().Contains(
                "bus-voltage is 1250 V; expected at most the bench envelope of 1000 V", StringComparison.Ordinal));
    }

    [Fact]
    public void A_current_above_the_envelope_is_refused() =>
        Refused(
            bench => bench with { Envelope = bench.Envelope with { Current = 39 } }, "load-current is 40 A",
                "envelope of 39 A");

    [Fact]
    public void A_second_pulse_that_ends_above_the_envelope_is_refused() =>
        Refused(bench => bench with { Envelope = bench.Envelope with { Current = 50 } }, "second pulse", "54.75 A",
            "50 A");

    [Fact]
    public void A_bank_that_stores_more_than_the_envelope_is_refused() =>
        Refused(bench => bench with { Envelope = bench.Envelope with { Energy = 8 } }, "stores 9 J", "8 J");

    [Fact]
    public void A_first_pulse_longer_than_the_envelope_is_refused() =>
        Refused(bench => bench with { Envelope = bench.Envelope with { Pulse = 5e-6 } }, "first pulse of 8.0", "5 us");

    [Fact]
    public void A_peak_at_the_second_turn_off_above_the_envelope_is_refused() =>
        Refused(
            bench => bench with { Envelope = bench.Envelope with { Voltage = 750 } }, "second turn-off", "about 786",
            "envelope of 750 V");

    [Fact]
    public void A_second_pulse_longer_than_the_envelope_is_refused() =>
        Refused(
            Shipped.With(point => point with { SecondPulse = 9e-6 }),
            Shipped.Bench with
            {
                Envelope = Shipped.Bench.Envelope with { Pulse = 8.5e-6 },
            },
            "the second pulse is 9 us", "envelope of 8.5 us");

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
            "the high junction reaches", "above the plate: low", "25 degC");

    [Fact]
    public void The_junction_that_is_too_hot_is_named() =>
        Refused(
            Shipped.Rated with
            {
                Expected = Shipped.Rated.Expected with { ForwardVoltage = 0.5 },
                Ratings = Shipped.Rated.Ratings with { JunctionMaximum = 25 },
                Limits = [],
            },
            Shipped.Bench, "the low junction reaches", "25 degC");

    [Fact]
    public void A_hot_junction_is_refused_by_plate_and_rise_together()
    {
        Sequence hot = Shipped.With(point => point with { Temperature = 149 });
        Sequence rated = hot with { Ratings = hot.Ratings with { JunctionMaximum = 150 } };
        Refused(rated, HotPlate(150), "the high junction reaches 155 degC", "150 degC");
        Assert.Empty(Planner.Plan(hot, HotPlate(150)).Refusals.Select(problem => problem.ToString()));
    }

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
        Refused(point => point with { ResistanceOn = 10 }, "resistance-on is 10 Ohm",
            "4.7 Ohm that bench fake has fitted");
        Refused(point => point with { ResistanceOff = 10 }, "resistance-off is 10 Ohm", "2.2 Ohm");
        Assert.Empty(Planner.Plan(
            Shipped.With(point => point with { ResistanceOn = null, ResistanceOff = null }), Shipped.Bench).Refusals);
    }

    [Fact]
    public void A_hot_point_without_a_hotplate_is_refused() =>
        Refused(point => point with { Temperature = 125 }, "temperature is 125 degC", "no hotplate");

    [Fact]
    public void A_point_hotter_than_the_envelope_or_cooler_than_the_room_is_refused()
    {
        Sequence At(double degrees) => Shipped.With(point => point with { Temperature = degrees });
        Refused(At(126), HotPlate(125), "temperature is 126 degC", "envelope of 125 degC");
        Refused(At(10), HotPlate(125), "temperature is 10 degC", "heats only");
        Refused(At(60), HotPlate(null), "temperature is 60 degC", "envelope of no temperature");
        Assert.Empty(Planner.Plan(At(125), HotPlate(125)).Refusals.Select(problem => problem.ToString()));
        Assert.Empty(Planner.Plan(At(25), Shipped.Bench).Refusals.Select(problem => problem.ToString()));
    }

    private static Bench HotPlate(double? most) => Shipped.Bench with
    {
        Roles = new Dictionary<string, InstrumentSetup>(Shipped.Bench.Roles)
        {
            ["hotplate"] = Shipped.Bench.Roles["scope"] with { Dialect = "generic-hotplate" },
        },
        Envelope = Shipped.Bench.Envelope with { Temperature = most },
    };

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

    [Fact]
    public void All_refusals_come_at_once_in_the_order_of_their_places()
    {
        Bench bad = Shipped.Bench with
        {
            Envelope = Shipped.Bench.Envelope with { Voltage = 300 },
            LoadToPositive = false,
            ScopeMemory = 100,
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
