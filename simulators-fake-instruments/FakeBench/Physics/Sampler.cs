using System.Runtime.InteropServices;
using System.Runtime.Intrinsics;

namespace FakeBench.Physics;

/// <summary>Fills the uniform grid of samples while the solver walks past it.</summary>
/// <remarks>Inside a step every state is a cubic, and the signals are linear in the states but for the slow saturation
/// of the load. So a step that holds many samples is observed at four points, and each signal is the cubic through
/// them.</remarks>
internal sealed class Sampler
{
    /// <summary>Samples in a step from which on four points cost less.</summary>
    private const int Many = 6;

    private static readonly int SignalCount = Enum.GetValues<Signal>().Length;

    private readonly BridgeEquations _equations;
    private readonly double _start, _interval;
    private readonly int _points;
    private readonly double[] _state = new double[BridgeState.Count];
    private readonly double[] _values = new double[SignalCount];
    private readonly double[][] _nodes = [.. Enumerable.Range(0, 4).Select(_ => new double[SignalCount])];
    private int _next;

    public Sampler(BridgeEquations equations, double start, double interval, int points)
    {
        (_equations, _start, _interval, _points) = (equations, start, interval, points);
        Signals = new double[SignalCount][];
        for (int i = 0; i < Signals.Length; i++) Signals[i] = GC.AllocateUninitializedArray<double>(points);
    }

    /// <summary>One row a signal.</summary>
    public double[][] Signals { get; }

    /// <summary>Fills every sample up to time 0 with the state at rest.</summary>
    public void AtRest(ReadOnlySpan<double> state)
    {
        while (_next < _points && TimeOf(_next) <= 0) _next++;
        _equations.Observe(0, state, _values);
        for (int i = 0; i < SignalCount; i++) Signals[i].AsSpan(0, _next).Fill(_values[i]);
    }

    /// <summary>Fills the samples inside the solver's last step.</summary>
    public void Take(Rodas4 solver)
    {
        int end = _next;
        while (end < _points && TimeOf(end) <= solver.Time) end++;
        if (end - _next >= Many) Cubic(solver, end);
        for (; _next < end; _next++)
        {
            Observe(solver, TimeOf(_next), _values);
            for (int i = 0; i < SignalCount; i++) Signals[i][_next] = _values[i];
        }
    }

    private double TimeOf(int sample) => _start + sample * _interval;

    private void Observe(Rodas4 solver, double time, Span<double> values)
    {
        solver.Interpolate(time, _state);
        _equations.Observe(time, _state, values);
    }

    private void Cubic(Rodas4 solver, int end)
    {
        double third = solver.StepLength / 3;
        for (int k = 0; k < 4; k++) Observe(solver, solver.StepStart + k * third, _nodes[k]);
        double first = (TimeOf(_next) - solver.StepStart) / third;
        double spacing = _interval / third;
        for (int i = 0; i < SignalCount; i++)
        {
            // Newton's form over the nodes 0, 1, 2, 3.
            var (a, b, c, d) = (_nodes[0][i], _nodes[1][i], _nodes[2][i], _nodes[3][i]);
            var (b1, c1, d1) = (b - a, c - b, d - c);
            var (c2, d2) = ((c1 - b1) / 2, (d1 - c1) / 2);
            double d3 = (d2 - c2) / 3;
            var row = Signals[i].AsSpan(_next, end - _next);
            var wide = MemoryMarshal.Cast<double, Vector256<double>>(row);
            var lanes = Vector256.Create(0.0, 1, 2, 3);
            for (int k = 0; k < wide.Length; k++)
            {
                var x = (lanes + Vector256.Create((double)(4 * k))) * spacing + Vector256.Create(first);
                var one = Vector256<double>.One;
                wide[k] = (((x - one - one) * d3 + Vector256.Create(c2)) * (x - one) + Vector256.Create(b1)) * x
                    + Vector256.Create(a);
            }

            for (int k = 4 * wide.Length; k < row.Length; k++)
            {
                double x = k * spacing + first;
                row[k] = (((x - 2) * d3 + c2) * (x - 1) + b1) * x + a;
            }
        }

        _next = end;
    }
}
