using System.Globalization;

namespace BenchRunner.Benchmarks;

/// <summary>How long a bench at 600 V takes from a failure to all outputs off, and to its bus below 60 V: the real program and a
/// fake bench as processes of their own, which says by itself how it stands.</summary>
/// <remarks>The bench is as slow as a lab's (pace 1). Wall clock: here it is what counts.</remarks>
internal sealed class SafetyGroup : IGroup
{
    private const int Rounds = 2;
    private readonly Lazy<IReadOnlyList<TrialResult>> _results;

    /// <summary>Sets the group up.</summary>
    /// <param name="seed">Seed of the fake bench.</param>
    public SafetyGroup(int seed)
    {
        _results = new(() => Take(seed));
        Benchmarks =
        [
            new Benchmark("safety/outputs-off", () => Worst(result => result.OutputsOff)),
            new Benchmark("safety/bus-below-60", BusBelow60),
        ];
    }

    /// <inheritdoc/>
    public IReadOnlyList<Benchmark> Benchmarks { get; }

    /// <inheritdoc/>
    public void Dispose()
    {
    }

    private static List<TrialResult> Take(int seed) =>
        [.. Enumerable.Range(0, Rounds).SelectMany(_ => Failure.All).Select(failure => Trial.Take(failure, seed))];

    private Outcome Worst(Func<TrialResult, double?> of)
    {
        string? missing = Missing(of);
        double worst = _results.Value.Max(of) ?? double.NaN;
        return new Outcome("s", new Figure(worst, 0), Missing: missing, Note: Note(of));
    }

    private Outcome BusBelow60()
    {
        Outcome worst = Worst(result => result.BusDown);
        return worst with { Floor = new Figure(_results.Value[0].Discharge, 0) };
    }

    private string? Missing(Func<TrialResult, double?> of)
    {
        string[] without = [.. _results.Value.Where(result => of(result) is null).Select(result => result.Failure)];
        return without.Length > 0 ? $"not reached: {string.Join(", ", without)}" : null;
    }

    private string Note(Func<TrialResult, double?> of) => string.Join(", ", _results.Value
        .GroupBy(result => result.Failure)
        .Select(failure => string.Create(CultureInfo.InvariantCulture, $"{failure.Key} {failure.Max(of):0.000}")));
}
