using BenchRunner.Acceptance.Benches;
using BenchRunner.Acceptance.Plans;
using BenchRunner.Acceptance.Sequences;
using BenchRunner.Acceptance.Tests.Files;

namespace BenchRunner.Acceptance.Tests;

/// <summary>The shipped files as models, to be changed by tests.</summary>
internal static class Shipped
{
    public static Sequence Sequence { get; } = SequenceFile.Read(Repository.SequencePath).Value!;

    public static Bench Bench { get; } = BenchFile.Read(Repository.BenchPath).Value!;

    public static Bench FourChannels { get; } =
        BenchFile.Read(Repository.PathOf("sequences", "benches", "four-channel.yaml")).Value!;

    /// <summary>The shipped sequence with its point <c>rated</c> alone (600 V, 40 A) and that point's limits.</summary>
    public static Sequence Rated { get; } = Sequence with
    {
        OperatingPoints = [Sequence.OperatingPoints.Single(point => point.Name == "rated")],
        Limits = [.. Sequence.Limits.Where(limit => limit.At == "rated")],
    };

    /// <summary>The shipped sequence with one point, changed.</summary>
    public static Sequence With(Func<OperatingPoint, OperatingPoint> change) =>
        Rated with { OperatingPoints = [change(Rated.OperatingPoints[0])] };

    /// <summary>The only point of a plan.</summary>
    public static PlannedPoint Point(Sequence sequence, Bench bench) =>
        Planner.Plan(sequence, bench).Plan!.Points.Single();
}
