using BenchRunner.Acceptance.Decisions;
using BenchRunner.Acceptance.Events;
using BenchRunner.Evidence.Audits;
using BenchRunner.Runner.Devices;

namespace BenchRunner.Soak.Mixes;

/// <summary>What must be so after any mix, whatever went wrong in it.</summary>
internal static class Judgement
{
    private const double BusDown = 60;
    private static readonly int[] _documented = [0, 1, 2, 3, 4, 5, 6, 130];
    /// <summary>A train with one of these has no record, and that was said.</summary>
    private static readonly string[] _unrecorded = ["trigger-missed", "acquisition-unfinished", "record-lost"];
    private static readonly string[] _files =
        ["bench.latch", "bench.lock", "bench.lock-holder", "bench.yaml", "evidence.db", "evidence.db-writer", "sequence.yaml"];

    /// <summary>Everything that is wrong, a line each.</summary>
    /// <remarks>What was left comes first: reading the evidence makes files of its own.</remarks>
    public static IEnumerable<string> Of(Facts facts) =>
        [.. Left(facts), .. Guarded(facts), .. Ending(facts), .. Bus(facts), .. Accepted(facts), .. Evidence(facts)];

    /// <summary>Nothing in a mix stops the run's process: a guardian that ends it took a run for dead that was not. Only
    /// one that could not prove its bus down and still tries is ended in the end.</summary>
    private static IEnumerable<string> Guarded(Facts facts)
    {
        int Of(string source, string kind) => facts.Recorder.Events.FindIndex(
            happened => happened.Source == source && happened.Kind == kind);
        int given = Of("safe-state", "bus-not-proved-down");
        if (facts.RunWasEnded && !(given >= 0 && given < Of("guardian", "guardian-acts")))
        {
            yield return "the guardian ended a run that was alive";
        }
    }

    private static IEnumerable<string> Ending(Facts facts)
    {
        if (!_documented.Contains(facts.ExitCode))
        {
            yield return $"exit code {facts.ExitCode}: {facts.Thrown?.ToString() ?? facts.Report?.Decision.Reason}";
        }

        bool accepted = facts.Report?.Decision.Outcome == Outcome.Accepted;
        if (accepted != (facts.ExitCode == 0))
        {
            yield return $"exit code {facts.ExitCode} beside {facts.Report?.Decision.Outcome}";
        }

        bool tripped = facts.Recorder.Events.Exists(happened => happened.Kind == "trip");
        if (tripped && facts.ExitCode != 4)
        {
            yield return $"exit code {facts.ExitCode} though it tripped";
        }

        string? why = facts.Report?.Decision.Reason ?? facts.Thrown?.Message ?? facts.Summary?.BrokenOff?.Message;
        if (facts.ExitCode is not (0 or 1 or 3) && string.IsNullOrWhiteSpace(why))
        {
            yield return $"exit code {facts.ExitCode} without a word why";
        }
    }

    private static IEnumerable<string> Bus(Facts facts)
    {
        double volts = facts.BankVoltage;
        bool isLoud = facts.Recorder.Events.Exists(
            happened => happened is { Kind: "bus-not-proved-down", Severity: Severity.Alarm });
        if (volts >= BusDown && !(isLoud && facts.ExitCode == 4))
        {
            yield return FormattableString.Invariant(
                $"the bus is at {volts:0.0} V, exit code {facts.ExitCode}, {(isLoud ? "said" : "nothing said of it")}");
        }

        bool wasCharged = facts.Recorder.Events.Exists(happened => happened.Kind is "proving-started");
        BenchEvent? last = facts.Recorder.Events.FindLast(
            happened => happened.Kind is "bus-not-proved-down" or "bus-down");
        if (wasCharged && last is null)
        {
            yield return "nothing says what became of the bus";
        }

        if (volts >= BusDown && last is { Kind: "bus-down" })
        {
            yield return FormattableString.Invariant($"the bus was called down and is at {volts:0.0} V");
        }
    }

    private static IEnumerable<string> Accepted(Facts facts)
    {
        if (facts.Report is not { Decision.Outcome: Outcome.Accepted } report)
        {
            yield break;
        }

        if (report.Ending != BenchEnding.Proved)
        {
            yield return $"accepted and {report.Ending}";
        }

        bool hasTrace = facts.Recorder.Events.Exists(happened => happened.Severity >= Severity.Warning);
        foreach (string fault in facts.Mix.Faults.Select(fault => fault.Name).Distinct())
        {
            if (facts.Bench.Bench.Faults.Has(fault) && FaultEffects.Forbids(fault, facts.Mix, hasTrace, facts.Bench))
            {
                yield return $"accepted in spite of {fault}";
            }
        }
    }

    private static IEnumerable<string> Evidence(Facts facts)
    {
        if (!File.Exists(facts.EvidenceFile))
        {
            yield return "there is no evidence file";
            yield break;
        }

        foreach (AuditProblem problem in EvidenceAudit.Verify(facts.EvidenceFile).Problems)
        {
            yield return $"audit: {problem.What}: {problem.Message}";
        }

        if (facts.Ask<long>("select count(*) from device_outcomes where finished_at is not null") is var ended
            && ended != facts.Recorder.Reports.Count)
        {
            yield return $"{ended} runs with an end in the evidence, {facts.Recorder.Reports.Count} were reported";
        }

        if (facts.Ask<long>("select count(*) from captures where valid is null and operating_point <> 'zero'") is
            > 0 and var bare)
        {
            yield return $"{bare} captures were never judged";
        }

        int Said(string[] kinds) => facts.Recorder.Events.Count(happened => kinds.Contains(happened.Kind));
        long stored = facts.Ask<long>("select count(*) from captures where operating_point <> 'zero'");
        if (Said(["capture-valid"]) is var valid
            && facts.Ask<long>("select count(*) from captures where valid") is var kept && valid != kept)
        {
            yield return $"{valid} captures were called valid, {kept} stand so in the evidence";
        }

        // A run that was broken off may have lost the train that was under way.
        if (facts.Report is { Ending: BenchEnding.Proved, Decision.Outcome: Outcome.Accepted }
            && stored + Said(_unrecorded) != facts.Fires)
        {
            yield return $"{facts.Fires} trains were fired, {stored} captures are stored and {Said(_unrecorded)} were "
                + "said to be lost";
        }

        if (facts.Ask<long>("select count(*) from seal") < facts.Recorder.Reports.Count)
        {
            yield return "a run has no seal";
        }
    }

    private static IEnumerable<string> Left(Facts facts)
    {
        foreach (string role in facts.OpenLinks)
        {
            yield return $"a link to {role} was left open";
        }

        foreach (string file in Directory.GetFileSystemEntries(facts.Folder).Select(file => Path.GetFileName(file)))
        {
            if (!_files.Contains(file))
            {
                yield return $"{file} was left behind";
            }
        }
    }
}
