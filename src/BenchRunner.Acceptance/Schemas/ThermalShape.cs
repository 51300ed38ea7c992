using System.Text.Json.Nodes;
using BenchRunner.Acceptance.Files;
using BenchRunner.Acceptance.Sequences;

namespace BenchRunner.Acceptance.Schemas;

/// <summary>Transient thermal impedance by pulse time, the last one <c>steady</c>: both rise.</summary>
/// <param name="Meaning">What it means.</param>
internal sealed record ThermalShape(string Meaning) : Shape(Meaning)
{
    private const string Steady = "steady";

    private static readonly QuantityShape _impedance = new("", "K/W", Bounds.Positive, "0.03 K/W");
    private static readonly QuantityShape _time = new("", "s", Bounds.Positive, "1 ms", Steady);

    /// <inheritdoc/>
    public override string Expected => "a block of rising times with rising impedances, the last one steady";

    /// <inheritdoc/>
    public override string Example => "{ 10 us: 0.004 K/W, 1 ms: 0.03 K/W, steady: 0.45 K/W }";

    /// <inheritdoc/>
    public override object? Read(YamlNode node, string label, YamlMap? around, List<Problem> problems)
    {
        if (node is not YamlMap { Entries.Count: > 0 } map)
        {
            Refuse(node, label, problems);
            return null;
        }

        var points = new List<ThermalPoint>();
        int before = problems.Count;
        foreach (YamlEntry entry in map.Entries)
        {
            object? time = _time.Read(new YamlScalar(entry.Key, false, entry.At), $"a time in {label}", map, problems);
            object? impedance = _impedance.Read(entry.Value, $"{label} at {Shown.Cut(entry.Key)}", map, problems);
            if (time is null || impedance is null)
            {
                continue;
            }

            var point = new ThermalPoint(time as double? ?? double.PositiveInfinity, (double)impedance);
            if (points.Count > 0 && (point.Time <= points[^1].Time || point.Impedance < points[^1].Impedance))
            {
                problems.Add(new Problem(
                    entry.At,
                    $"{label} at {Shown.Cut(entry.Key)} has a time or impedance below the one before",
                    "times and impedances that rise",
                    "sort the times and check the values"));
            }

            points.Add(point);
        }

        if (problems.Count > before)
        {
            return null;
        }

        if (double.IsPositiveInfinity(points[^1].Time))
        {
            return points;
        }

        problems.Add(new Problem(
            map.Where,
            $"{label} has no key {Steady}",
            "the steady impedance as the last key",
            $"add {Steady}: 0.45 K/W"));
        return null;
    }

    /// <inheritdoc/>
    public override JsonObject Schema()
    {
        string time = _time.Schema()["pattern"]!.GetValue<string>();
        return new JsonObject
        {
            ["type"] = "object",
            ["patternProperties"] = new JsonObject { [time] = _impedance.Schema() },
            ["required"] = new JsonArray(Steady),
            ["additionalProperties"] = false,
        };
    }
}
