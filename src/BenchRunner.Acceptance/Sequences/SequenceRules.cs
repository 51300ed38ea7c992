using BenchRunner.Acceptance.Files;
using BenchRunner.Acceptance.Schemas;

namespace BenchRunner.Acceptance.Sequences;

/// <summary>What must hold between the keys of a sequence file.</summary>
internal static class SequenceRules
{
    /// <summary>Checks what is sound of a file.</summary>
    /// <param name="file">The file's values.</param>
    /// <param name="problems">Takes what is wrong.</param>
    public static void Check(Fields file, List<Problem> problems)
    {
        Points(file, problems);
        Limits(file, problems);
        Captures(file.Block("captures"), problems);
        IntegrationTimes.Check(file, file.Blocks("limits"), problems);
        if (file.Text("position") == "both" && file.IsWritten("companion"))
        {
            problems.Add(new Problem(
                file.KeyOf("companion"),
                "companion stands beside position both",
                "a companion for position low or high alone, as a module fills both places",
                "remove it or change the position"));
        }
    }

    private static void Points(Fields file, List<Problem> problems)
    {
        var lines = new Dictionary<string, int>(StringComparer.Ordinal);
        foreach (Fields point in file.Blocks("operating-points"))
        {
            if (point.Text("name") is { } name)
            {
                if (UncountedPoints.Has(name))
                {
                    problems.Add(new Problem(
                        point.Of("name"),
                        $"an operating point is named {name}",
                        $"a name other than {Shown.Or(UncountedPoints.All)}, which stand for captures of the bench itself",
                        "choose another name"));
                }

                if (!lines.TryAdd(name, point.Of("name").Line))
                {
                    problems.Add(new Problem(
                        point.Of("name"),
                        $"a second operating point is named {name}",
                        $"each name once (first in line {lines[name]})",
                        "choose another name"));
                }
            }

            Fields gate = point.Block("gate");
            if (gate.Number("on") is { } on && gate.Number("off") is { } off && on <= off)
            {
                problems.Add(new Problem(
                    gate.Of("on"),
                    $"the gate is on at {SiText.Format(on, "V")} and off at {SiText.Format(off, "V")}",
                    "an on level above the off level",
                    "swap or change them"));
            }
        }
    }

    private static void Limits(Fields file, List<Problem> problems)
    {
        IReadOnlyList<Fields> blocks = file.Blocks("operating-points");
        IReadOnlyList<string> points = [.. blocks.Select(point => point.Text("name")).OfType<string>()];
        var lines = new Dictionary<(string Quantity, string? Definition, string At), int>();
        foreach (Fields limit in file.Blocks("limits"))
        {
            Form(limit, problems);
            if (limit.Text("at") is not { } at)
            {
                continue;
            }

            // A point whose own name is wrong has been reported; its limits would only repeat that.
            if (!points.Contains(at) && points.Count == blocks.Count && points.Count > 0)
            {
                problems.Add(new Problem(
                    limit.Of("at"),
                    $"a limit stands at {Shown.Quote(at)}, which is no operating point",
                    Shown.Or(points),
                    Nearest.To(at, points) is { } near ? $"did you mean {near}?" : "name one of them or add it"));
            }

            string? definition = limit.Text("definition");
            if (limit.Text("quantity") is { } quantity
                && !lines.TryAdd((quantity, definition, at), limit.Where.Line))
            {
                problems.Add(new Problem(
                    limit.Where,
                    $"a second limit on {quantity} at {Shown.Cut(at)}",
                    $"one limit on a quantity at a point (first in line {lines[(quantity, definition, at)]})",
                    "bring the two together, e.g. with between, or remove one"));
            }
        }
    }

    private static void Form(Fields limit, List<Problem> problems)
    {
        string[] forms = [.. new[] { "at-most", "at-least", "between" }.Where(limit.IsWritten)];
        if (forms.Length != 1)
        {
            problems.Add(new Problem(
                limit.Where,
                forms.Length == 0 ? "a limit has no bound" : $"a limit has {string.Join(" and ", forms)}",
                "one of at-most, at-least or between",
                forms.Length == 0 ? "add one of them" : "keep one, or write both as between: [lower, upper]"));
        }
    }

    private static void Captures(Fields captures, List<Problem> problems)
    {
        if (captures.Whole("valid") is { } valid && captures.Whole("at-most") is { } most && most < valid)
        {
            problems.Add(new Problem(
                captures.Of("at-most"),
                $"at-most is {most}",
                $"at least the {valid} valid captures wanted",
                "raise it, or want fewer"));
        }
    }
}
