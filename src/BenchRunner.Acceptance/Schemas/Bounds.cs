using BenchRunner.Acceptance.Files;

namespace BenchRunner.Acceptance.Schemas;

/// <summary>The range a number must lie in. Every number is finite besides.</summary>
/// <param name="Low">Lower bound.</param>
/// <param name="High">Upper bound.</param>
/// <param name="LowIsIn">Whether the lower bound itself is allowed; the upper one always is.</param>
internal sealed record Bounds(double Low, double High, bool LowIsIn = true)
{
    /// <summary>Any finite number.</summary>
    public static Bounds Any { get; } = new(double.NegativeInfinity, double.PositiveInfinity);

    /// <summary>Above zero.</summary>
    public static Bounds Positive { get; } = new(0, double.PositiveInfinity, LowIsIn: false);

    /// <summary>Zero or more.</summary>
    public static Bounds NotNegative { get; } = new(0, double.PositiveInfinity);

    /// <summary>Whether a value lies inside.</summary>
    public bool Hold(double value) => value <= High && (LowIsIn ? value >= Low : value > Low);

    /// <summary>The range in words, e.g. <c> above 0 s</c>; empty where every number is allowed.</summary>
    public string Words(string unit) => (double.IsFinite(Low), double.IsFinite(High), LowIsIn) switch
    {
        (false, false, _) => "",
        (false, true, _) => $" of at most {Text(High, unit)}",
        (true, false, true) => $" of {Text(Low, unit)} or more",
        (true, false, false) => $" above {Text(Low, unit)}",
        (true, true, true) => $" from {Text(Low, unit)} to {Text(High, unit)}",
        (true, true, false) => $" above {Text(Low, unit)} and at most {Text(High, unit)}",
    };

    private static string Text(double value, string unit) =>
        unit == "%" ? SiText.Percent(value, 6) : SiText.Format(value, unit, 6);
}
