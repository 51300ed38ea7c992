using System.Globalization;
using BenchRunner.Signals.Analysis;
using BenchRunner.Signals.Quantities;

namespace BenchRunner.Benchmarks;

/// <summary>Whether ours and the peer say the same of one record: else their times cannot be compared.</summary>
internal static class CaptureAgreement
{
    private const double Tolerance = 1e-3;

    // A weak further mode (a harmonic of the ring) at the edge of being described is taken in from one start and left
    // out from another; the decay of the strong one then moves by a tenth of a percent.
    private const double DecayTolerance = 3e-3;

    /// <summary>Compares every quantity that the four channels allow, and the facts that both form.</summary>
    /// <param name="ours">Our analysis.</param>
    /// <param name="theirs">The peer's values by name.</param>
    /// <param name="note">What was compared, and the largest difference.</param>
    /// <returns>What differs; null: nothing.</returns>
    public static string? Check(AnalysisResult ours, Dictionary<string, double> theirs, out string note)
    {
        Dictionary<string, double> values = Values(ours);
        List<string> wrong = [];
        (string Name, double Away) worst = ("", 0);
        foreach (string name in values.Keys.Union(theirs.Keys))
        {
            if (!values.TryGetValue(name, out double mine) || !theirs.TryGetValue(name, out double other))
            {
                wrong.Add($"{name} has a value on one side only");
                continue;
            }

            double away = Math.Abs(mine - other) / Math.Max(Math.Abs(mine), Math.Abs(other));
            worst = away > worst.Away ? (name, away) : worst;
            bool isDecay = name.StartsWith("ring_", StringComparison.Ordinal)
                && !name.StartsWith("ring_frequency", StringComparison.Ordinal);
            if (!(away <= (isDecay ? DecayTolerance : Tolerance)))
            {
                wrong.Add(string.Create(CultureInfo.InvariantCulture, $"{name} {mine:G6} against {other:G6}"));
            }
        }

        note = string.Create(
            CultureInfo.InvariantCulture,
            $"compared, largest difference {worst.Away:G2} ({worst.Name}): {string.Join(" ", values.Keys)}");
        return wrong.Count == 0 ? null : $"the peer says otherwise: {string.Join(", ", wrong)}";
    }

    private static Dictionary<string, double> Values(AnalysisResult ours)
    {
        Dictionary<string, double> values = [];
        foreach (QuantityValue quantity in ours.Quantities)
        {
            Add(values, quantity.Quantity, quantity.Value);
        }

        Add(values, "ramp_growth", ours.Train.RampGrowth);
        Add(values, "gate_edge", ours.Train.GateEdge);
        Add(values, "on_state_maximum", ours.Train.OnStateMaximum);
        return values;
    }

    private static void Add(Dictionary<string, double> values, string name, double? value)
    {
        if (value is { } there)
        {
            values[name] = there;
        }
    }
}
