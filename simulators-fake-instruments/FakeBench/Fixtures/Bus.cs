namespace FakeBench.Fixtures;

/// <summary>The voltage of the capacitor bank over time, in closed form piece by piece.</summary>
/// <remarks>
/// C dV/dt = i − G V, where the supply gives i = min(limit, (E − V)/R), not below 0, and its inner voltage E slews
/// linearly to the set-point. Each of the three cases (no current, limit, linear) is solved exactly; a piece ends where
/// the case changes. A voltage within 1 mV of its end value is set to it, so that a settled bus has the same bits
/// whenever it is looked at.
/// </remarks>
public sealed class Bus
{
    private const double Settled = 1e-3;
    private const double LongestPiece = 5e-3;
    private const double Overlap = 1e-9;

    /// <summary>Voltage of the bank, V.</summary>
    public double Voltage { get; private set; }

    /// <summary>Inner voltage of the supply, V: follows the set-point at its slew rate.</summary>
    public double Source { get; private set; }

    /// <summary>Whether the voltage has come to its end value and stays there until something changes.</summary>
    public bool AtRest { get; private set; }

    /// <summary>Current that the supply gives, A.</summary>
    public static double Current(BusCircuit circuit, double source, double voltage) =>
        circuit.Connected
            ? Math.Clamp((source - voltage) / circuit.SourceResistance, 0, circuit.SourceLimit)
            : 0;

    /// <summary>Sets the bank to what a train left on it.</summary>
    public void SetVoltage(double voltage) => (Voltage, AtRest) = (voltage, false);

    /// <summary>Puts the supply's inner voltage to that of the bank: so it starts when it is switched on.</summary>
    public void StartSource() => (Source, AtRest) = (Voltage, false);

    /// <summary>Moves on in time, at most until the voltage has risen to a threshold.</summary>
    /// <param name="circuit">What lies at the bank.</param>
    /// <param name="target">Set-point of the supply, V.</param>
    /// <param name="slew">Its slew rate, V/s; above 0.</param>
    /// <param name="duration">How far to move on, s.</param>
    /// <param name="threshold">Voltage at which to stop, V; infinite: none.</param>
    /// <returns>How far it moved, s.</returns>
    public double Advance(BusCircuit circuit, double target, double slew, double duration, double threshold)
    {
        double moved = 0;
        while (moved < duration)
        {
            AtRest = false;
            double ramp = circuit.Connected ? Math.Abs(target - Source) : 0;
            if (ramp == 0 && Settle(circuit))
            {
                AtRest = true;
                return duration;
            }

            double piece = circuit.Connected ? Math.Min(duration - moved, LongestPiece) : duration - moved;
            double rate = ramp == 0 ? 0 : Math.Sign(target - Source) * slew;
            piece = ramp == 0 ? piece : Math.Min(piece, ramp / slew);
            double length = CutAtCaseChange(circuit, rate, piece);
            double next = After(circuit, rate, length);
            bool reached = Voltage < threshold && next >= threshold;
            if (reached)
            {
                length = Bisect(length, s => After(circuit, rate, s) >= threshold);
                next = Math.Max(After(circuit, rate, length), threshold);
            }

            double source = Source + (rate * length);
            Source = Math.Abs(source - target) < 1e-9 && circuit.Connected ? target : source;
            Voltage = next;
            moved += length;
            if (reached)
            {
                return moved;
            }
        }

        return duration;
    }

    /// <summary>1 − e^−x over x, exact for small x.</summary>
    private static double Fraction(double x) => x < 1e-9 ? 1 - (x / 2) : (1 - Math.Exp(-x)) / x;

    private static double Bisect(double length, Func<double, bool> after)
    {
        double low = 0;
        double high = length;
        for (int i = 0; i < 60; i++)
        {
            double middle = 0.5 * (low + high);
            (low, high) = after(middle) ? (low, middle) : (middle, high);
        }

        return high;
    }

    private static Feed Case(BusCircuit circuit, double drop) =>
        !circuit.Connected || drop <= 0 ? Feed.None
        : drop >= circuit.SourceLimit * circuit.SourceResistance ? Feed.Limit
        : Feed.Linear;

    // A piece in which the case changes is cut just behind the change, so that the next piece starts in the new case.
    private double CutAtCaseChange(BusCircuit circuit, double rate, double piece)
    {
        Feed now = Case(circuit, Source - Voltage);
        bool Changed(double s) => Case(circuit, Source + (rate * s) - After(circuit, rate, s)) != now;
        return Changed(piece) ? Math.Min(piece, Bisect(piece, Changed) + Overlap) : piece;
    }

    private double After(BusCircuit circuit, double rate, double s)
    {
        double drain = circuit.Conductance / circuit.Capacitance;
        switch (Case(circuit, Source - Voltage))
        {
            case Feed.None:
                return Voltage * Math.Exp(-drain * s);
            case Feed.Limit:
                double slope = (circuit.SourceLimit / circuit.Capacitance) - (drain * Voltage);
                return Voltage + (slope * s * Fraction(drain * s));
            default:
                double feed = 1 / (circuit.SourceResistance * circuit.Capacitance);
                double speed = feed + drain;
                double climb = rate * feed / speed;
                double start = ((Source * feed) - climb) / speed;
                return start + (climb * s) + ((Voltage - start) * Math.Exp(-speed * s));
        }
    }

    // The source stands still; the voltage is near the end value of its case, or not.
    private bool Settle(BusCircuit circuit)
    {
        double end = Case(circuit, Source - Voltage) switch
        {
            Feed.None => 0,
            Feed.Limit => circuit.Conductance > 0 ? circuit.SourceLimit / circuit.Conductance : double.PositiveInfinity,
            _ => Source / (1 + (circuit.Conductance * circuit.SourceResistance)),
        };
        if (Math.Abs(Voltage - end) >= Settled)
        {
            return false;
        }

        Voltage = end;
        return true;
    }

    private enum Feed
    {
        None,
        Limit,
        Linear,
    }
}
