using BenchRunner.Evidence.Queries;
using Microsoft.Data.Sqlite;

namespace BenchRunner.Evidence.Tests.Queries;

public sealed class NamedQueryTests(SixRuns six) : IClassFixture<SixRuns>
{
    public static TheoryData<string> Names { get; } = [.. NamedQueries.All.Select(query => query.Name)];

    [Theory]
    [MemberData(nameof(Names))]
    public void A_question_is_answered_with_its_required_filters_and_with_all(string name)
    {
        NamedQuery query = NamedQueries.Find(name);
        Dictionary<string, string> all = query.Filters.ToDictionary(filter => filter.Name, Value);
        Dictionary<string, string> required =
            query.Filters.Where(filter => filter.Required).ToDictionary(filter => filter.Name, Value);
        QueryTable few = Ask(name, all);
        QueryTable many = Ask(name, required);
        Assert.True(many.Rows.Count >= few.Rows.Count);
        Assert.Equal(many.Columns, few.Columns);
        Assert.DoesNotContain(NamedQuery.Marker, query.SqlWith(["lot"]), StringComparison.Ordinal);
        Assert.Contains('?', query.Question);
    }

    [Theory]
    [MemberData(nameof(Names))]
    public void A_filter_that_matches_nothing_gives_no_rows(string name)
    {
        foreach (QueryFilter filter in NamedQueries.Find(name).Filters.Where(filter => !filter.IsCount))
        {
            Dictionary<string, string> values = NamedQueries.Find(name).Filters
                .Where(other => other.Required).ToDictionary(other => other.Name, Value);
            values[filter.Name] = "' or 1=1 --";
            Assert.Empty(Ask(name, values).Rows);
        }
    }

    [Fact]
    public void The_history_of_a_device_shows_every_attempt_newest_first()
    {
        QueryTable history = Ask("device-history", new() { ["device"] = "W1200-0002" });
        Assert.Equal([["accepted", 1L, 2L], ["rejected", 0L, 1L]], Columns(history, "outcome", "current", "attempt"));
    }

    [Fact]
    public void Lot_yield_is_by_device_and_first_pass()
    {
        string[] columns = ["lot", "devices", "accepted", "undecided", "first_pass_yield"];
        Assert.Equal([["L-1", 3L, 3L, 0L, 2.0 / 3]], Columns(Ask("lot-yield", new() { ["lot"] = "L-1" }), columns));
        Assert.Equal(
            [["L-1", 3L, 3L, 0L, 2.0 / 3], ["L-2", 1L, 0L, 1L, 0.0]], Columns(Ask("all-lots-yield", []), columns));
    }

    [Fact]
    public void The_worst_values_lie_nearest_to_their_limit_and_count_only_while_current()
    {
        QueryTable worst = Ask("worst-20", new() { ["quantity"] = "eon", ["limit"] = "3" });
        Assert.Equal(
            [["W1200-0004", 700e-6], ["W1200-0002", 690e-6], ["W1200-0005", 640e-6]],
            Columns(worst, "device", "value"));
        Assert.Equal((705e-6 - 700e-6) / 705e-6, (double)worst.Rows[0][8]!, 1e-12);
    }

    [Fact]
    public void A_distribution_has_mean_and_spread_of_the_current_values()
    {
        QueryTable lots = Ask("distribution-by-lot", new() { ["quantity"] = "eon", ["lot"] = "L-1" });
        object?[] row = Assert.Single(Columns(lots, "devices", "mean", "standard_deviation", "lowest", "highest"));
        // 600, 690 and 630 uJ: mean 640; squares of the deviations 1600, 2500, 100; sd = sqrt(4200 / 2), by hand.
        Assert.Equal(3L, row[0]);
        Assert.Equal(640e-6, (double)row[1]!, 640e-6 * 1e-12);
        Assert.Equal(Math.Sqrt(2100) * 1e-6, (double)row[2]!, 46e-6 * 1e-9);
        Assert.Equal((600e-6, 690e-6), (row[3], row[4]));
        Assert.Null(Ask("distribution-by-lot", new() { ["quantity"] = "eon", ["lot"] = "L-2" }).Rows[0][5]);
    }

    [Fact]
    public void A_companion_counts_every_capture_it_took_part_in_and_proving_ones_apart()
    {
        // By hand: two runs with C-17, the first of two captures and a proving one, the second of one.
        string[] columns = ["companion", "runs", "captures_taken", "proving_captures"];
        Assert.Equal(
            [["C-17", 2L, 3L, 1L], ["C-18", 1L, 0L, 0L]], Columns(Ask("companions", []), columns));
        Assert.Equal(
            [["C-18", 1L, 0L, 0L]], Columns(Ask("companions", new() { ["companion"] = "C-18" }), columns));
    }

