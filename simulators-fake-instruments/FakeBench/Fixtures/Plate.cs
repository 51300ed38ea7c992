namespace FakeBench.Fixtures;

/// <summary>The hotplate under the devices: a heat capacity, a loss to the room, a regulated heater.</summary>
/// <remarks>
/// C dT/dt = P − G (T − Ta); with its output on P = G (S − Ta) + K (S − T), not below 0 and not above what the heater
/// can, so that it comes to its set-point S without an offset. Each of the three cases is solved exactly, piece by
/// piece. A temperature within 5 mK of the set-point is set to it: a settled plate has the same bits whenever it is
/// looked at.
/// </remarks>
public sealed class Plate
{
    /// <summary>Largest power of the heater, W.</summary>
    public const double Power = 400;

    private const double Loss = 1, Control = 40, Settled = 5e-3;

    private readonly double _heatCapacity;
    private readonly double _ambient;

    /// <summary>Makes a plate as warm as the room, its heater off.</summary>
    /// <param name="heatCapacity">C, J/K; above 0.</param>
    /// <param name="ambient">Temperature of the room Ta, degC.</param>
    public Plate(double heatCapacity, double ambient) =>
        (_heatCapacity, _ambient, Temperature) = (heatCapacity, ambient, ambient);

    /// <summary>Temperature, degC.</summary>
    public double Temperature { get; private set; }

    /// <summary>Set-point, degC.</summary>
    public double SetPoint { get; set; } = 25;

    /// <summary>Whether the heater is on.</summary>
    public bool Output { get; set; }

    /// <summary>Moves on in time.</summary>
    /// <param name="seconds">How far, s; not below 0.</param>
    public void Advance(double seconds)
    {
        double left = seconds;
        while (left > 0)
        {
            (double end, double rate, double until) = Case();
            double reach = Reach(end, rate, until);
            double piece = Math.Min(left, reach);
            Temperature = piece == reach ? until : end + ((Temperature - end) * Math.Exp(-rate * piece));
            left -= piece;
        }

        if (Output && Math.Abs(Temperature - SetPoint) < Settled)
        {
            Temperature = SetPoint;
        }
    }

    /// <summary>Something cools or heats it at once, by kelvins.</summary>
    public void Disturb(double kelvins) => Temperature += kelvins;

    // Where it is heading, how fast, and the temperature at which that changes (infinite: never).
    private (double End, double Rate, double Until) Case()
    {
        const double never = double.PositiveInfinity;
        double free = Loss / _heatCapacity;
        double hold = Loss * (SetPoint - _ambient);
        double fullBelow = SetPoint - ((Power - hold) / Control);
        double idleAbove = SetPoint + (hold / Control);
        return !Output ? (_ambient, free, never)
            : Temperature < fullBelow ? (_ambient + (Power / Loss), free, fullBelow)
            : Temperature > idleAbove ? (_ambient, free, idleAbove)
            : (SetPoint, (Loss + Control) / _heatCapacity, never);
    }

    private double Reach(double end, double rate, double until)
    {
        double ratio = (Temperature - end) / (until - end);
        return ratio > 1 && !double.IsInfinity(ratio) ? Math.Log(ratio) / rate : double.PositiveInfinity;
    }
}
