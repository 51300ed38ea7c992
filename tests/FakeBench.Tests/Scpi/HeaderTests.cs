using System.Text.Json;
using FakeBench.Scpi;

namespace FakeBench.Tests.Scpi;

public sealed class HeaderTests
{
    public static TheoryData<string, string, string> ShortForms() => new(
        ScpiReference.Cases("headers.json", "short_forms")
            .Select(c => (c.Text("id"), c.Text("long"), c.Text("short"))));

    public static TheoryData<string, string, string, int, int> Matchings()
    {
        var data = new TheoryData<string, string, string, int, int>();
        foreach (JsonElement c in ScpiReference.Cases("headers.json", "matching"))
        {
            int error = c.TryGetProperty("error", out JsonElement e) ? e.GetInt32() : 0;
            int suffix = c.TryGetProperty("suffixes", out JsonElement s) ? s[0].GetInt32() : 0;
            data.Add(c.Text("id"), c.Text("pattern"), c.Text("header"), error, suffix);
        }

        return data;
    }

    public static TheoryData<string, string, string[]> Walks() => new(
        ScpiReference.Cases("headers.json", "tree_walk").Select(c =>
            (c.Text("id"), c.Text("message"), c.GetProperty("headers").EnumerateArray().Select(h => h.GetString()!)
                .ToArray())));

    [Theory]
    [MemberData(nameof(ShortForms))]
    public void A_word_has_the_short_form_of_the_rule(string id, string whole, string expected) =>
        Assert.True(expected == Mnemonic.ShortForm(whole), id);

    [Theory]
    [MemberData(nameof(Matchings))]
    public void A_header_is_found_or_refused_as_the_standard_says(
        string id, string pattern, string header, int error, int suffix)
    {
        var tree = new CommandTree();
        tree.Add(pattern, 0, 0, (_, _) => { });
        int seen = 0;
        int numbered = 0;
        try
        {
            (_, Call call) = tree.Find(new ProgramUnit(header, []));
            numbered = suffix == 0 ? 0 : call.Suffix;
        }
        catch (ScpiException refused)
        {
            seen = refused.Number;
        }

        Assert.True((error, suffix) == (seen, numbered), $"{id}: error {seen}, suffix {numbered}");
    }

    [Theory]
    [MemberData(nameof(Walks))]
    public void A_message_walks_the_tree_as_the_standard_says(string id, string message, string[] headers)
    {
        var seen = new List<string>();
        foreach (string? line in new MessageFramer().Take(System.Text.Encoding.Latin1.GetBytes(message + "\n")))
        {
            var units = new ProgramMessage(line!);
            while (units.Next() is { } unit)
            {
                seen.Add(unit.Header);
            }
        }

        Assert.Equal(headers.Length, seen.Count);
        for (int i = 0; i < headers.Length; i++)
        {
            Assert.True(new HeaderPattern(headers[i]).Match(seen[i], out _) == HeaderMatch.Match, $"{id}: {seen[i]}");
        }
    }

    // Source: SCPI-1999 volume 1, 6.2.4 (T004 of headers.json): the path is STATus:, and STATus:ENABle? is undefined.
    [Fact]
    public void A_path_that_leads_nowhere_is_an_undefined_header()
    {
        var scpi = new Interpreter(() => "", () => { });
        Assert.Equal("0\n", Text(scpi.Obey("STAT:QUES?;ENAB?")));
        Assert.StartsWith("-113,", Text(scpi.Obey("SYST:ERR?")), StringComparison.Ordinal);
    }

    private static string Text(Reply reply) => System.Text.Encoding.Latin1.GetString(reply.Finish());
}
