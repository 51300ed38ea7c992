using BenchRunner.Signals.Traces;

namespace BenchRunner.Signals.Peaks;

/// <summary>Walks over the maxima of a signal that stand out by a prominence; over minima, of the negated
/// signal.</summary>
/// <remarks>
/// A maximum counts when the signal rose to it by the prominence since the last minimum that counts, and falls by the
/// prominence afterwards, inside the span: its topographic prominence. One pass, linear in the samples.
/// </remarks>
public ref struct Extremes
{
    private readonly ReadOnlySpan<double> _samples;
    private readonly double _sign;
    private readonly double _prominence;
    private readonly int _last;
    private int _index;
    private double _low;

    /// <summary>Starts a walk.</summary>
    /// <param name="samples">The signal, uniform.</param>
    /// <param name="prominence">The least prominence, in the signal's unit; above 0.</param>
    /// <param name="minima">Whether minima are looked for in place of maxima.</param>
    /// <param name="from">First sample.</param>
    /// <param name="to">Last sample.</param>
    public Extremes(ReadOnlySpan<double> samples, double prominence, bool minima, int from, int to)
    {
        _samples = samples;
        _prominence = prominence;
        _sign = minima ? -1 : 1;
        _index = Math.Max(0, from);
        _last = Math.Min(samples.Length - 1, to);
        _low = _index <= _last ? _sign * samples[_index] : 0;
    }

    /// <summary>The sample of the extreme last reported.</summary>
    public int Sample { get; private set; }

    /// <summary>Goes on to the next extreme.</summary>
    /// <returns>False at the end of the signal.</returns>
    /// <exception cref="ArgumentException">A sample on the way is NaN or infinite.</exception>
    public bool Next()
    {
        Finite.Require(_low, "samples");
        double high = double.NegativeInfinity;
        int top = _index;
        while (++_index <= _last)
        {
            double now = _sign * _samples[_index];
            Finite.Require(now, "samples");
            if (double.IsNegativeInfinity(high))
            {
                _low = now < _low ? now : _low;
                if (now - _low >= _prominence)
                {
                    high = now;
                    top = _index;
                }
            }
            else if (now > high)
            {
                high = now;
                top = _index;
            }
            else if (high - now >= _prominence)
            {
                _low = now;
                Sample = top;
                return true;
            }
        }

        return false;
    }
}
