namespace BenchRunner.Acceptance.Plans;

/// <summary>The first pulse: a bank that charges the load inductor through the switch that is on.</summary>
/// <param name="Voltage">Voltage of the bank at the start, less a constant drop of the switch, V; above 0.</param>
/// <param name="Inductance">Load inductance, H; above 0.</param>
/// <param name="Resistance">Resistance of load, switch and shunt together, Ω; 0 or more.</param>
/// <param name="Capacitance">Capacitance of the bank, F; above 0, infinity for a bank that does not droop.</param>
/// <remarks>
/// Series RLC from rest: i(t) = V/L · e^(−αt) · sin(ωt)/ω, α = R/2L, ω² = 1/LC − α² (sinh where it is negative).
/// Without droop it is V/R (1 − e^(−Rt/L)); without resistance too, Vt/L. The supply's own current is left out: it is
/// small.
/// </remarks>
/// <example>4 µH, 20 V, neither resistance nor droop: 25 A after 5 µs.</example>
public readonly record struct ChargingRamp(double Voltage, double Inductance, double Resistance, double Capacitance)
{
    private const int MostSteps = 200;
    private const double Converged = 1e-13;

    private double Decay => Resistance / (2 * Inductance);

    private double Square => (1 / (Inductance * Capacitance)) - (Decay * Decay);

    /// <summary>Current at a time, A.</summary>
    /// <param name="time">Time since the switch was turned on, s.</param>
    public double CurrentAt(double time) =>
        Voltage / Inductance * Math.Exp(-Decay * time) * Sine(time);

    /// <summary>Slope of the current at a time, A/s.</summary>
    /// <param name="time">Time since the switch was turned on, s.</param>
    public double SlopeAt(double time) =>
        Voltage / Inductance * Math.Exp(-Decay * time) * (Cosine(time) - (Decay * Sine(time)));

    /// <summary>What the bank has lost at a time, V.</summary>
    /// <param name="time">Time since the switch was turned on, s.</param>
    public double DroopAt(double time) =>
        double.IsPositiveInfinity(Capacitance)
            ? 0
            : Voltage - (Inductance * SlopeAt(time)) - (Resistance * CurrentAt(time));

    /// <summary>When the current reaches a value.</summary>
    /// <param name="current">The current, A; above 0.</param>
    /// <returns>The time, s; null where it never does: the bank is empty, or the resistance too large.</returns>
    /// <remarks>
    /// Newton from L I/V. The current rises ever more slowly, so each tangent meets the target before the curve does:
    /// the steps come from the left and never pass the root.
    /// </remarks>
    public double? TimeTo(double current)
    {
        double time = Inductance * current / Voltage;
        for (int step = 0; step < MostSteps; step++)
        {
            double slope = SlopeAt(time);
            double missing = current - CurrentAt(time);
            if (Math.Abs(missing) <= Converged * current)
            {
                return time;
            }

            if (!(slope > 0))
            {
                return null;
            }

            double next = time + (missing / slope);
            if (next == time)
            {
                return time;
            }

            time = next;
        }

        return null;
    }

    private double Sine(double time) => Square switch
    {
        > 0 => Math.Sin(Math.Sqrt(Square) * time) / Math.Sqrt(Square),
        < 0 => Math.Sinh(Math.Sqrt(-Square) * time) / Math.Sqrt(-Square),
        _ => time,
    };

    private double Cosine(double time) => Square switch
    {
        > 0 => Math.Cos(Math.Sqrt(Square) * time),
        < 0 => Math.Cosh(Math.Sqrt(-Square) * time),
        _ => 1,
    };
}
