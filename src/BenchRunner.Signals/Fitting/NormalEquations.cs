namespace BenchRunner.Signals.Fitting;

/// <summary>A least-squares problem as its normal equations at a point: what <see cref="LevenbergMarquardt"/> searches.
/// </summary>
/// <remarks>
/// With r(x) the residuals, data less model, and J the model's derivatives: the sum of squares rᵀr, half its falling
/// slope Jᵀr and its curvature JᵀJ. Unknowns in which the model is linear may be eliminated (variable projection); then
/// slope and curvature are those of what remains. JᵀJ has the squared condition of J, which slows the search but does
/// not move its answer: that lies where Jᵀr vanishes.
/// </remarks>
public abstract class NormalEquations
{
    private readonly double[] _gradient;
    private readonly double[] _curvature;

    /// <summary>Makes the equations of a number of unknowns.</summary>
    /// <param name="unknowns">Unknowns searched; at least 1.</param>
    /// <exception cref="ArgumentOutOfRangeException">Fewer than one unknown.</exception>
    protected NormalEquations(int unknowns)
    {
        ArgumentOutOfRangeException.ThrowIfLessThan(unknowns, 1);
        _gradient = new double[unknowns];
        _curvature = new double[unknowns * unknowns];
    }

    /// <summary>Number of unknowns searched.</summary>
    public int Unknowns => _gradient.Length;

    /// <summary>Sum of squared residuals at the point evaluated last.</summary>
    public double Squares { get; protected set; }

    /// <summary>Changes of <see cref="Squares"/> at the point evaluated last that rounding hides.</summary>
    public abstract double Rounding { get; }

    /// <summary>Half the falling slope of the sum of squares along each unknown, Jᵀr.</summary>
    public Span<double> Gradient => _gradient;

    /// <summary>JᵀJ row by row; the lower triangle counts.</summary>
    public Span<double> Curvature => _curvature;

    /// <summary>Forms <see cref="Squares"/>, <see cref="Gradient"/> and <see cref="Curvature"/> at a point.</summary>
    /// <param name="unknowns">The point.</param>
    /// <returns>False where they cannot be formed there.</returns>
    public abstract bool Evaluate(ReadOnlySpan<double> unknowns);

    /// <summary>Whether a point may be tried; the problem may move it to where it may.</summary>
    /// <param name="trial">The point.</param>
    public virtual bool Admit(Span<double> trial) => true;

    /// <summary>Takes back what <see cref="Admit"/> changed in the problem, as the point was not better.</summary>
    public virtual void Withdraw()
    {
    }

    /// <summary>Whether an unknown stays where it is.</summary>
    /// <param name="unknown">Its place.</param>
    public virtual bool IsHeld(int unknown) => false;

    /// <summary>What a change of an unknown is measured by: the search ends where all are small parts of it.</summary>
    /// <param name="unknowns">The point.</param>
    /// <param name="unknown">Place of the unknown.</param>
    public virtual double Size(ReadOnlySpan<double> unknowns, int unknown) => Math.Abs(unknowns[unknown]);
}
