using System.Globalization;

namespace BenchRunner.Signals.Quantities;

/// <summary>How a definition's ID is written: the rule, then the route to the diode's current where it has
/// one.</summary>
public static class DefinitionId
{
    /// <summary>Suffix of the route by the switch's current less the load-current line.</summary>
    public const string LoadLineRoute = "@id_low-iL";

    /// <summary>The ID that stands for all integration times.</summary>
    public const string WindowTemplate = "qrr/window-T";

    private const string WindowStart = "qrr/window-";

    /// <summary>Takes an ID apart.</summary>
    /// <param name="id">The ID.</param>
    /// <returns>The rule, and whether the load-line route follows it.</returns>
    public static (string Rule, bool ByLoadLine) Split(string id)
    {
        ArgumentNullException.ThrowIfNull(id);
        return id.EndsWith(LoadLineRoute, StringComparison.Ordinal) ? (id[..^LoadLineRoute.Length], true) : (id, false);
    }

    /// <summary>The ID of an integration time, in ns: <c>qrr/window-100ns</c>.</summary>
    /// <param name="time">The time, s.</param>
    public static string Window(double time) =>
        WindowStart + Math.Round(time * 1e9, 3).ToString(CultureInfo.InvariantCulture) + "ns";

    /// <summary>The integration time of an ID such as <c>qrr/window-100ns</c>, s; null for any other.</summary>
    /// <param name="rule">The ID without a route.</param>
    public static double? WindowTime(string rule)
    {
        ArgumentNullException.ThrowIfNull(rule);
        bool named = rule.StartsWith(WindowStart, StringComparison.Ordinal)
            && rule.EndsWith("ns", StringComparison.Ordinal);
        return named
            && rule.Length > WindowStart.Length + 2
            && double.TryParse(
                rule.AsSpan(WindowStart.Length, rule.Length - WindowStart.Length - 2),
                NumberStyles.AllowDecimalPoint,
                CultureInfo.InvariantCulture,
                out double nanoseconds)
            && nanoseconds > 0
                ? nanoseconds / 1e9
                : null;
    }
}
