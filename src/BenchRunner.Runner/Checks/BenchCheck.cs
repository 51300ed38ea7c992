using BenchRunner.Acceptance.Benches;
using BenchRunner.Acceptance.Dialects;
using BenchRunner.Instruments.Links;
using BenchRunner.Instruments.Replies;
using BenchRunner.Instruments.Roles;
using BenchRunner.Runner.Benches;
using BenchRunner.Runner.Sessions;
using BenchRunner.Safety.Latches;
using BenchRunner.Safety.Locks;

namespace BenchRunner.Runner.Checks;

/// <summary>Looks at every instrument of a bench before a run: link, identity, error queue, self-test, settings that
/// would endanger a run, time of a question. Sets nothing, and holds the bench's lock, so that it disturbs no run.</summary>
public static class BenchCheck
{
    /// <summary>Any serial: the simulated bench wants a device in its fixture.</summary>
    private const string FakeDevice = "W1200-0001";

    /// <summary>The bank's voltmeter first: no self-test is asked for while the bank is up.</summary>
    private static readonly string[] _order = ["voltmeter", "interlock", "supply", "pulser", "scope", "hotplate"];

    /// <summary>Checks a bench.</summary>
    /// <param name="bench">The bench.</param>
    /// <param name="dialects">Name to dialect.</param>
    /// <param name="time">The clock.</param>
    /// <param name="cancel">Ends the check.</param>
    /// <exception cref="RefusedException">A run, or another check, holds the bench.</exception>
    /// <exception cref="BenchException">The fake bench did not start.</exception>
    public static async Task<BenchCheckReport> Run(
        Bench bench, IReadOnlyDictionary<string, DialectFile> dialects, TimeProvider time, CancellationToken cancel)
    {
        ArgumentNullException.ThrowIfNull(bench);
        ArgumentNullException.ThrowIfNull(dialects);
        ArgumentNullException.ThrowIfNull(time);
        using BenchLock? held = bench.Fake is null ? Take(bench, time) : null;
        await using FakeBenchProcess? fake = bench.Fake is null
            ? null : await FakeBenchProcess.Start(bench, FakeDevice, null, time, cancel);
        var instruments = _order.Where(bench.Roles.ContainsKey).Select(role => new CheckedInstrument(
            role,
            bench.Roles[role],
            LinkAddress.Parse(fake?.Links[role] ?? bench.Roles[role].Link),
            dialects[bench.Roles[role].Dialect].ToDialect(),
            LinkLock.Of(bench, role),
            time)).ToArray();
        bool bankIsDown = true;
        foreach (CheckedInstrument at in instruments)
        {
            await Look(at, bench, bankIsDown, cancel);
            bankIsDown &= at.Role != "voltmeter" || !at.Check.Findings.Any(finding => finding.MakesUnfit);
        }

        await LookAgain(instruments, bench, cancel);
        foreach (CheckedInstrument at in instruments)
        {
            at.Session?.Dispose();
        }

        return new BenchCheckReport(
            bench.Name,
            [.. instruments.Select(at => at.Check)],
            bench.Fake is null ? new LatchFile(bench.Source.Path).Read() : null);
    }

    private static BenchLock Take(Bench bench, TimeProvider time) =>
        BenchLock.TryTake(bench.Source.Path, time.GetUtcNow(), out string? holder) ?? throw new RefusedException(
            RefusalKind.Taken,
            $"bench {bench.Name} is in use by {holder}; nothing was asked, so that its run is not disturbed");

    private static async Task Look(CheckedInstrument at, Bench bench, bool bankIsDown, CancellationToken cancel)
    {
        await at.Open(cancel);
        if (at.Session is null)
        {
            return;
        }

        await Guarded(at, async () =>
        {
            await RoleChecks.Of(at, bench, cancel);
            await at.Panel(cancel);
            if (bankIsDown)
            {
                await at.SelfTest(cancel);
            }

            await at.Latency(cancel);
        });
    }

    /// <summary>What changed while the others were looked at was changed by somebody else: this check sets
    /// nothing.</summary>
    private static async Task LookAgain(IEnumerable<CheckedInstrument> instruments, Bench bench, CancellationToken cancel)
    {
        foreach (CheckedInstrument at in instruments.Where(i => i.Session is not null
            && i.Role is "supply" or "pulser" or "scope"))
        {
            InstrumentCheck before = at.Check;
            if (before.Findings.Any(finding => finding.MakesUnfit))
            {
                continue;
            }

            var was = new Dictionary<string, string>(before.Settings);
            var again = at.Reading();
            await Guarded(again, () => RoleChecks.Of(again, bench, cancel));
            foreach ((string name, string value) in again.Check.Settings)
            {
                if (was.TryGetValue(name, out string? old) && old != value)
                {
                    at.Unfit($"its {name} went from {old} to {value} during this check, which sets nothing: somebody else "
                        + "controls it; find out who");
                }
            }
        }
    }

    private static async Task Guarded(CheckedInstrument at, Func<Task> work)
    {
        try
        {
            await work();
        }
        catch (Exception e) when (e is LinkException or InstrumentException or ReplyException)
        {
            at.Unfit(e.Message);
        }
    }
}
