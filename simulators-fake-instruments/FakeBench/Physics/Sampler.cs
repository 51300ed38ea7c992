namespace FakeBench.Physics;

/// <summary>Fills the uniform grid of samples while the solver walks past it.</summary>
internal sealed class Sampler
{
    private readonly BridgeEquations _equations;
    private readonly double _start, _interval;
    private readonly int _points;
    private int _next;

    public Sampler(BridgeEquations equations, double start, double interval, int points)
    {
        (_equations, _start, _interval, _points) = (equations, start, interval, points);
        Signals = new double[Enum.GetValues<Signal>().Length][];
        for (int i = 0; i < Signals.Length; i++) Signals[i] = new double[points];
    }

    /// <summary>One row a signal.</summary>
    public double[][] Signals { get; }

    /// <summary>Fills every sample up to time 0 with the state at rest.</summary>
    public void AtRest(ReadOnlySpan<double> state)
    {
        while (_next < _points && TimeOfNext <= 0) Put(0, state);
    }

    /// <summary>Fills the samples inside the solver's last step.</summary>
    public void Take(Rodas4 solver)
    {
        Span<double> state = stackalloc double[BridgeState.Count];
        while (_next < _points && TimeOfNext <= solver.Time)
        {
            double time = TimeOfNext;
            solver.Interpolate(time, state);
            Put(time, state);
        }
    }

    private double TimeOfNext => _start + _next * _interval;

    private void Put(double time, ReadOnlySpan<double> state)
    {
        Span<double> values = stackalloc double[8];
        _equations.Observe(time, state, values);
        for (int i = 0; i < values.Length; i++) Signals[i][_next] = values[i];
        _next++;
    }
}
