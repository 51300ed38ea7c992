using BenchRunner.Soak.Fuzz;

namespace BenchRunner.Instruments.Tests.Fuzz;

/// <summary>A hundredth of the soak's fuzzer, from a seed that is printed.</summary>
public sealed class FuzzTests(ITestOutputHelper output)
{
    [Fact]
    public void Whatever_comes_is_a_value_or_a_documented_exception_within_bounds()
    {
        using var text = new StringWriter();
        IReadOnlyList<string> failures =
            FuzzRun.Run(1, FuzzRun.ParserMessages / 100, FuzzRun.SocketMessages / 100, text);
        output.WriteLine(text.ToString());
        Assert.Empty(failures);
    }

    [Fact]
    public void A_message_of_a_seed_is_always_the_same()
    {
        byte[] one = new byte[Messages.Longest], other = new byte[Messages.Longest];
        int length = new Messages(7).Make(4711, one);
        var again = new Messages(7);
        again.Make(12, other);
        Assert.Equal(one[..length], other[..again.Make(4711, other)]);
    }
}
