using BenchRunner.Safety.Latches;

namespace BenchRunner.Safety.Tests.Latches;

public sealed class LatchFileTests : IDisposable
{
    private static readonly DateTimeOffset Noon = new(2026, 12, 1, 12, 0, 0, TimeSpan.Zero);
    private readonly TemporaryFolder _folder = new();

    public void Dispose() => _folder.Dispose();

    [Fact]
    public void A_bench_without_a_trip_has_no_latch() => Assert.Null(Latch().Read());

    [Fact]
    public void A_latch_outlives_the_process_that_set_it()
    {
        Latch().Set(Noon, "the interlock loop is open");

        Assert.Equal("2026-12-01T12:00:00Z the interlock loop is open", Latch().Read());
    }

    [Fact]
    public void A_second_trip_keeps_the_first_reason()
    {
        Latch().Set(Noon, "first");
        Latch().Set(Noon, "second");

        string[] lines = Latch().Read()!.Split('\n', StringSplitOptions.TrimEntries);
        Assert.EndsWith("first", lines[0], StringComparison.Ordinal);
        Assert.EndsWith("second", lines[1], StringComparison.Ordinal);
    }

    [Fact]
    public void Clearing_takes_the_latch_off_and_keeps_who_and_why()
    {
        Latch().Set(Noon, "the interlock loop is open");

        Latch().Clear(Noon, "A. Person", "door switch replaced");

        Assert.Null(Latch().Read());
        string history = File.ReadAllText(Latch().History);
        Assert.Contains("cleared by A. Person: door switch replaced", history, StringComparison.Ordinal);
        Assert.Contains("the interlock loop is open", history, StringComparison.Ordinal);
    }

    [Theory]
    [InlineData("", "why")]
    [InlineData("who", " ")]
    public void Clearing_without_name_or_reason_leaves_the_latch(string by, string because)
    {
        Latch().Set(Noon, "reason");

        Assert.ThrowsAny<ArgumentException>(() => Latch().Clear(Noon, by, because));
        Assert.NotNull(Latch().Read());
    }

    [Fact]
    public void A_line_break_in_a_reason_forges_no_second_entry()
    {
        Latch().Set(Noon, "broken\n2026-12-01T12:00:00Z cleared by nobody");

        Assert.DoesNotContain('\n', Latch().Read()!);
    }

    private LatchFile Latch() => new(_folder.File("lab-2.yaml"));
}
