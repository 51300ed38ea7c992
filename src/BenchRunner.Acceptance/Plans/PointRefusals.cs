using System.Globalization;
using BenchRunner.Acceptance.Benches;
using BenchRunner.Acceptance.Files;
using BenchRunner.Acceptance.Sequences;

namespace BenchRunner.Acceptance.Plans;

/// <summary>Why one operating point must not be run: envelope, ratings, train, bank, gate, temperature.</summary>
internal static class PointRefusals
{
    /// <summary>
    /// Shortest usable pulse or gap, s: twice the dead time within which crossings of the gate count as one edge.
    /// </summary>
    internal const double ShortestPulse = 500e-9;

    /// <summary>How far a gate resistor may be from the one fitted, relative: rounding of its text, no more.</summary>
    private const double SameResistor = 1e-6;

    /// <summary>All refusals of a point, in the order in which a person would fix them.</summary>
    /// <param name="planned">The point as planned.</param>
    /// <param name="train">What its train does.</param>
    /// <param name="sequence">The sequence.</param>
    /// <param name="bench">The bench.</param>
    public static IEnumerable<Problem> Of(PlannedPoint planned, PulseTrain train, Sequence sequence, Bench bench) =>
        Envelope(planned, bench)
            .Concat(Ratings(planned, sequence, bench))
            .Concat(Train(planned, train, sequence, bench))
            .Concat(Widths(planned, sequence, bench))
            .Concat(Gate(planned.Point, bench))
            .Concat(Temperature(planned.Point, sequence, bench));

    /// <summary>The place of a key of a point; of the point where the key's is not known.</summary>
    internal static Place At(OperatingPoint point, string key) =>
        point.Keys.TryGetValue(key, out Place place) ? place : point.Where;

    private static IEnumerable<Problem> Envelope(PlannedPoint planned, Bench bench)
    {
        OperatingPoint point = planned.Point;
        Envelope most = bench.Envelope;
        if (point.BusVoltage > most.Voltage)
        {
            yield return new Problem(
                At(point, "bus-voltage"), $"bus-voltage is {V(point.BusVoltage)}",
                $"at most the bench envelope of {V(most.Voltage)}", "lower it or choose another bench");
        }

        if (point.LoadCurrent > most.Current)
        {
            yield return new Problem(
                At(point, "load-current"), $"load-current is {A(point.LoadCurrent)}",
                $"at most the bench envelope of {A(most.Current)}", "lower it or choose another bench");
        }
        else if (planned.Off2Current > most.Current)
        {
            yield return new Problem(
                At(point, "pulses.second"),
                $"the second pulse of {S(point.SecondPulse)} ends at {A(planned.Off2Current)}",
                $"at most the bench envelope of {A(most.Current)}", "shorten it or lower load-current");
        }

        if (point.BusVoltage <= most.Voltage && planned.Off2PeakVoltage > most.Voltage)
        {
            yield return new Problem(
                At(point, "pulses.second"),
                $"the second turn-off at {A(planned.Off2Current)} peaks at about {V(planned.Off2PeakVoltage)}",
                $"at most the bench envelope of {V(most.Voltage)}",
                "shorten the second pulse, lower bus-voltage or current");
        }

        if (planned.StoredEnergy > most.Energy)
        {
            yield return new Problem(
                At(point, "bus-voltage"),
                $"bus-voltage {V(point.BusVoltage)} stores {J(planned.StoredEnergy)} in the bank",
                $"at most the bench envelope of {J(most.Energy)}", "lower it or choose a bench with a smaller bank");
        }

        if (planned.FirstPulse > most.Pulse)
        {
            yield return new Problem(
                At(point, "load-current"),
                $"{A(point.LoadCurrent)} at {V(point.BusVoltage)} needs a first pulse of {S(planned.FirstPulse)}",
                $"at most the bench envelope of {S(most.Pulse)}",
                "lower the current or choose a smaller load inductance");
        }

        if (point.SecondPulse > most.Pulse)
        {
            yield return new Problem(
                At(point, "pulses.second"), $"the second pulse is {S(point.SecondPulse)}",
                $"at most the bench envelope of {S(most.Pulse)}", "shorten it");
        }
    }

