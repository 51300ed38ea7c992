using System.Globalization;
using BenchRunner.Instruments.Permits;

namespace BenchRunner.Instruments.Roles;

/// <summary>Checks made before anything is written: is the permit live, and does it go that far.</summary>
internal static class Bounded
{
    /// <summary>Refuses a missing or dead permit before anything is asked or set. The guard at the write tests it
    /// again.</summary>
    public static void Live(Permit permit)
    {
        ArgumentNullException.ThrowIfNull(permit);
        if (permit.WhyNot is { } why)
        {
            throw new PermitException($"permit for {permit.Bounds.OperatingPoint}: {why}");
        }
    }

    /// <summary>Refuses a value above the permit's bound; a NaN is above every bound.</summary>
    public static void AtMost(Permit permit, string what, double value, double bound, string unit)
    {
        if (!(value <= bound))
        {
            throw Beyond(permit, what, value, "above", bound, unit);
        }
    }

    /// <summary>Refuses a value below the permit's bound; a NaN is below every bound.</summary>
    public static void AtLeast(Permit permit, string what, double value, double bound, string unit)
    {
        if (!(value >= bound))
        {
            throw Beyond(permit, what, value, "below", bound, unit);
        }
    }

    /// <summary>Refuses a negative or infinite value or a NaN.</summary>
    public static void NotNegative(double value, string name)
    {
        if (!double.IsFinite(value) || value < 0)
        {
            throw new ArgumentOutOfRangeException(name, value, "must be finite and not negative");
        }
    }

    private static PermitException Beyond(
        Permit permit, string what, double value, string side, double bound, string unit) =>
        new(string.Create(
            CultureInfo.InvariantCulture,
            $"permit for {permit.Bounds.OperatingPoint}: {what} of {value} {unit} is {side} its bound of "
                + $"{bound} {unit}"));
}
