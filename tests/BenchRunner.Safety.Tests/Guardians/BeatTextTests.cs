using BenchRunner.Safety.Guardians;

namespace BenchRunner.Safety.Tests.Guardians;

/// <summary>The words on the pipe: what is written is read back, and nothing else is a beat.</summary>
public sealed class BeatTextTests
{
    private static readonly HeardKind[] _kinds =
        [HeardKind.Polled, HeardKind.MakingSafe, HeardKind.Done, HeardKind.Left];

    [Fact]
    public void What_is_written_is_read_back()
    {
        var random = new Random(7);
        for (int i = 0; i < 10_000; i++)
        {
            HeardKind kind = _kinds[random.Next(_kinds.Length)];
            long number = random.NextInt64(1, long.MaxValue);
            double commanded = Volts(random);
            double seen = Volts(random);
            double? believed = random.Next(3) == 0 ? null : Volts(random);
            bool isDoubted = random.Next(4) == 0;

            Heard heard = BeatText.Read(
                BeatText.Write(kind, number, commanded, seen, believed, isDoubted), number);

            Assert.Equal(
                new Heard(kind, commanded, seen, isDoubted ? null : believed) { IsDoubted = isDoubted }, heard);
        }
    }

    [Theory]
    [InlineData("polled 8 600 598.7 598.6")]
    [InlineData("polled 6 600 598.7 598.6")]
    [InlineData("polled +7 600 598.7 598.6")]
    [InlineData("polled 7.0 600 598.7 598.6")]
    [InlineData("polled 99999999999999999999 600 598.7 598.6")]
    [InlineData("polled 7 600 598.7")]
    [InlineData("polled 7 600 598.7 598.6 ")]
    [InlineData("polled 7 -600 598.7 598.6")]
    [InlineData("polled 7 NaN 598.7 598.6")]
    [InlineData("polled 7 600 Infinity 598.6")]
    [InlineData("polled 7 600 1e3 598.6")]
    [InlineData("polled 7 600 598,7 598.6")]
    [InlineData("POLLED 7 600 598.7 598.6")]
    [InlineData("ended 7 600 598.7 598.6")]
    [InlineData("")]
    public void What_is_missing_doubled_or_forged_is_no_beat(string line) =>
        Assert.Equal(HeardKind.Malformed, BeatText.Read(line, due: 7).Kind);

    [Fact]
    public void Whatever_comes_is_read_without_an_exception()
    {
        var random = new Random(11);
        const string letters = "polled making-safe done left 0123456789.+-e,\t\0\u001b\uFFFD doubted NaN";
        for (int i = 0; i < 20_000; i++)
        {
            string line = string.Concat(
                Enumerable.Range(0, random.Next(300)).Select(_ => letters[random.Next(letters.Length)]));

            Heard heard = BeatText.Read(line, 1);

            Assert.InRange(heard.Text.Length, 0, 61);
        }
    }

    [Fact]
    public void A_beat_fits_in_the_longest_line()
    {
        string longest = BeatText.Write(HeardKind.MakingSafe, long.MaxValue, 123456.78, 123456.78, 123456.78);

        Assert.InRange(longest.Length, 1, BeatText.LongestLine);
    }

    private static double Volts(Random random) => random.Next(150_000) / 100.0;
}
