using FakeBench.Physics;

namespace FakeBench.Tests.Physics;

/// <summary>Uniform waveforms and what the tests read off them; time in s after on1.</summary>
internal sealed record Waveforms(double Start, double Interval, double[][] Signals)
{
    public static Waveforms Of(TrainTrajectory train) => new(train.Start, train.Interval, train.Signals);

    public double[] this[Signal signal] => Signals[(int)signal];

    public int Points => Signals[0].Length;

    public int Index(double time) => Math.Clamp((int)Math.Round((time - Start) / Interval), 0, Points - 1);

    public double Time(int index) => Start + index * Interval;

    public double Max(Signal signal, double from, double to) => this[signal][Index(from)..Index(to)].Max();

    public double Mean(Signal signal, double from, double to) => this[signal][Index(from)..Index(to)].Average();

    /// <summary>First crossing of a level after a time, interpolated.</summary>
    public double Crossing(Signal signal, double level, double from, bool rising)
    {
        double[] y = this[signal];
        for (int i = Index(from); i + 1 < y.Length; i++)
        {
            bool crosses = rising ? y[i] < level && y[i + 1] >= level : y[i] > level && y[i + 1] <= level;
            if (crosses) return Time(i) + Interval * (level - y[i]) / (y[i + 1] - y[i]);
        }

        throw new InvalidOperationException($"{signal} never crosses {level} after {from}.");
    }

    /// <summary>Integral by the trapezium rule, the ends at their nearest samples.</summary>
    public double Integral(Func<int, double> value, double from, double to)
    {
        int first = Index(from);
        int last = Index(to);
        double sum = 0;
        for (int i = first; i < last; i++) sum += 0.5 * (value(i) + value(i + 1));
        return sum * Interval;
    }

    /// <summary>Dissipation in the low place between two times, J.</summary>
    public double EnergyLow(double from, double to) =>
        Integral(i => this[Signal.VdsLow][i] * this[Signal.IdLow][i], from, to);

    /// <summary>The first local maxima after a time and above a level, each by the parabola through three
    /// samples.</summary>
    public List<(double At, double Value)> Maxima(Signal signal, double from, double above, int count)
    {
        double[] y = this[signal];
        var found = new List<(double, double)>();
        for (int i = Math.Max(1, Index(from)); i + 1 < y.Length && found.Count < count; i++)
        {
            if (y[i] < above || y[i] < y[i - 1] || y[i] <= y[i + 1]) continue;
            double bend = y[i - 1] - 2 * y[i] + y[i + 1];
            double shift = bend == 0 ? 0 : 0.5 * (y[i - 1] - y[i + 1]) / bend;
            found.Add((Time(i) + shift * Interval, y[i] - 0.25 * (y[i - 1] - y[i + 1]) * shift));
        }

        return found;
    }
}