    private static IEnumerable<Problem> Ratings(PlannedPoint planned, Sequence sequence, Bench bench)
    {
        OperatingPoint point = planned.Point;
        DeviceRatings ratings = sequence.Ratings;
        if (point.BusVoltage > ratings.BlockingVoltage)
        {
            yield return new Problem(
                At(point, "bus-voltage"), $"bus-voltage is {V(point.BusVoltage)}",
                $"at most the rated blocking voltage of {V(ratings.BlockingVoltage)}", "lower it");
        }
        else if (planned.Off2PeakVoltage > ratings.BlockingVoltage)
        {
            yield return new Problem(
                At(point, "pulses.second"),
                $"the second turn-off at {A(planned.Off2Current)} peaks at about {V(planned.Off2PeakVoltage)} "
                + $"({V(point.BusVoltage)} and {SiText.Format(bench.LoopInductance, "H")} of loop)",
                $"at most the rated blocking voltage of {V(ratings.BlockingVoltage)}",
                "shorten the second pulse, lower bus-voltage or current");
        }

        if (planned.Off2Current > ratings.PeakCurrent)
        {
            yield return new Problem(
                At(point, point.LoadCurrent > ratings.PeakCurrent ? "load-current" : "pulses.second"),
                $"the second turn-off is at {A(planned.Off2Current)}",
                $"at most the rated peak current of {A(ratings.PeakCurrent)}",
                "lower load-current or shorten the second pulse");
        }

        if (point.GateOn > ratings.GateHigh)
        {
            yield return new Problem(
                At(point, "gate.on"), $"the gate is on at {V(point.GateOn)}",
                $"at most the rated gate voltage of {V(ratings.GateHigh)}", "lower it");
        }

        if (point.GateOff < ratings.GateLow)
        {
            yield return new Problem(
                At(point, "gate.off"), $"the gate is off at {V(point.GateOff)}",
                $"at least the rated gate voltage of {V(ratings.GateLow)}", "raise it");
        }

        double plate = point.Temperature ?? bench.Ambient;
        if (planned.JunctionRise is { } rise && plate + rise.Warmer > ratings.JunctionMaximum)
        {
            yield return new Problem(
                At(point, "pulses.repeat-every"),
                $"the {(rise.High > rise.Low ? "high" : "low")} junction reaches "
                + $"{SiText.Format(plate + rise.Warmer, "degC", 3)} (above the plate: low "
                + $"{SiText.Format(rise.Low, "K", 3)}, high {SiText.Format(rise.High, "K", 3)})",
                $"at most the rated {SiText.Format(ratings.JunctionMaximum, "degC")}",
                "repeat less often, shorten the second pulse or lower the temperature");
        }
    }

    private static IEnumerable<Problem> Train(PlannedPoint planned, PulseTrain train, Sequence sequence, Bench bench)
    {
        OperatingPoint point = planned.Point;
        if (train.FirstPulse is null)
        {
            yield return new Problem(
                At(point, "load-current"),
                $"{A(point.LoadCurrent)} is never reached from {SiText.Format(bench.BusCapacitance, "F")} at "
                + $"{V(point.BusVoltage)} through {SiText.Format(bench.LoadInductance, "H")}",
                "a bank and a load that give the current",
                "lower the current, or choose a larger bank or a smaller inductor");
        }
        else if (planned.BusDroop > sequence.Validity.BusDroop)
        {
            yield return new Problem(
                At(point, "load-current"),
                $"the first pulse takes {SiText.Percent(planned.BusDroop)} from a bus of "
                + $"{SiText.Format(bench.BusCapacitance, "F")}",
                $"at most bus-droop of {SiText.Percent(sequence.Validity.BusDroop)}",
                "choose a larger bank, a smaller load inductance or a lower current");
        }

        if (train.OnCurrent < 0.5 * point.LoadCurrent)
        {
            yield return new Problem(
                At(point, "pulses.gap"),
                $"the current falls from {A(point.LoadCurrent)} to {A(train.OnCurrent)} in a gap of {S(point.Gap)}",
                "at least half of it at the second turn-on", "shorten the gap");
        }

        if (point.RepeatEvery < planned.Recovery)
        {
            yield return new Problem(
                At(point, "pulses.repeat-every"), $"repeat-every is {S(point.RepeatEvery)}",
                $"at least {S(planned.Recovery)}, in which the inductor decays and the bus is charged again",
                "lengthen it");
        }
    }

