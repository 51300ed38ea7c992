using BenchRunner.Acceptance.Decisions;
using BenchRunner.Evidence.Audits;
using BenchRunner.Runner.Devices;
using BenchRunner.Soak.Mixes;
using FakeBench.Population;

namespace BenchRunner.Soak.Tests;

/// <summary>Every way a part can be bad, through the whole shipped sequence in simulated time to the outcome that <c>FakeBench
/// devices</c> lists; and devices drawn at random, which pass.</summary>
[Trait("kind", "slow")]
public sealed class PopulationTrialTests : IDisposable
{
    private readonly Trials _trials = new();

    public static TheoryData<string> Named => [.. DevicePopulation.Named.Select(device => device.Serial)];

    public void Dispose() => _trials.Dispose();

    [Theory]
    [MemberData(nameof(Named))]
    public void A_named_device_gets_the_outcome_that_is_listed(string serial)
    {
        string expected = DevicePopulation.Named.Single(device => device.Serial == serial).ExpectedOutcome;

        (Outcome outcome, int exitCode, bool tripped, string reason) = Decided(serial);

        Assert.True(Words(outcome) == expected, $"{serial}: {outcome}, {reason}");
        Assert.Equal(
            tripped ? 4 : outcome switch { Outcome.Accepted => 0, Outcome.Rejected => 1, _ => 3 }, exitCode);
    }

    [Fact]
    public void At_least_36_of_40_devices_drawn_at_random_are_accepted()
    {
        int seed = Environment.TickCount;
        var random = new Random(seed);
        string[] serials =
        [
            .. Enumerable.Range(0, 8000).OrderBy(_ => random.Next()).Take(40).Select(number => $"W1200-{number:0000}"),
        ];

        Outcome[] outcomes = [.. serials.Select(serial => Decided(serial).Outcome)];

        Assert.All(outcomes, outcome => Assert.Contains(
            outcome, (Outcome[])[Outcome.Accepted, Outcome.Undecided, Outcome.Rejected]));
        Assert.True(
            outcomes.Count(outcome => outcome == Outcome.Accepted) >= 36,
            $"seed {seed}: {string.Join(' ', serials.Zip(outcomes))}");
    }

    private (Outcome Outcome, int ExitCode, bool Tripped, string Reason) Decided(string serial)
    {
        (Outcome, int, bool, string) end = default;
        Judged judged = _trials.Of(
            Trials.Alone([]) with { Device = serial, Captures = (5, 20) },
            facts =>
            {
                DeviceReport report = facts.Report!;
                end = (report.Decision.Outcome, facts.ExitCode, report.Ending == BenchEnding.Tripped,
                    report.Decision.Reason ?? "");
                return Judgement.Of(facts).Concat(
                    EvidenceAudit.Verify(facts.EvidenceFile).Problems.Select(p => $"{p}"));
            });
        Assert.True(judged.Wrong.Length == 0, $"{serial}: {judged.Wrong}");
        return end;
    }

    private static string Words(Outcome outcome) => outcome switch
    {
        Outcome.Accepted => "accepted",
        Outcome.Rejected => "rejected",
        Outcome.Undecided => "undecided",
        Outcome.NotMeasured => "not-measured",
        _ => "stopped",
    };
}
