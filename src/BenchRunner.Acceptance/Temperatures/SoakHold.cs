namespace BenchRunner.Acceptance.Temperatures;

/// <summary>Whether a plate, and a device on it, has come to rest at its temperature.</summary>
/// <remarks>
/// It has when every reading of an unbroken stretch of the soak time lies within the tolerance and the temperature
/// moves by less than 0.5 K a minute over the last minute (or the whole stretch, where that is shorter). Pure but for
/// the readings it keeps; time is what the caller says it is.
/// </remarks>
/// <param name="target">Temperature wanted, degC.</param>
/// <param name="tolerance">How far a reading may be off, K.</param>
/// <param name="soak">Time that it must stay there, s.</param>
public sealed class SoakHold(double target, double tolerance, double soak)
{
    /// <summary>Fastest drift of a plate at rest, K/s: 0.5 K a minute.</summary>
    public const double FastestDrift = 0.5 / 60;

    private const double DriftOver = 60;

    private readonly Queue<(double At, double Temperature)> _within = [];
    private double _since;
    private double _last = double.NaN;

    /// <summary>Whether the plate is at rest at its temperature.</summary>
    public bool IsDone { get; private set; }

    /// <summary>Time still to hold if nothing moves, s; the whole soak where the last reading is outside.</summary>
    public double Left => _within.Count == 0 ? soak : Math.Max(0, soak - (_last - _since));

    /// <summary>Takes a reading.</summary>
    /// <param name="at">When, s; not before the last one.</param>
    /// <param name="temperature">What was read, degC.</param>
    public void Saw(double at, double temperature)
    {
        if (!(Math.Abs(temperature - target) <= tolerance))
        {
            _within.Clear();
            IsDone = false;
            return;
        }

        _since = _within.Count == 0 ? at : _since;
        _last = at;
        _within.Enqueue((at, temperature));
        while (_within.Count > 2 && at - _within.Peek().At > DriftOver)
        {
            _within.Dequeue();
        }

        (double from, double then) = _within.Peek();
        double drift = at > from ? Math.Abs(temperature - then) / (at - from) : 0;
        IsDone = at - _since >= soak && drift < FastestDrift;
    }
}
