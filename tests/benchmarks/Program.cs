using System.Globalization;
using System.Text.Json;

namespace BenchRunner.Benchmarks;

/// <summary>The benchmark table: <c>dotnet run -c Release --project tests/benchmarks -- [group | group/work]…
/// [--seed N] [--json] [--list]</c>.</summary>
internal static class Program
{
    private const int Repeats = 2;
    private static readonly JsonSerializerOptions _form = new() { WriteIndented = true };

    private static readonly Dictionary<string, Func<int, IGroup>> _groups = new()
    {
        ["signals"] = seed => new SignalsGroup(seed),
        ["fake"] = seed => new FakeGroup(seed),
        ["safety"] = seed => new SafetyGroup(seed),
        ["links"] = seed => new LinksGroup(seed),
    };

    private static int Main(string[] arguments)
    {
        List<Goal> goals = [.. Goal.Read("goals.json", isOwn: false), .. Goal.Read("own-goals.json", isOwn: true)];
        if (Options.Read(arguments, goals) is not { } options)
        {
            Console.Error.WriteLine(
                "usage: [group | group/work]… [--seed N] [--json] [--list]; groups: "
                    + string.Join(" ", goals.Select(goal => goal.Group).Distinct()));
            return 2;
        }

        List<Row> rows = [];
        foreach (IGrouping<string, Goal> group in goals.Where(options.Wants).GroupBy(goal => goal.Group))
        {
            rows.AddRange(options.List ? group.Select(NotMeasured) : Measure(group, goals, options.Seed));
        }

        Write(rows, options);
        return 0;
    }

    /// <summary>Measures the goals of one group, in the order of their file.</summary>
    private static List<Row> Measure(IGrouping<string, Goal> wanted, List<Goal> goals, int seed)
    {
        if (!_groups.TryGetValue(wanted.Key, out Func<int, IGroup>? make))
        {
            return [.. wanted.Select(NotMeasured)];
        }

        using IGroup group = make(seed);
        foreach (Benchmark benchmark in group.Benchmarks)
        {
            if (!goals.Exists(goal => goal.Work == benchmark.Work))
            {
                throw new InvalidOperationException($"{benchmark.Work} has no goal: a row without one says nothing.");
            }
        }

        return [.. wanted.Select(goal => group.Benchmarks.SingleOrDefault(benchmark => benchmark.Work == goal.Work)
            is { } benchmark ? Measure(benchmark, goal) : NotMeasured(goal))];
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
        $"{goal.Work,-32} {(_groups.ContainsKey(goal.Group) ? "built" : "not built"),-10} goal {Bounds(goal)} of "
            + $"{goal.Of} ({goal.Better}){(goal.IsOwn ? ", our own" : "")}: {goal.What}");

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
