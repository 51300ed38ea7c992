using BenchRunner.Acceptance.Decisions;
using BenchRunner.Evidence.Stores;

namespace BenchRunner.Evidence.Tests.Schemas;

/// <summary>The rules of lots as plainly as they can be said: a list of runs in memory, gone through from its
/// begin.</summary>
internal sealed class LotModel
{
    public List<LotRun> Runs { get; } = [];

    public RunRefusalKind? Refusal(string device, string? lot, bool again, int mostAttempts)
    {
        if (lot is null)
        {
            return again ? RunRefusalKind.AgainWithoutLot : null;
        }

        List<LotRun> before = Attempts(device, lot);
        if (before.Any(run => !run.IsEnded))
        {
            return RunRefusalKind.InFlight;
        }

        int decided = before.Count(run => !run.IsStopped);
        return decided >= mostAttempts ? RunRefusalKind.TooManyAttempts
            : decided > 0 && !again ? RunRefusalKind.AlreadyDecided
            : null;
    }

    public LotRun Begin(string device, string? lot, string sequence)
    {
        var run = new LotRun(device, lot, sequence, lot is null ? 1 : Attempts(device, lot).Count + 1);
        Runs.Add(run);
        return run;
    }

    /// <summary>run, attempt, scoring, current, outcome of each decision.</summary>
    public List<object?[]> Outcomes() =>
    [
        .. Runs.SelectMany(run => run.Outcomes.Select((outcome, scoring) => new object?[]
            {
                run.Uid, (long)run.Attempt, (long)scoring, IsCurrent(run, scoring) ? 1L : 0L, Word(outcome),
            }))
            .OrderBy(row => (string)row[0]!, StringComparer.Ordinal).ThenBy(row => (long)row[2]!),
    ];

    /// <summary>lot, sequence, devices, accepted, rejected, undecided, not_measured, stopped,
    /// first_pass_yield.</summary>
    public List<object?[]> Yield()
    {
        var rows = new SortedDictionary<string, List<(Outcome Now, Outcome? First)>>(StringComparer.Ordinal);
        foreach (var (lot, device) in Runs.Where(run => run.Lot is not null && run.IsEnded)
            .Select(run => (run.Lot!, run.Device)).Distinct())
        {
            LotRun counting = Counting(device, lot);
            LotRun? first = Attempts(device, lot).Find(run => run.IsEnded && !run.IsStopped);
            string row = $"{lot} {counting.Sequence}";
            rows.TryAdd(row, []);
            rows[row].Add((counting.Outcomes[^1], first?.Outcomes[^1]));
        }

        return [.. rows.Select(pair => Row(pair.Key.Split(' '), pair.Value))];
    }

    private static object?[] Row(string[] name, List<(Outcome Now, Outcome? First)> devices)
    {
        object Count(Outcome outcome) => (long)devices.Count(device => device.Now == outcome);
        List<Outcome> first = [.. devices.Select(device => device.First).OfType<Outcome>()];
        return
        [
            name[0], name[1], (long)devices.Count, Count(Outcome.Accepted), Count(Outcome.Rejected),
            Count(Outcome.Undecided), Count(Outcome.NotMeasured), Count(Outcome.Stopped),
            first.Count == 0 ? null : first.Count(outcome => outcome == Outcome.Accepted) / (double)first.Count,
        ];
    }

    private bool IsCurrent(LotRun run, int scoring) => scoring == run.Outcomes.Count - 1
        && (run.Lot is null || Counting(run.Device, run.Lot) == run);

    /// <summary>The newest attempt that was not stopped; where all were, the newest.</summary>
    private LotRun Counting(string device, string lot)
    {
        List<LotRun> ended = Attempts(device, lot).FindAll(run => run.IsEnded);
        return ended.FindLast(run => !run.IsStopped) ?? ended[^1];
    }

    private List<LotRun> Attempts(string device, string lot) =>
        Runs.FindAll(run => run.Lot == lot && run.Device == device);

    private static string Word(Outcome outcome) =>
        outcome == Outcome.NotMeasured ? "not-measured" : outcome.ToString().ToLowerInvariant();
}
