using BenchRunner.Acceptance.Decisions;
using BenchRunner.Acceptance.Sequences;
using BenchRunner.Evidence.Audits;
using BenchRunner.Evidence.Notes;
using BenchRunner.Evidence.Stores;
using Microsoft.Extensions.Time.Testing;

namespace BenchRunner.Evidence.Tests.Schemas;

/// <summary>Attempts, refusals, current decisions and yields against a plain model, under every mixture.</summary>
public sealed class LotYieldTests : IDisposable
{
    private const int Mixtures = 12;
    private const int Steps = 40;

    private static readonly Sequence[] Sequences =
        [Samples.Sequence(attempts: 2), Samples.Sequence(attempts: 3, name: "outgoing")];

    private readonly EvidenceFolder _folder = new();
    private readonly FakeTimeProvider _clock = Samples.Clock();
    private readonly LotModel _model = new();
    private readonly Dictionary<LotRun, RunWriter> _going = [];
    private EvidenceStore _store;

    public LotYieldTests()
    {
        _clock.AutoAdvanceAmount = TimeSpan.FromMilliseconds(1);
        _store = EvidenceStore.Open(_folder.File, _clock);
    }

    public static TheoryData<int> Numbers { get; } = [.. Enumerable.Range(1, Mixtures)];

    public void Dispose()
    {
        _store.Dispose();
        _folder.Dispose();
    }

    [Theory]
    [MemberData(nameof(Numbers))]
    public void Each_device_counts_once_by_the_newest_decision_of_the_attempt_that_counts(int number)
    {
        int seed = HashCode.Combine(Environment.TickCount, number);
        TestContext.Current.TestOutputHelper!.WriteLine($"seed {seed}");
        var random = new Random(seed);
        for (int step = 0; step < Steps; step++)
        {
            switch (random.Next(10))
            {
                case < 6: BeginRun(random); break;
                case 6: EndOne(random); break;
                case 7: Rescore(random); break;
                case 8: Note(random); break;
                default: Reopen(); break;
            }
        }

        Compare();
    }

    private static T Any<T>(Random random, IReadOnlyList<T> of) => of[random.Next(of.Count)];

    private static Outcome AnyOutcome(Random random) => Any(random, Enum.GetValues<Outcome>());

    private void BeginRun(Random random)
    {
        string device = $"W1200-{random.Next(4):d4}";
        string? lot = random.Next(4) is > 0 and var number ? $"L-{number % 2}" : null;
        Sequence sequence = Any(random, Sequences);
        bool again = random.Next(3) > 0 && (lot is not null || random.Next(10) == 0);
        RunHeader header = Samples.Header(device, lot, again ? "doubt" : null, sequence: sequence);
        Assert.Equal(_model.Refusal(device, lot, again, sequence.Attempts), _store.Refuses(header)?.Kind);
        if (_store.Refuses(header) is not null)
        {
            Assert.Throws<RunRefusedException>(() => _store.BeginRun(header));
            return;
        }

        LotRun run = _model.Begin(device, lot, sequence.Name);
        RunWriter writer = _store.BeginRun(header);
        run.Uid = writer.Run;
        Assert.Equal(run.Attempt, writer.Attempt);
        _going.Add(run, writer);
        if (random.Next(4) > 0)
        {
            End(run, AnyOutcome(random));
        }
    }

    private void EndOne(Random random)
    {
        if (_going.Count > 0)
        {
            End(Any(random, [.. _going.Keys]), AnyOutcome(random));
        }
    }

    private void End(LotRun run, Outcome outcome)
    {
        _going.Remove(run, out RunWriter? writer);
        writer!.Finish(Samples.Decision(outcome));
        run.Outcomes.Add(outcome);
    }

    private void Rescore(Random random)
    {
        if (_model.Runs.FindAll(run => run.IsEnded) is not { Count: > 0 } ended)
        {
            return;
        }

        LotRun run = Any(random, ended);
        Outcome outcome = AnyOutcome(random);
        run.Outcomes.Add(outcome);
        string word = outcome == Outcome.NotMeasured ? "not-measured" : outcome.ToString().ToLowerInvariant();
        _folder.Write(
            $"""
            insert into decision (run, scoring, outcome, captures_taken, captures_valid, sequence, sequence_revision,
              sequence_content, algorithm, platform, scored_at)
            select d.run, {run.Outcomes.Count - 1}, '{word}', 0, 0, d.sequence, d.sequence_revision,
              d.sequence_content, d.algorithm, d.platform, d.scored_at
            from decision d join run r on r.id = d.run where r.uid = '{run.Uid}' and d.scoring = 0
            """);
    }

    private void Note(Random random)
    {
        if (_model.Runs.FindAll(run => run.Lot is not null) is { Count: > 0 } inLots)
        {
            LotRun run = Any(random, inLots);
            _store.AddNote(new Note(run.Device, run.Lot!, Any(random, Enum.GetValues<NoteKind>()), "K. Weber", "so"));
        }
    }

    /// <summary>The program dies and starts again: what went on is stopped.</summary>
    private void Reopen()
    {
        _store.Dispose();
        _store = EvidenceStore.Open(_folder.File, _clock);
        Assert.Equal(_going.Keys.Select(run => run.Uid).Order(), _store.Closed.Select(run => run.Run).Order());
        foreach (LotRun run in _going.Keys)
        {
            run.Outcomes.Add(Outcome.Stopped);
        }

        _going.Clear();
    }

    private void Compare()
    {
        string mixture = string.Join("\n", _model.Runs.Select(
            run => $"{run.Device} {run.Lot} {run.Sequence} {string.Join(' ', run.Outcomes)}"));
        Assert.True(Same(_model.Outcomes(), _folder.Rows(
            "select run, attempt, scoring, current, outcome from device_outcomes order by run, scoring")),
            $"outcomes differ:\n{mixture}");
        Assert.True(Same(_model.Yield(), _folder.Rows(
            """
            select lot, sequence, devices, accepted, rejected, undecided, not_measured, stopped, first_pass_yield
            from lot_yield order by lot, sequence
            """)),
            $"yields differ:\n{mixture}");
        Assert.All(
            EvidenceAudit.Verify(_folder.File, cancel: TestContext.Current.CancellationToken).Problems,
            problem => Assert.True(problem.What is "unfinished" or "unsealed", problem.Message));
    }

    private static bool Same(List<object?[]> wanted, List<object?[]> found) =>
        wanted.Count == found.Count && wanted.Zip(found).All(pair => pair.First.SequenceEqual(pair.Second));
}
