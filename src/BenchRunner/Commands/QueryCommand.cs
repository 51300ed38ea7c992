using System.CommandLine;
using BenchRunner.Evidence.Queries;
using BenchRunner.Files;

namespace BenchRunner.Commands;

/// <summary><c>query</c>: named questions and free SQL on the evidence, on a connection that cannot write.</summary>
internal static class QueryCommand
{
    public static Command Build()
    {
        var name = new Argument<string?>("question")
        {
            Description = "one of those below",
            DefaultValueFactory = _ => null,
        };
        var sql = new Option<string?>("--sql") { Description = "one SELECT of your own, on the views and tables" };
        Option<string?> evidence = CommonOptions.Evidence();
        var csv = new Option<bool>("--csv") { Description = "comma-separated values" };
        Option<bool> json = CommonOptions.Json();
        Dictionary<string, Option<string?>> filters = NamedQueries.All.SelectMany(query => query.Filters)
            .DistinctBy(filter => filter.Name)
            .ToDictionary(filter => filter.Name, filter =>
                new Option<string?>("--" + filter.Name) { Description = filter.Meaning });
        var command = new Command("query", Help()) { name, sql, evidence, csv, json };
        foreach (Option filter in filters.Values)
        {
            command.Add(filter);
        }

        command.SetAction((parsed, stop) =>
        {
            Dictionary<string, string> given = filters
                .Where(filter => parsed.GetValue(filter.Value) is not null)
                .ToDictionary(filter => filter.Key, filter => parsed.GetValue(filter.Value)!);
            QueryTable table = Ask(parsed.GetValue(name), parsed.GetValue(sql), parsed.GetValue(evidence), given, stop);
            System.Console.Out.Write(
                parsed.GetValue(json) ? QueryText.Json(table)
                    : parsed.GetValue(csv) ? QueryText.Csv(table) : QueryText.Table(table));
            return Task.FromResult(ExitCode.Done);
        });
        return command;
    }

    private static QueryTable Ask(
        string? name, string? sql, string? evidence, Dictionary<string, string> filters, CancellationToken stop) =>
        (name, sql) switch
        {
            (null, null) => throw new InputException(
                "say which question, or give --sql; 'benchrunner query --help' lists the questions"),
            ({ }, { }) => throw new InputException("give a named question or --sql, not both"),
            (null, { }) when filters.Count > 0 =>
                throw new InputException("--sql takes no filters; write them into the SQL"),
            (null, { } text) => QueryRunner.RunSql(EvidenceFiles.ToRead(evidence), text, stop),
            ({ } question, null) => QueryRunner.Run(EvidenceFiles.ToRead(evidence), question, filters, stop),
        };

    private static string Help() =>
        "asks the evidence; nothing is changed\n"
        + string.Join('\n', NamedQueries.All.Select(query =>
            $"  {query.Name}: {query.Question} "
            + string.Join(' ', query.Filters.Select(filter => filter.Required
                ? $"--{filter.Name}" : $"[--{filter.Name}]"))))
        + "\nExample: benchrunner query device-history --device W1200-0001";
}