    private static IEnumerable<Problem> Widths(PlannedPoint planned, Sequence sequence, Bench bench)
    {
        OperatingPoint point = planned.Point;
        foreach ((string key, string name, double width, string advice) in new[]
        {
            ("load-current", "first pulse", planned.FirstPulse,
                $"the load inductance of {SiText.Format(bench.LoadInductance, "H")}"
                + " is too small: choose a larger one or a higher current"),
            ("pulses.gap", "gap", point.Gap, "lengthen it"),
            ("pulses.second", "second pulse", point.SecondPulse, "lengthen it"),
        })
        {
            if (width < ShortestPulse)
            {
                yield return new Problem(
                    At(point, key), $"the {name} is {S(width)}",
                    $"at least {S(ShortestPulse)}, so that the edges of a ringing gate can be told apart", advice);
            }
            else if (width < planned.RingDecay && key != "load-current")
            {
                yield return new Problem(
                    At(point, key), $"the {name} is {S(width)}",
                    $"at least the {S(planned.RingDecay)} in which a ringing of "
                    + $"{SiText.Format(sequence.Expected.RingFrequency, "Hz")} decays", advice);
            }
        }
    }

    private static IEnumerable<Problem> Gate(OperatingPoint point, Bench bench)
    {
        foreach ((string key, double? asked, double fitted) in new[]
        {
            ("gate.resistance-on", point.ResistanceOn, bench.GateResistorOn),
            ("gate.resistance-off", point.ResistanceOff, bench.GateResistorOff),
        })
        {
            if (asked is { } wanted && Math.Abs(wanted - fitted) > SameResistor * Math.Max(wanted, fitted))
            {
                yield return new Problem(
                    At(point, key), $"{key[5..]} is {SiText.Format(wanted, "Ohm")}",
                    $"the {SiText.Format(fitted, "Ohm")} that bench {bench.Name} has fitted",
                    "change it or fit the other resistor");
            }
        }
    }

    private static IEnumerable<Problem> Temperature(OperatingPoint point, Sequence sequence, Bench bench)
    {
        if (point.Temperature is not { } hot || Math.Abs(hot - bench.Ambient) <= sequence.Validity.TemperatureWithin)
        {
            yield break;
        }

        string found = $"temperature is {SiText.Format(hot, "degC")}";
        string ambient = $"ambient ({SiText.Format(bench.Ambient, "degC")})";
        if (!bench.Roles.ContainsKey("hotplate"))
        {
            yield return new Problem(
                At(point, "temperature"), found, $"{ambient} on bench {bench.Name}, which has no hotplate",
                "write ambient or choose a bench with a hotplate");
        }
        else if (hot < bench.Ambient)
        {
            yield return new Problem(
                At(point, "temperature"), found, $"{ambient} or more: the hotplate of bench {bench.Name} heats only",
                "raise it or write ambient");
        }
        else if (!(hot <= bench.Envelope.Temperature))
        {
            string most = bench.Envelope.Temperature is { } degrees ? SiText.Format(degrees, "degC") : "no temperature";
            yield return new Problem(
                At(point, "temperature"), found, $"at most the bench envelope of {most}",
                "lower it or choose another bench");
        }
    }

    /// <summary>Volts as files state them: 1250 V rather than 1.25 kV.</summary>
    private static string V(double value) => Math.Abs(value) is >= 1000 and < 100_000
        ? string.Create(CultureInfo.InvariantCulture, $"{value:0.#} V")
        : SiText.Format(value, "V");

    private static string A(double value) => SiText.Format(value, "A");

    private static string S(double value) => SiText.Format(value, "s", 3);

    private static string J(double value) => SiText.Format(value, "J", 3);
}
