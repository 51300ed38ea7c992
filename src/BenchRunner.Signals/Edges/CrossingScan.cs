using BenchRunner.Signals.Traces;

namespace BenchRunner.Signals.Edges;

/// <summary>Walks over all crossings of a level that count, upwards and downwards in turn.</summary>
/// <remarks>
/// A Schmitt trigger whose reported position is the level's, not the trigger's: a crossing counts when the signal goes
/// on beyond the level by the hysteresis, and lies where the signal crossed last before that.
/// </remarks>
public ref struct CrossingScan
{
    private readonly Samples _samples;
    private readonly double _level;
    private readonly double _hysteresis;
    private readonly int _last;
    private int _index;
    private bool _above;
    private int _start;

    /// <summary>Starts a walk.</summary>
    /// <param name="samples">The signal, uniform; not modified.</param>
    /// <param name="level">The level, in the signal's unit.</param>
    /// <param name="hysteresis">How far beyond the level the signal must go, 0 or more.</param>
    /// <param name="from">First sample.</param>
    /// <param name="to">Last sample.</param>
    /// <exception cref="ArgumentException">A sample between the two is NaN or infinite.</exception>
    public CrossingScan(Samples samples, double level, double hysteresis, int from, int to)
        : this(samples, level, hysteresis, from, to, isFinite: false)
    {
    }

    /// <summary>Starts a walk over samples that may be known to be finite.</summary>
    internal CrossingScan(Samples samples, double level, double hysteresis, int from, int to, bool isFinite)
    {
        _samples = samples;
        _level = level;
        _hysteresis = hysteresis;
        _index = Math.Max(0, from);
        _last = Math.Min(samples.Length - 1, to);
        _above = _index <= _last && samples[_index] > level;
        _start = _index;
        if (!isFinite && _index <= _last)
        {
            Finite.Require(samples, _index, _last, nameof(samples));
        }
    }

    /// <summary>Position of the crossing last reported, in samples.</summary>
    public double Position { get; private set; }

    /// <summary>Direction of the crossing last reported.</summary>
    public CrossingDirection Direction { get; private set; }

    /// <summary>Goes on to the next crossing.</summary>
    /// <returns>False at the end of the signal.</returns>
    public bool Next()
    {
        bool rises = !_above;
        double counts = LevelSearch.Counts(_level, _hysteresis, rises);
        int beyond = LevelSearch.First(_samples, counts, rises, _index + 1, _last);
        double found = beyond > _last ? double.NaN : Crossing.Last(_samples.Values, _level, rises, _start, beyond);
        if (double.IsNaN(found))
        {
            _index = _last;
            return false;
        }

        Position = found;
        Direction = rises ? CrossingDirection.Rising : CrossingDirection.Falling;
        _above = rises;
        _start = _index = beyond;
        return true;
    }
}
