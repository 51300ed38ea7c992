using BenchRunner.Acceptance.Decisions;
using BenchRunner.Evidence.Stores;
using CsCheck;
using Microsoft.Extensions.Time.Testing;

namespace BenchRunner.Evidence.Tests.Schemas;

/// <summary>The view against a plain model that goes through the runs in memory.</summary>
public sealed class LotYieldTests
{
    private static readonly Gen<Trial> Trials = Gen.Select(
        Gen.Int[0, 3], Gen.Int[0, 2], Gen.Enum<Outcome>(), Gen.Enum<Outcome>(), Gen.Bool,
        (device, lot, outcome, rescored, isRescored) => new Trial(
            $"W1200-{device:d4}", lot == 0 ? null : $"L-{lot}", outcome, isRescored ? rescored : null));

    [Fact]
    public void Lot_yield_counts_each_device_once_by_its_newest_decision_of_the_attempt_that_counts() =>
        Trials.Array[0, 12].Sample(
            trials =>
            {
                using EvidenceFolder folder = new();
                Store(folder, trials);
                Assert.Equal(Model(trials), folder.Rows(
                    """
                    select lot, devices, accepted, rejected, undecided, not_measured, stopped, first_pass_yield
                    from lot_yield order by lot
                    """));
                Assert.Equal(
                    trials.Select(trial => (trial.Device, trial.Lot)).Distinct().Count(pair => pair.Lot is not null),
                    folder.Rows("select * from device_outcomes where current and lot is not null").Count);
            },
            iter: 25, threads: 1);

    private static void Store(EvidenceFolder folder, Trial[] trials)
    {
        FakeTimeProvider clock = Samples.Clock();
        using EvidenceStore store = EvidenceStore.Open(folder.File, clock);
        foreach (Trial trial in trials)
        {
            clock.Advance(TimeSpan.FromSeconds(1));
            RunWriter run = store.BeginRun(
                Samples.Header(trial.Device, trial.Lot, "again", sequence: Samples.Sequence(attempts: 99)));
            run.Finish(Samples.Decision(trial.Outcome));
            if (trial.Rescored is { } rescored)
            {
                folder.Write(
                    $"""
                    insert into decision (run, scoring, outcome, captures_taken, captures_valid, sequence,
                      sequence_revision, sequence_content, algorithm, platform, scored_at)
                    select run, 1, '{Word(rescored)}', 0, 0, sequence, sequence_revision, sequence_content, algorithm,
                      platform, scored_at from decision where run = (select max(id) from run)
                    """);
            }
        }
    }

    private static List<object?[]> Model(Trial[] trials) =>
    [
        .. trials.Where(trial => trial.Lot is not null).GroupBy(trial => trial.Lot).OrderBy(lot => lot.Key)
            .Select(lot =>
        {
            List<Outcome> current = [];
            List<Outcome> first = [];
            foreach (List<Trial> attempts in lot.GroupBy(trial => trial.Device).Select(device => device.ToList()))
            {
                current.Add((attempts.LastOrDefault(trial => trial.Outcome != Outcome.Stopped) ?? attempts[^1]).Newest);
                if (attempts.FirstOrDefault(trial => trial.Outcome != Outcome.Stopped) is { } passed)
                {
                    first.Add(passed.Newest);
                }
            }

            object Count(Outcome outcome) => (long)current.Count(found => found == outcome);
            return new object?[]
            {
                lot.Key, (long)current.Count, Count(Outcome.Accepted), Count(Outcome.Rejected),
                Count(Outcome.Undecided), Count(Outcome.NotMeasured), Count(Outcome.Stopped),
                first.Count == 0 ? null : first.Count(outcome => outcome == Outcome.Accepted) / (double)first.Count,
            };
        }),
    ];

    private static string Word(Outcome outcome) => outcome switch
    {
        Outcome.NotMeasured => "not-measured",
        _ => outcome.ToString().ToLowerInvariant(),
    };

    private sealed record Trial(string Device, string? Lot, Outcome Outcome, Outcome? Rescored)
    {
        public Outcome Newest => Rescored ?? Outcome;
    }
}
