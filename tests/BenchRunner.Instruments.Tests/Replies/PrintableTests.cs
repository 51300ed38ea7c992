using BenchRunner.Instruments.Replies;
using CsCheck;

namespace BenchRunner.Instruments.Tests.Replies;

public class PrintableTests
{
    [Theory]
    [InlineData("PSU\u001b]0;x\u0007", "PSU\\u001B]0;x\\u0007")]
    [InlineData("a\nb\r", "a\\u000Ab\\u000D")]
    [InlineData("x\u202ey", "x\\u202Ey")]
    [InlineData("\u0085\u2028", "\\u0085\\u2028")]
    [InlineData("Größe 5 µs", "Größe 5 µs")]
    public void Controls_and_marks_of_direction_are_escaped(string text, string shown) =>
        Assert.Equal(shown, Printable.Text(text));

    [Fact]
    public void Whatever_is_sent_stays_one_line_within_its_bound() =>
        Gen.String.Sample(text =>
        {
            var shown = Printable.Text(text, 50);
            return shown.Length <= (50 * 6) + 1 && !shown.Any(char.IsControl);
        });
}
