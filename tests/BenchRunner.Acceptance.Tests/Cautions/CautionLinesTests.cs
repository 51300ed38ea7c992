using BenchRunner.Acceptance.Cautions;
using BenchRunner.Acceptance.Plans;

namespace BenchRunner.Acceptance.Tests.Cautions;

public sealed class CautionLinesTests
{
    private static string Lines(double? temperature = null, params string[] own)
    {
        var bench = Shipped.Bench with { Cautions = own };
        var sequence = Shipped.With(point => point with { Temperature = temperature });
        return string.Join('\n', CautionLines.Of(Planner.Plan(sequence, bench).Plan!, bench));
    }

    [Fact]
    public void The_cautions_carry_the_values_of_the_plan()
    {
        string lines = Lines();
        Assert.Contains("600 V DC", lines, StringComparison.Ordinal);
        Assert.Contains("786 V", lines, StringComparison.Ordinal);
        Assert.Contains("9 J in the bank", lines, StringComparison.Ordinal);
        Assert.Contains("it can kill", lines, StringComparison.Ordinal);
        Assert.Contains("not a safety device", lines, StringComparison.Ordinal);
    }

    [Fact]
    public void A_hot_plate_is_called_hot_and_the_labs_own_lines_come_last()
    {
        Assert.Contains("125 degC: hot", Lines(125), StringComparison.Ordinal);
        Assert.DoesNotContain("hot.", Lines(), StringComparison.Ordinal);
        Assert.EndsWith("Key 7 hangs on the door.", Lines(null, "Key 7 hangs on the door."), StringComparison.Ordinal);
    }

    [Theory]
    [InlineData("fail-safe")]
    [InlineData("safe to")]
    [InlineData("certified")]
    [InlineData("SIL")]
    public void Nothing_is_claimed_that_the_program_cannot_hold(string claim) =>
        Assert.DoesNotContain(claim, Lines(), StringComparison.OrdinalIgnoreCase);
}
