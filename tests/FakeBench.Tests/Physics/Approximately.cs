namespace FakeBench.Tests.Physics;

/// <summary>Comparison of numbers with a relative tolerance.</summary>
internal static class Approximately
{
    public static void Equal(double expected, double actual, double relative) =>
        Assert.True(Math.Abs(actual - expected) <= relative * Math.Abs(expected),
            $"{actual:g7} is {actual / expected - 1:P3} from {expected:g7}; {relative:P3} allowed.");
}
