using System.Text.RegularExpressions;
using BenchRunner.Acceptance.Files;

namespace BenchRunner.Acceptance.Tests.Files;

/// <summary>The broken files of the folder Broken, each with its messages beside it, one a line.</summary>
public sealed partial class BrokenFilesTests
{
    private static string Folder => Repository.PathOf("tests", "BenchRunner.Acceptance.Tests", "Broken");

    public static TheoryData<string> Names =>
    [
        .. Directory.GetFiles(Folder, "*.yaml")
            .Select(path => Path.GetFileNameWithoutExtension(path))
            .Order(StringComparer.Ordinal),
    ];

    [Fact]
    public void There_are_at_least_forty() => Assert.True(Names.Count >= 40);

    [Theory]
    [MemberData(nameof(Names))]
    public void A_broken_file_gives_its_messages(string name)
    {
        string[] expected = File.ReadAllLines(Path.Combine(Folder, name + ".txt"));
        Assert.Equal(expected, Messages(name));
    }

    [Theory]
    [MemberData(nameof(Names))]
    public void Each_message_says_where_what_was_found_what_was_expected_and_what_to_do(string name)
    {
        foreach (string message in Messages(name))
        {
            Match parts = Rule().Match(message);
            Assert.True(parts.Success, message);
            Assert.Equal(name + ".yaml", parts.Groups["file"].Value);
            Assert.DoesNotContain(message, char.IsControl);
        }
    }

    [Theory]
    [MemberData(nameof(Names))]
    public void Messages_stand_in_the_order_of_the_file(string name)
    {
        (int Line, int Column)[] places =
            [.. Readers.Problems(Source(name)).Select(problem => (problem.Where.Line, problem.Where.Column))];
        Assert.Equal(places.Order(), places);
    }

    private static SourceFile Source(string name) =>
        Readers.Source(name + ".yaml", File.ReadAllBytes(Path.Combine(Folder, name + ".yaml")));

    private static string[] Messages(string name) =>
        [.. Readers.Problems(Source(name)).Select(problem => problem.ToString())];

    // file:line:col: found; expected ...; what to do, a sentence.
    [GeneratedRegex(@"^(?<file>[^:]+):[1-9][0-9]*:[1-9][0-9]*: \S.*?; expected \S.*?; [a-z].*?[.?]$")]
    private static partial Regex Rule();
}
