using System.Runtime.CompilerServices;

namespace FakeBench.Physics;

/// <summary>Capacitance of a junction: C0 (1 + v/Vj)^-M, and below -Vj/2 the straight line that goes on from
/// there.</summary>
internal readonly struct JunctionCapacitance
{
    private const double StraightBelow = 0.5;
    private readonly double _atZero, _perVoltage, _grading;
    private readonly double _atStraight, _fall;

    /// <summary>A junction.</summary>
    /// <param name="atZero">C0, F; 0 for none.</param>
    /// <param name="voltage">Vj, V; above 0.</param>
    /// <param name="grading">M, 1; below 1.</param>
    public JunctionCapacitance(double atZero, double voltage, double grading)
    {
        (_atZero, _perVoltage, _grading) = (atZero, 1 / voltage, grading);
        _atStraight = atZero * Math.Pow(StraightBelow, -grading);
        _fall = -grading * _atStraight / StraightBelow;
    }

    /// <summary>Capacitance at a voltage, F, and its slope, F/V.</summary>
    [MethodImpl(MethodImplOptions.AggressiveInlining)]
    public (double Capacitance, double Slope) At(double v)
    {
        if (_atZero == 0) return (0, 0);
        double x = 1 + v * _perVoltage;
        if (x <= StraightBelow) return (_atStraight + _fall * (x - StraightBelow), _fall * _perVoltage);
        // A power by way of logarithm and exponential: half the time, and the last digits do not matter here.
        double c = _atZero * Math.Exp(-_grading * Math.Log(x));
        return (c, -_grading * c * _perVoltage / x);
    }
}
