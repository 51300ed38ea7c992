using System.Text;
using BenchRunner.Safety.Supervision;
using BenchRunner.Safety.Tests.Benches;

namespace BenchRunner.Safety.Tests.Exploration;

/// <summary>Draws the supervisor's table into DEVELOPERS.md.</summary>
public sealed class TableInDocumentTests
{
    private const string Begin = "<!-- supervisor:begin -->";
    private const string End = "<!-- supervisor:end -->";

    /// <summary>Set <c>BENCHRUNNER_WRITE_DOCS=1</c> to write it anew.</summary>
    [Fact]
    public void The_document_shows_the_table_as_it_is()
    {
        string path = Repository.File("DEVELOPERS.md");
        string text = File.ReadAllText(path);
        int begin = text.IndexOf(Begin, StringComparison.Ordinal) + Begin.Length;
        int end = text.IndexOf(End, StringComparison.Ordinal);
        Assert.True(begin >= Begin.Length && end > begin, $"DEVELOPERS.md has no {Begin} and {End}");
        string drawn = Drawn();
        if (Environment.GetEnvironmentVariable("BENCHRUNNER_WRITE_DOCS") == "1")
        {
            File.WriteAllText(path, text[..begin] + drawn + text[end..]);
            return;
        }

        Assert.Equal(drawn, text[begin..end]);
    }

    private static string Drawn()
    {
        var text = new StringBuilder("\n| In | when | needs | does | then |\n|---|---|---|---|---|\n");
        foreach (IGrouping<object, Transition> group in SupervisorTable.Standard.Rows
            .Where(row => row.To != row.From || row.Acts != SupervisorActs.None)
            .GroupBy(row => (object)(row.On, row.To == row.From ? (SupervisorState?)null : row.To, row.Needs, row.Acts)))
        {
            Transition row = group.First();
            string from = string.Join(", ", group.Select(one => one.From));
            string needs = row.Needs == SupervisorFacts.None ? "" : Words(row.Needs);
            string acts = row.Acts == SupervisorActs.None ? "" : Words(row.Acts);
            string to = row.To == row.From ? "stays" : row.To.ToString();
            text.Append($"| {from} | {row.On} | {needs} | {acts} | {to} |\n");
        }

        text.Append("\nWhat no line names changes nothing; what asks for leave is refused. The guardian acts in this order: ");
        text.Append(string.Join(", ", SupervisorTable.Standard.Guardian)).Append(".\n");
        return text.ToString();
    }

    private static string Words<T>(T flags)
        where T : struct, Enum => string.Join(
            ", ", Enum.GetValues<T>().Where(flag =>
                flags.HasFlag(flag) && System.Numerics.BitOperations.IsPow2(Convert.ToInt32(
                    flag, System.Globalization.CultureInfo.InvariantCulture))));
}
