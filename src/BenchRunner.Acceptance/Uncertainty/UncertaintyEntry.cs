namespace BenchRunner.Acceptance.Uncertainty;

/// <summary>One line of an uncertainty budget.</summary>
/// <param name="Source">What is uncertain, e.g. <c>vds_low gain</c>.</param>
/// <param name="Standard">Its standard uncertainty, in its own unit; 0 or more.</param>
/// <param name="Sensitivity">How much the value changes by it, unit of the value over its own.</param>
/// <param name="DegreesOfFreedom">Degrees of freedom; infinity for a stated one.</param>
public readonly record struct UncertaintyEntry(
    string Source, double Standard, double Sensitivity, double DegreesOfFreedom = double.PositiveInfinity)
{
    /// <summary>What it adds to the value's standard uncertainty, |c| u, unit of the value.</summary>
    public double Contribution => Math.Abs(Sensitivity) * Standard;
}
