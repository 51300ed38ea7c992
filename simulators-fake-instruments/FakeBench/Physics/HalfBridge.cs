namespace FakeBench.Physics;

/// <summary>Fires one pulse train through the half bridge and samples it.</summary>
public static class HalfBridge
{
    /// <summary>Local error of a step, relative to the scale of each state: no sample further from the limit of small
    /// steps than 0.25 % of its signal's span, as a test holds.</summary>
    public const double DefaultTolerance = 2e-4;

    /// <summary>How long after off2 a train is followed at least, s: what comes later is the bench's closed
    /// form.</summary>
    public const double Tail = 2e-6;

    /// <summary>The first step after each corner of the driver's voltage, s.</summary>
    private const double FirstStep = 10e-12;

    /// <summary>The longest step, s.</summary>
    private const double LongestStep = 100e-9;

    /// <summary>More steps than any train needs; beyond it the circuit is refused.</summary>
    private const int MostSteps = 2_000_000;

    /// <summary>Solves one train and samples it without noise.</summary>
    /// <param name="parts">The circuit.</param>
    /// <param name="train">The pulses and the voltage of the bank before them.</param>
    /// <param name="start">Time of the first sample, s after on1; negative: before it, at rest.</param>
    /// <param name="interval">Sample interval, s; above 0.</param>
    /// <param name="points">Samples of each signal; above 0.</param>
    /// <param name="tolerance">Local error of a step relative to each state's scale; above 0.</param>
    /// <exception cref="ArgumentException">A pulse or the gap is not longer than the driver's edge.</exception>
    /// <exception cref="ArithmeticException">The circuit cannot be solved: a component value makes no
    /// sense.</exception>
    public static TrainTrajectory Simulate(CircuitParameters parts, PulseTrain train, double start, double interval,
        int points, double tolerance = DefaultTolerance)
    {
        ArgumentNullException.ThrowIfNull(parts);
        ArgumentNullException.ThrowIfNull(train);
        ArgumentOutOfRangeException.ThrowIfNegativeOrZero(interval);
        ArgumentOutOfRangeException.ThrowIfNegativeOrZero(points);
        double shortest = Math.Min(train.FirstPulse, Math.Min(train.Gap, train.SecondPulse));
        if (!(shortest > parts.Bench.DriverEdge))
        {
            throw new ArgumentException("Pulses and gap must be longer than the driver's edge.", nameof(train));
        }

        var equations = new BridgeEquations(parts, train.BusVoltage, train.HeldOff) { Drive = train.GateOff };
        var solver = new Rodas4(equations, tolerance) { LongestStep = LongestStep };
        equations.Rest(train.BusVoltage, train.GateOff).CopyTo(solver.State);
        var sampler = new Sampler(equations, start, interval, points);
        sampler.AtRest(solver.State);
        double end = Math.Max(train.Off2 + Tail, start + interval * (points - 1));
        var peaks = new Peaks(solver.State);
        bool died = false;
        foreach (var piece in Pieces(parts, train, end))
        {
            (equations.Drive, equations.DriveSlope, equations.DriveSince) = (piece.Drive, piece.Slope, piece.From);
            if (piece.Dies) (equations.LowLeakage, died) = (100, true);
            solver.NextStep = FirstStep;
            while (solver.Time < piece.To)
            {
                solver.Advance(piece.To);
                peaks.Note(solver.State);
                sampler.Take(solver);
                if (solver.Accepted > MostSteps) throw new ArithmeticException("The train takes too many steps.");
            }
        }

        double[][] signals = parts.LoadToNegative ? Mirror.Of(sampler.Signals) : sampler.Signals;
        return new TrainTrajectory(start, interval, signals, EndOf(parts, equations, solver, peaks, died),
            solver.Accepted);
    }

    /// <summary>Samples of the half bridge at rest: no train, both gates held off.</summary>
    /// <param name="parts">The circuit.</param>
    /// <param name="train">Voltage of the bank and levels of the driver; its pulses are not fired.</param>
    /// <param name="start">Time of the first sample, s.</param>
    /// <param name="interval">Sample interval, s; above 0.</param>
    /// <param name="points">Samples of each signal; above 0.</param>
    public static TrainTrajectory AtRest(
        CircuitParameters parts, PulseTrain train, double start, double interval, int points)
    {
        ArgumentNullException.ThrowIfNull(parts);
        ArgumentNullException.ThrowIfNull(train);
        ArgumentOutOfRangeException.ThrowIfNegativeOrZero(interval);
        ArgumentOutOfRangeException.ThrowIfNegativeOrZero(points);
        var equations = new BridgeEquations(parts, train.BusVoltage, train.HeldOff) { Drive = train.GateOff };
        double[] state = equations.Rest(train.BusVoltage, train.GateOff);
        var values = new double[Enum.GetValues<Signal>().Length];
        equations.Observe(0, state, values);
        double[][] signals = [.. values.Select(value =>
        {
            var row = new double[points];
            Array.Fill(row, value);
            return row;
        })];
        var end = new EndState(
            0, train.BusVoltage, 0, values[(int)Signal.IdLow], state[BridgeState.VLow], state[BridgeState.VHigh],
            parts.Low.IsShorted, parts.High.IsShorted, LowDied: false);
        return new TrainTrajectory(start, interval, parts.LoadToNegative ? Mirror.Of(signals) : signals, end, 0);
    }

    private static EndState EndOf(CircuitParameters parts, BridgeEquations equations, Rodas4 solver, Peaks peaks,
        bool died)
    {
        bool lowShorted = equations.LowLeakage >= PlaceParts.ShortConductance;
        return new EndState(
            solver.Time,
            lowShorted ? 0 : solver.State[BridgeState.Bank],
            equations.LoadCurrent(solver.State[BridgeState.Phi]),
            peaks.LowCurrent,
            peaks.LowVoltage,
            peaks.HighVoltage,
            lowShorted,
            parts.High.IsShorted,
            died);
    }

    /// <summary>The driver's voltage in straight pieces; the solver stops at each corner.</summary>
    private static List<Piece> Pieces(CircuitParameters parts, PulseTrain train, double end)
    {
        double edge = parts.Bench.DriverEdge;
        double swing = train.GateOn - train.GateOff;
        (double At, double Slope, bool Dies)[] corners =
        [
            (0, swing / edge, false), (edge, 0, false),
            (train.Off1, -swing / edge, false), (train.Off1 + edge, 0, false),
            (train.On2, swing / edge, false), (train.On2 + edge, 0, false),
            (train.Off2, -swing / edge, false), (train.Off2 + edge, 0, false),
        ];
        var pieces = new List<Piece>();
        for (int i = 0; i < corners.Length; i++)
        {
            double to = i + 1 < corners.Length ? corners[i + 1].At : end;
            bool high = corners[i].Slope < 0 || (corners[i].Slope == 0 && i % 4 == 1);
            pieces.Add(new Piece(corners[i].At, to, high ? train.GateOn : train.GateOff, corners[i].Slope, false));
        }

        if (parts.Low.DiesAfterOff2 is { } delay)
        {
            var last = pieces[^1];
            double death = Math.Max(last.From, train.Off2 + delay);
            pieces[^1] = last with { To = death };
            pieces.Add(last with { From = death, Dies = true });
        }

        return pieces;
    }

    private readonly record struct Piece(double From, double To, double Drive, double Slope, bool Dies);
}
