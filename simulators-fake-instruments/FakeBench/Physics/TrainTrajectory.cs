namespace FakeBench.Physics;

/// <summary>Noiseless samples of one train on a uniform grid, as they are at the probe tips.</summary>
/// <param name="Start">Time of the first sample, s after the driver's on1; negative before it.</param>
/// <param name="Interval">Sample interval, s.</param>
/// <param name="Signals">Eight rows of samples in the order of <see cref="Signal"/>; V or A, currents into the
/// drain.</param>
/// <param name="End">What the train leaves behind.</param>
/// <param name="Steps">Accepted steps of the solver.</param>
public sealed record TrainTrajectory(double Start, double Interval, double[][] Signals, EndState End, int Steps)
{
    /// <summary>Samples in each row.</summary>
    public int Points => Signals[0].Length;

    /// <summary>The samples of one signal; shared, not to be changed.</summary>
    public double[] this[Signal signal] => Signals[(int)signal];
}
