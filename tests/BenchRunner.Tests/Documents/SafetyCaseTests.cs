using System.Text.RegularExpressions;

namespace BenchRunner.Tests.Documents;

/// <summary>The safety case names a test for each of its claims: those tests are there.</summary>
public sealed partial class SafetyCaseTests
{
    private const string Heading = "## The safety case";

    [Fact]
    public void Every_claim_names_tests_that_exist()
    {
        string[] claims = [.. Section().Where(line => line.StartsWith("| ", StringComparison.Ordinal)).Skip(2)];
        Assert.NotEmpty(claims);

        Dictionary<string, string> classes = Classes();
        var missing = new List<string>();
        foreach (string claim in claims)
        {
            MatchCollection names = TestName().Matches(claim.Split('|')[^2]);
            if (names.Count == 0)
            {
                missing.Add($"no test: {claim}");
            }

            missing.AddRange(names
                .Where(name => !classes.TryGetValue(name.Groups["class"].Value, out string? code)
                    || !IsTest(code, name.Groups["test"].Value))
                .Select(name => name.Value));
        }

        Assert.Empty(missing);
    }

    /// <summary>A method of this name, or the class alone where the claim rests on all its tests.</summary>
    private static bool IsTest(string code, string name) =>
        name.Length == 0 || code.Contains($" {name}(", StringComparison.Ordinal);

    private static IEnumerable<string> Section() =>
        File.ReadLines(Repository.File("DEVELOPERS.md")).SkipWhile(line => line != Heading).Skip(1)
            .TakeWhile(line => !line.StartsWith("## ", StringComparison.Ordinal));

    /// <summary>Name of each test class to its source; the parts of a partial class together.</summary>
    private static Dictionary<string, string> Classes() =>
        Directory.EnumerateFiles(Repository.File("tests"), "*Tests*.cs", SearchOption.AllDirectories)
            .GroupBy(file => Path.GetFileName(file).Split('.')[0])
            .ToDictionary(files => files.Key, files => string.Concat(files.Select(File.ReadAllText)));

    [GeneratedRegex("`(?<class>[A-Z][A-Za-z]+Tests)(?:[.](?<test>[A-Z][A-Za-z0-9_]+))?`")]
    private static partial Regex TestName();
}
