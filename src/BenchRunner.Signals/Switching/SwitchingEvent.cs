using BenchRunner.Signals.Edges;
using BenchRunner.Signals.Quantities;
using BenchRunner.Signals.Traces;

namespace BenchRunner.Signals.Switching;

/// <summary>One turn-on or turn-off of the firing switch: the samples and levels that its quantities are read
/// from.</summary>
/// <remarks>
/// A p % level of vds is on + p (bus − on), everywhere; a p % level of the current is p of the load's. A level that
/// lies within the hysteresis of its 0 % state has no crossing: "level within the noise".
/// </remarks>
public readonly ref struct SwitchingEvent
{
    private const double HysteresisPart = 0.01;
    private const double DecidedPart = 0.02;
    private const double HalfWay = 0.5;

    /// <summary>Voltage of the firing switch, V, uniform, finite.</summary>
    public required Samples Vds { get; init; }

    /// <summary>Current of the firing switch, A, on the same grid.</summary>
    public required Samples Id { get; init; }

    /// <summary>Sample interval, s; above 0.</summary>
    public required double SampleInterval { get; init; }

    /// <summary>Whether the switch turns on (on2) or off (off1).</summary>
    public required bool TurnsOn { get; init; }

    /// <summary>Departure of the gate's edge, in samples: no event of the edge lies before it.</summary>
    public required double Departure { get; init; }

    /// <summary>Where the search for events ends, in samples: the next edge's departure, or the record's end.</summary>
    public required double End { get; init; }

    /// <summary>Bus voltage, V.</summary>
    public required Reading Bus { get; init; }

    /// <summary>On state of vds, V.</summary>
    public required Reading OnState { get; init; }

    /// <summary>The load's current: i_on at turn-on, i_off at turn-off, A.</summary>
    public required Reading Current { get; init; }

    /// <summary>Noise of vds (σ), V.</summary>
    public double VoltageNoise { get; init; }

    /// <summary>Noise of the current (σ), A.</summary>
    public double CurrentNoise { get; init; }

    /// <summary>The step of vds, bus − on, V; meaningful where both have a value.</summary>
    public double Step => Bus.Value - OnState.Value;

    /// <summary>Hysteresis of crossings of vds: max(3 σ, 1 % of the step), V.</summary>
    public double VoltageHysteresis => Math.Max(3 * VoltageNoise, HysteresisPart * Step);

    /// <summary>When vds crosses a fraction of its step: downwards at turn-on, upwards at turn-off.</summary>
    /// <param name="fraction">The fraction, 0 to 1.</param>
    /// <param name="decided">Whether the crossing must be decided, as times and slopes need it (energies do not): vds
    /// must not move back by the hysteresis before it is 2 % of the step beyond the level.</param>
    public Instant Voltage(double fraction, bool decided)
    {
        if (Levels() is { } reason)
        {
            return Instant.None(reason);
        }

        double hysteresis = VoltageHysteresis;
        if (fraction * Step <= hysteresis)
        {
            return Instant.None("level within the noise");
        }

        double level = OnState.Value + (fraction * Step);
        CrossingDirection direction = TurnsOn ? CrossingDirection.Falling : CrossingDirection.Rising;
        if (Crossing.First(Vds, level, hysteresis, direction, Departure, End) is not { } at)
        {
            return Instant.None($"vds does not cross {Percent(fraction)}");
        }

        return decided && MovesBack(level, hysteresis) ? Instant.None("level undecided") : Instant.Of(at);
    }

    /// <summary>When the current crosses a fraction of the load's: upwards at turn-on, downwards at turn-off.</summary>
    /// <param name="fraction">The fraction, 0 to 1.</param>
    public Instant CurrentAt(double fraction)
    {
        if (!Current.HasValue)
        {
            return Instant.None(Current.Because(TurnsOn ? "i_on" : "i_off").Reason!);
        }

        double hysteresis = Math.Max(3 * CurrentNoise, HysteresisPart * Current.Value);
        if (fraction * Current.Value <= hysteresis)
        {
            return Instant.None("level within the noise");
        }

        CrossingDirection direction = TurnsOn ? CrossingDirection.Rising : CrossingDirection.Falling;
        double level = fraction * Current.Value;
        if (Crossing.First(Id, level, hysteresis, direction, Departure, End) is not { } at)
        {
            return Instant.None($"the current does not cross {Percent(fraction)}");
        }

        return Instant.Of(TurnsOn && fraction < HalfWay ? LastBeforeHalf(level, hysteresis, at) : at);
    }

    /// <summary>The last rise through a level before the current is half the load's: the gate's current, which a
    /// source-side probe sees from the departure on, may rise through 10 % and fall back.</summary>
    private double LastBeforeHalf(double level, double hysteresis, double first)
    {
        const CrossingDirection rising = CrossingDirection.Rising;
        if (Crossing.First(Id, HalfWay * Current.Value, hysteresis, rising, first, End) is not { } half)
        {
            return first;
        }

        double last = first;
        while (Crossing.First(Id, level, hysteresis, rising, Math.BitIncrement(last), half) is { } next)
        {
            last = next;
        }

        return last;
    }

    /// <summary>Why there are no levels of vds; null where there are.</summary>
    private string? Levels() =>
        !Bus.HasValue ? Bus.Because("bus_voltage").Reason
        : !OnState.HasValue ? OnState.Because("on state").Reason
        : Step > 0 ? null
        : "the bus is not above the on state";

    /// <summary>Whether vds, from its first crossing of the level, moves back before it is clear of it.</summary>
    private bool MovesBack(double level, double hysteresis)
    {
        double clear = DecidedPart * Step;
        if (3 * VoltageNoise > clear)
        {
            return false;
        }

        ReadOnlySpan<double> vds = Vds.Values;
        double sign = TurnsOn ? -1 : 1;
        int last = (int)Math.Min(vds.Length - 1, Math.Floor(End));
        int i = Math.Max(1, (int)Math.Ceiling(Departure));
        while (i <= last && !(sign * vds[i - 1] <= sign * level && sign * vds[i] > sign * level))
        {
            i++;
        }

        double furthest = double.NegativeInfinity;
        for (; i <= last; i++)
        {
            double beyond = sign * (vds[i] - level);
            Finite.Require(vds[i], nameof(Vds));
            if (beyond >= clear)
            {
                return false;
            }

            furthest = Math.Max(furthest, beyond);
            if (furthest - beyond >= hysteresis)
            {
                return true;
            }
        }

        return false;
    }

    private static string Percent(double fraction) => $"{Math.Round(100 * fraction)} %";
}
