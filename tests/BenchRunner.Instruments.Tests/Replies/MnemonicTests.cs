using BenchRunner.Instruments.Replies;
using BenchRunner.Instruments.Tests.Scripts;

namespace BenchRunner.Instruments.Tests.Replies;

/// <summary>Source of the short forms: tests/reference/scpi/headers.json.</summary>
public class MnemonicTests
{
    public static TheoryData<string, string> Forms => new(
        ReferenceFile.Cases("headers.json", "short_forms")
            .Select(c => (c.GetProperty("long").GetString()!, c.GetProperty("short").GetString()!)));

    [Fact]
    public void No_case_is_left_out() => Assert.Equal(47, Forms.Count);

    [Theory]
    [MemberData(nameof(Forms))]
    public void A_word_has_its_short_form(string word, string shortForm)
    {
        Assert.Equal(shortForm, Mnemonic.ShortForm(word));
        Assert.True(Mnemonic.Matches(word, shortForm));
        Assert.True(Mnemonic.Matches(word, shortForm.ToLowerInvariant()));
        Assert.True(Mnemonic.Matches(word, word));
    }

    // From headers.json, matching: M007, M008, M033 (nothing between the forms), M035, M036, M043 (numbers).
    [Theory]
    [InlineData("SYSTem", "SYSTE", false)]
    [InlineData("SYSTem", "SYS", false)]
    [InlineData("LEVel", "LEVE", false)]
    [InlineData("OUTPut", "OUTP1", true)]
    [InlineData("OUTPut2", "OUTP2", true)]
    [InlineData("OUTPut2", "OUTP", false)]
    [InlineData("OUTPut", "OUTP-1", false)]
    [InlineData("INTernal2", "INT2", true)]
    [InlineData("INTernal2", "INT3", false)]
    [InlineData("16", "16", true)]
    [InlineData("16", "8", false)]
    public void Nothing_between_short_and_long_and_no_other_number_matches(string word, string answer, bool matches) =>
        Assert.Equal(matches, Mnemonic.Matches(word, answer));
}
