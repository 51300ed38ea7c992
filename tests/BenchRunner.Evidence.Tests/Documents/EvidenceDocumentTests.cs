using System.Text.RegularExpressions;
using BenchRunner.Evidence.Queries;
using BenchRunner.Evidence.Stores;

namespace BenchRunner.Evidence.Tests.Documents;

/// <summary>docs/evidence.md says every view with its columns, and every named question with its filters.</summary>
public sealed partial class EvidenceDocumentTests : IDisposable
{
    private readonly EvidenceFolder _folder = new();
    private readonly string[] _lines = File.ReadAllLines(
        Path.Combine(AppContext.BaseDirectory, "Documents", "evidence.md"));

    public void Dispose() => _folder.Dispose();

    [Fact]
    public void Every_column_of_every_view_is_told_and_no_other()
    {
        EvidenceStore.Open(_folder.File, Samples.Clock()).Dispose();
        List<string> views = [.. _folder.Rows("select name from sqlite_schema where type = 'view'")
            .Select(row => (string)row[0]!)];
        Assert.NotEmpty(views);
        foreach (string view in views)
        {
            IEnumerable<string> columns = _folder.Rows($"select name from pragma_table_info('{view}')")
                .Select(row => (string)row[0]!);
            Assert.Equal(
                columns.Order(StringComparer.Ordinal).Prepend(view),
                Told(view).Order(StringComparer.Ordinal).Prepend(view));
        }
    }

    [Fact]
    public void Every_named_question_is_told_with_its_filters()
    {
        foreach (NamedQuery query in NamedQueries.All)
        {
            string[] cells = Cells("## Named questions", query.Name);
            Assert.Equal(
                query.Filters.Select(filter => filter.Name).Order(StringComparer.Ordinal).Prepend(query.Name),
                Filter().Matches(cells[1]).Select(match => match.Groups[1].Value).Order(StringComparer.Ordinal)
                    .Prepend(query.Name));
        }
    }

    [GeneratedRegex("--([a-z]+)")]
    private static partial Regex Filter();

    [GeneratedRegex(@"\([^)]*\)")]
    private static partial Regex InBrackets();

    /// <summary>The columns that the page gives a view: of its own table, or of its row among the others.</summary>
    private IEnumerable<string> Told(string view)
    {
        string[] own = Section($"### {view}:");
        if (own.Length == 0)
        {
            // What a column means stands in brackets behind it, and behind the colon what the view says.
            return InBrackets().Replace(Cells("### The others", view)[1], "").Split(':', 2)[0].Split([',', ';'])
                .Select(column => column.Trim());
        }

        return own.Where(line => line.StartsWith('|') && !line.StartsWith("|---", StringComparison.Ordinal))
            .Skip(1)
            .SelectMany(line => line.Split('|')[1].Split(','))
            .Select(column => column.Trim());
    }

    /// <summary>The lines from a heading to the next one; none where there is no such heading.</summary>
    private string[] Section(string heading) =>
        [.. _lines.SkipWhile(line => !line.StartsWith(heading, StringComparison.Ordinal)).Skip(1)
            .TakeWhile(line => !line.StartsWith('#'))];

    private string[] Cells(string heading, string name) =>
        [.. Assert.Single(Section(heading), line => line.StartsWith($"| {name} |", StringComparison.Ordinal))
            .Split('|', StringSplitOptions.RemoveEmptyEntries).Select(cell => cell.Trim())];
}
