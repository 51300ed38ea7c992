using System.Text.Json;
using System.Text.RegularExpressions;

namespace BenchRunner.Tests.Documents;

/// <summary>The safety case names a test for each of its claims, and the table of faults one for each fault: those tests are
/// there.</summary>
public sealed partial class SafetyCaseTests
{
    private const string Heading = "## The safety case";
    private const string None = "none";

    [Fact]
    public void Every_claim_names_tests_that_exist() => AssertNamed(
        Rows(File.ReadLines(Repository.File("DEVELOPERS.md")).SkipWhile(line => line != Heading).Skip(1)
            .TakeWhile(line => !line.StartsWith("## ", StringComparison.Ordinal))));

    [Fact]
    public void Every_fault_names_tests_that_exist() => AssertNamed(
        Faults().Where(row => row.Split('|')[^2].Trim() != None));

    /// <summary>Source: tests/reference/scpi/faults.json (house rules).</summary>
    [Fact]
    public void Every_fault_of_the_table_is_there_and_one_alone_has_nothing_to_inject()
    {
        using JsonDocument table = JsonDocument.Parse(
            File.ReadAllText(Path.Combine(Repository.Root, "tests", "reference", "scpi", "faults.json")));
        IEnumerable<string> ids = table.RootElement.GetProperty("faults").EnumerateArray()
            .Select(fault => fault.GetProperty("id").GetString()!);

        Assert.Equal(ids, Faults().Select(Id).Where(id => id.Length > 0));
        Assert.Equal(["F26"], Faults().Where(row => row.Split('|')[^2].Trim() == None).Select(Id));
    }

    private static void AssertNamed(IEnumerable<string> rows)
    {
        Dictionary<string, string> classes = Classes();
        var missing = new List<string>();
        int count = 0;
        foreach (string row in rows)
        {
            count++;
            MatchCollection names = TestName().Matches(row.Split('|')[^2]);
            if (names.Count == 0)
            {
                missing.Add($"no test: {row}");
            }

            missing.AddRange(names
                .Where(name => !classes.TryGetValue(name.Groups["class"].Value, out string? code)
                    || !IsTest(code, name.Groups["test"].Value))
                .Select(name => name.Value));
        }

        Assert.NotEqual(0, count);
        Assert.Empty(missing);
    }

    /// <summary>A method of this name, or the class alone where the claim rests on all its tests.</summary>
    private static bool IsTest(string code, string name) =>
        name.Length == 0 || code.Contains($" {name}(", StringComparison.Ordinal);

    private static string Id(string row) => row.Split('|')[1].Trim();

    private static IEnumerable<string> Faults() => Rows(File.ReadLines(Repository.File("docs", "faults.md")));

    /// <summary>The rows of a section's one table, without its head.</summary>
    private static IEnumerable<string> Rows(IEnumerable<string> lines) =>
        lines.Where(line => line.StartsWith('|')).Skip(2);

    /// <summary>Name of each test class to its source; the parts of a partial class together.</summary>
    private static Dictionary<string, string> Classes() =>
        Directory.EnumerateFiles(Repository.File("tests"), "*Tests*.cs", SearchOption.AllDirectories)
            .GroupBy(file => Path.GetFileName(file).Split('.')[0])
            .ToDictionary(files => files.Key, files => string.Concat(files.Select(File.ReadAllText)));

    [GeneratedRegex("`(?<class>[A-Z][A-Za-z]+Tests)(?:[.](?<test>[A-Z][A-Za-z0-9_]+))?`")]
    private static partial Regex TestName();
}