    [Fact]
    public void Notes_are_told_newest_first()
    {
        string[] columns = ["device", "kind", "author", "because"];
        Assert.Equal(
            [["W1200-0003", "scrap", "K. Weber", "lead bent"], ["W1200-0001", "release", "K. Weber", "shipped"]],
            Columns(Ask("notes", new() { ["lot"] = "L-1" }), columns));
        Assert.Equal(
            [["W1200-0003", "scrap", "K. Weber", "lead bent"]],
            Columns(Ask("notes", new() { ["kind"] = "scrap" }), columns));
    }

    [Theory]
    [InlineData("device-history", "device", "needs --device")]
    [InlineData("worst-20", "quantity", "needs --quantity")]
    public void A_missing_filter_is_named(string name, string filter, string expected) =>
        Assert.Contains(expected, Refused(() => Ask(name, []), filter), StringComparison.Ordinal);

    [Fact]
    public void Wrong_names_and_values_are_answered_with_the_right_ones()
    {
        Assert.Contains("device-history, ", Refused(() => Ask("yield", []), "yield"), StringComparison.Ordinal);
        string known = Refused(() => Ask("lot-yield", new() { ["batch"] = "1" }), "--batch");
        Assert.Contains("it has --lot", known, StringComparison.Ordinal);
        foreach (string limit in new[] { "0", "-1", "ten", "1e9", "" })
        {
            Refused(() => Ask("last-runs", new() { ["limit"] = limit }), $"'{limit}'");
        }
    }

    [Fact]
    public void A_file_that_is_not_there_is_said_and_not_made()
    {
        string path = Path.Combine(six.Folder, "none.db");
        CancellationToken test = TestContext.Current.CancellationToken;
        Refused(() => QueryRunner.Run(path, "last-runs", new Dictionary<string, string>(), test), "none.db");
        Assert.False(File.Exists(path));
    }

    [Theory]
    [InlineData("device-history")]
    [InlineData("device-values")]
    [InlineData("lot-yield")]
    [InlineData("lot-devices")]
    [InlineData("worst-20", "lot")]
    [InlineData("distribution-by-lot", "lot")]
    [InlineData("out-of-limit", "lot")]
    [InlineData("out-of-limit", "device")]
    [InlineData("capture-values")]
    [InlineData("captures-rejected", "device")]
    [InlineData("run-events")]
    [InlineData("run-values")]
    [InlineData("worst-20")]
    [InlineData("distribution-by-lot")]
    [InlineData("notes", "lot")]
    [InlineData("notes", "device")]
    [InlineData("leakage-holds", "device")]
    [InlineData("leakage-holds", "run")]
    [InlineData("companions", "companion")]
    public void A_question_about_one_device_or_lot_scans_no_table(string name, params string[] also)
    {
        NamedQuery query = NamedQueries.Find(name);
        IEnumerable<QueryFilter> always = query.Filters.Where(filter => filter.Required || filter.IsCount);
        string[] given = [.. always.Select(filter => filter.Name), .. also];
        using SqliteConnection connection = six.Connect();
        using SqliteCommand command = connection.CreateCommand();
        command.CommandText = "explain query plan " + query.SqlWith(given);
        foreach (string filter in given)
        {
            command.Parameters.AddWithValue("$" + filter, Value(query.Filters.Single(found => found.Name == filter)));
        }

        using SqliteDataReader reader = command.ExecuteReader();
        List<string> steps = [];
        while (reader.Read())
        {
            steps.Add(reader.GetString(3));
        }

        string[] stored = ["m", "r", "d", "c", "v", "e", "a", "n", "one", "h", "measurement", "run", "hold"];
        string plan = string.Join("\n", steps);
        // "a" of distribution-by-lot and "one" are its own short lists of lots, not tables.
        string[] lists = name == "distribution-by-lot" ? ["a", "o", "one", "many"] : [];
        foreach (string step in steps.Where(step => step.StartsWith("SCAN ", StringComparison.Ordinal)))
        {
            string table = step.Split(' ')[1];
            Assert.False(stored.Except(lists).Contains(table), $"{step} in\n{plan}");
        }
    }

    private string Value(QueryFilter filter) => filter.Name switch
    {
        "device" => "W1200-0001",
        "lot" => "L-1",
        "quantity" => "eon",
        "at" => "rated",
        "run" => six.FirstRun,
        "part" => "WD-1200S-25",
        "outcome" => "accepted",
        "severity" => "alarm",
        "companion" => "C-17",
        "kind" => "scrap",
        "limit" => "5",
        _ => throw new ArgumentException($"no value for --{filter.Name}"),
    };

    private static List<object?[]> Columns(QueryTable table, params string[] columns) =>
        [.. table.Rows.Select(row => columns.Select(column => row[table.Columns.ToList().IndexOf(column)]).ToArray())];

    private QueryTable Ask(string name, Dictionary<string, string> filters) =>
        QueryRunner.Run(six.File, name, filters, TestContext.Current.CancellationToken);

    private static string Refused(Func<QueryTable> ask, string named)
    {
        string message = Assert.Throws<QueryException>(ask).Message;
        Assert.Contains(named, message, StringComparison.Ordinal);
        return message;
    }
}
