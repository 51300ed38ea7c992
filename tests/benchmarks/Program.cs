using System.Globalization;
using System.Text.Json;

namespace BenchRunner.Benchmarks;

/// <summary>The benchmark table: <c>dotnet run -c Release --project tests/benchmarks -- [group…] [--seed N] [--json]
/// [--list]</c>.</summary>
internal static class Program
{
    private const int Repeats = 2;
    private static readonly JsonSerializerOptions _form = new() { WriteIndented = true };

    private static readonly Dictionary<string, Func<int, IGroup>> _groups = new()
    {
        ["signals"] = seed => new SignalsGroup(seed),
        ["fake"] = seed => new FakeGroup(seed),
    };

    private static int Main(string[] arguments)
    {
        List<Goal> goals = [.. Goal.Read("goals.json", isOwn: false), .. Goal.Read("own-goals.json", isOwn: true)];
        string[] known = [.. goals.Select(goal => goal.Group).Distinct()];
        if (Options.Read(arguments, known) is not { } options)
        {
            Console.Error.WriteLine($"usage: [{string.Join(" | ", known)}]… [--seed N] [--json] [--list]");
            return 2;
        }

        List<Row> rows = [];
        foreach (string group in known.Where(options.Wants))
        {
            rows.AddRange(options.List
                ? goals.Where(goal => goal.Group == group).Select(NotMeasured)
                : Measure(group, goals, options.Seed));
        }

        Write(rows, options);
        return 0;
    }

    private static List<Row> Measure(string name, List<Goal> goals, int seed)
    {
        List<Row> rows = [];
        if (_groups.TryGetValue(name, out Func<int, IGroup>? make))
        {
            using IGroup group = make(seed);
            foreach (Benchmark benchmark in group.Benchmarks)
            {
                rows.Add(Measure(benchmark, goals.Single(goal => goal.Work == benchmark.Work)));
            }
        }

        rows.AddRange(goals.Where(goal => goal.Group == name && !rows.Exists(row => row.Goal == goal))
            .Select(NotMeasured));
        return rows;
    }

    /// <summary>A missed row is repeated twice; the last stands, all are shown.</summary>
    private static Row Measure(Benchmark benchmark, Goal goal)
    {
        List<double?> figures = [];
        while (true)
        {
            Outcome outcome;
            try
            {
                outcome = benchmark.Measure();
            }
            catch (PeerException failure)
            {
                outcome = Outcome.Without("", failure.Message);
            }

            figures.Add(Row.FigureOf(goal, outcome));
            Row row = new(goal, outcome, [.. figures]);
            if (row.IsMet || outcome.Missing is not null || figures.Count > Repeats)
            {
                return row;
            }
        }
    }

    private static Row NotMeasured(Goal goal) => new(goal, Outcome.Without("", "not measured"), []);

    private static void Write(List<Row> rows, Options options)
    {
        if (options.Json)
        {
            Console.WriteLine(JsonSerializer.Serialize(
                new { seed = options.Seed, rows = rows.Select(row => row.ToJson()) }, _form));
            return;
        }

        foreach (Row row in rows)
        {
            Console.WriteLine(options.List ? Listed(row.Goal) : Line(row));
        }
    }

    private static string Listed(Goal goal) => string.Create(
        CultureInfo.InvariantCulture,
        $"{goal.Work,-32} {(_groups.ContainsKey(goal.Group) ? "built" : "not built"),-10} {goal.Better} than "
            + $"{Bounds(goal)} of {goal.Of}{(goal.IsOwn ? " (own)" : "")}: {goal.What}");

    private static string Line(Row row)
    {
        Goal goal = row.Goal;
        string figures = row.Figures.Count == 0 ? "-" : string.Join(" then ", row.Figures.Select(Text));
        return string.Create(
            CultureInfo.InvariantCulture,
            $"{goal.Work,-32} {(row.IsMet ? "met    " : "NOT MET")} {figures} of {goal.Of}, goal {Bounds(goal)} "
                + $"({goal.Better}); ours {Text(row.Last.Ours)}, peer {Text(row.Last.Peer)}, "
                + $"floor {Text(row.Last.Floor)} {row.Last.Unit}"
                + $"{(row.Last.Missing is { } missing ? "; " + missing : "")}"
                + $"{(row.Last.Note is { } note ? "; " + note : "")}");
    }

    private static string Bounds(Goal goal) =>
        string.Join(" to ", goal.Bounds.Select(bound => bound.ToString(CultureInfo.InvariantCulture)));

    private static string Text(double? figure) => figure?.ToString("G4", CultureInfo.InvariantCulture) ?? "-";

    private static string Text(Figure? figure) => figure is { } f
        ? string.Create(CultureInfo.InvariantCulture, $"{f.Median:G4} ±{f.Spread:0 %}")
        : "-";
}
