using BenchRunner.Acceptance.Benches;
using BenchRunner.Acceptance.Dialects;
using BenchRunner.Acceptance.Files;
using BenchRunner.Acceptance.Plans;
using BenchRunner.Acceptance.Sequences;

namespace BenchRunner.Files;

/// <summary>Everything that a plan or a run is made from, read and checked.</summary>
/// <param name="Sequence">The sequence.</param>
/// <param name="Bench">The bench.</param>
/// <param name="Dialects">Name to dialect.</param>
/// <param name="Planned">The plan with its refusals.</param>
internal sealed record Job(
    Sequence Sequence, Bench Bench, IReadOnlyDictionary<string, DialectFile> Dialects, Planned Planned)
{
    /// <summary>Reads sequence, bench and dialects, and plans.</summary>
    /// <exception cref="InputException">A file is wrong: every problem of every file, a line each.</exception>
    public static Job Read(string sequencePath, string? benchPath)
    {
        string benchFile = ExampleFiles.Find(benchPath ?? ExampleFiles.FakeBench);
        var problems = new List<Problem>();
        Sequence? sequence = Take(SequenceFile.Read(ExampleFiles.Find(sequencePath)), problems);
        BenchFiles files = BenchFiles.Read(benchFile, problems);
        return problems.Count == 0
            ? new Job(sequence!, files.Bench!, files.Dialects, Planner.Plan(sequence!, files.Bench!))
            : throw new InputException(string.Join(Environment.NewLine, problems));
    }

    /// <summary>The plan, where nothing refuses it.</summary>
    /// <exception cref="InputException">The plan refuses: every reason, a line each.</exception>
    public Plan Allowed() => Planned is { Plan: { } plan, Refusals.Count: 0 }
        ? plan
        : throw new InputException(string.Join(Environment.NewLine, Planned.Refusals));

    private static T? Take<T>(Read<T> read, List<Problem> problems)
        where T : class
    {
        problems.AddRange(read.Problems);
        return read.Value;
    }
}
