using BenchRunner.Acceptance.Plans;
using BenchRunner.Acceptance.Sequences;
using BenchRunner.Console;
using BenchRunner.Files;
using BenchRunner.Runner.Sessions;

namespace BenchRunner.Commands;

/// <summary>What the command line of <c>run</c> says.</summary>
internal sealed record RunArguments(
    string Sequence,
    IReadOnlyList<string> Devices,
    string? Lot,
    string? Bench,
    string? Evidence,
    string? Operator,
    string? ArmedBy,
    string? Companion,
    string? Again,
    bool Json)
{
    /// <summary>What a bench and a sequence ask for beyond what every run needs.</summary>
    /// <exception cref="InputException">It is missing or wrong; nothing was touched.</exception>
    public void Check(Job job)
    {
        if (CompanionProblem(job.Sequence) is { } problem)
        {
            throw new InputException(problem);
        }

        if (job.Bench.Fake is not null)
        {
            return;
        }

        if (string.IsNullOrWhiteSpace(Operator))
        {
            throw new InputException(
                "this bench is not started by the program: say who operates it with --operator NAME");
        }

        if (ArmedBy is null && !OperatorTerminal.Exists)
        {
            throw new InputException(
                "there is no terminal to confirm at, and no --armed-by NAME says who confirmed at the bench; nothing "
                    + "was energised");
        }
    }

    /// <summary>What is asked of the runner.</summary>
    /// <exception cref="InputException">The plan refuses.</exception>
    public RunRequest Request(Job job) => new()
    {
        Plan = job.Allowed(),
        Dialects = job.Dialects,
        EvidencePath = EvidenceFiles.ToWrite(Evidence, job.Bench.Fake is not null),
        Lot = Lot,
        Operator = Operator,
        Companion = Companion,
        Again = Again,
    };

    private string? CompanionProblem(Sequence sequence)
    {
        bool isNeeded = HalfBridge.NeedsCompanion(sequence);
        if (Companion is null)
        {
            return isNeeded
                ? "--companion is missing: a device of position low or high has a companion in the other place; give its "
                    + "serial with --companion SERIAL"
                : null;
        }

        if (!isNeeded)
        {
            return $"--companion {Screen.Printable(Companion)}: a device of position both fills both places itself; "
                + "leave it out";
        }

        // A companion of another part has serials of a form that this sequence does not know.
        bool isSamePart = sequence.CompanionPart is null || sequence.CompanionPart == sequence.Part;
        Sequence form = isSamePart ? sequence : sequence with { SerialForm = null };
        return SerialForm.Check(Companion, form, "--companion") is { } problem ? problem.ToString()
            : Devices.Contains(Companion)
                ? $"--companion {Companion} is also a --device; a part cannot be in both places" : null;
    }
}
