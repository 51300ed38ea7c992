using BenchRunner.Signals.Ringing;

namespace BenchRunner.Signals.Tests.Ringing;

/// <summary>Drawn records that do not ring: a reason in every trial.</summary>
/// <remarks>The seeds are fixed: a failure comes back.</remarks>
public sealed class NoRingingTests
{
    public static TheoryData<int, double> Kinds => new()
    {
        { 100, 0 },
        { 400, 0 },
        { 400, 0.3 },
        { 400, 0.7 },
    };

    [Theory]
    [MemberData(nameof(Kinds))]
    public void Noise_line_step_and_exponential_give_a_reason(int count, double correlation) =>
        Assert.Equal([], Found(count, correlation, 30));

    [Theory]
    [MemberData(nameof(Kinds))]
    [Trait("kind", "slow")]
    public void Noise_line_step_and_exponential_give_a_reason_in_hundreds_of_trials(int count, double correlation) =>
        Assert.Equal([], Found(count, correlation, 200));

    [Fact]
    [Trait("kind", "slow")]
    public void Long_records_without_ringing_give_a_reason() => Assert.Equal([], Found(2000, 0, 100));

    private static List<string> Found(int count, double correlation, int draws)
    {
        List<string> found = [];
        for (ulong seed = 0; seed < (ulong)draws; seed++)
        {
            double[] noise = RingRecord.Noise(seed, count, correlation);
            foreach ((string what, Func<int, double> value) in Signals(count))
            {
                double[] samples = [.. noise.Select((e, n) => value(n) + e)];
                if (RingFit.Fit(samples, 1e-9, RingFit.MostModes).Reason is null)
                {
                    found.Add($"{what}, seed {seed}");
                }
            }
        }

        return found;
    }

    /// <summary>Signals that noise of standard deviation 1 is added to: for an exponential of 20 that is 5 %, for one of
    /// 1000 0.1 %.</summary>
    private static IEnumerable<(string What, Func<int, double> Value)> Signals(int count)
    {
        yield return ("noise", _ => 0);
        yield return ("line", n => 3 + (0.1 * n));
        yield return ("step", n => n > count / 3 ? 10 : 0);
        foreach (double height in new[] { 20.0, 100, 1000 })
        {
            foreach (double samples in new[] { 20.0, 60, 200 })
            {
                yield return ($"exponential of {height} over {samples} samples", n => height * Math.Exp(-n / samples));
            }
        }
    }
}
