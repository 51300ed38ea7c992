using FakeBench.Physics;

namespace FakeBench.Population;

/// <summary>One device of the population, as it would lie in the socket.</summary>
/// <param name="Serial">Its serial.</param>
/// <param name="Part">Its part number.</param>
/// <param name="Defect">What is wrong with it, or with the bench that comes with it; null: sound.</param>
/// <param name="ExpectedOutcome">What the shipped incoming sequence ought to say: accepted, rejected, undecided,
/// not-measured or stopped.</param>
/// <param name="Low">What it puts into the low place.</param>
/// <param name="High">What it puts into the high place.</param>
public sealed record Device(
    string Serial,
    string Part,
    string? Defect,
    string ExpectedOutcome,
    PlaceParts Low,
    PlaceParts High)
{
    /// <summary>The same serial as a single part, in either place: a defect of whichever place is its own.</summary>
    public required (PlaceParts Low, PlaceParts High) Alone { get; init; }

    /// <summary>The changes that its defect is made of.</summary>
    public IReadOnlyList<Change> Changes { get; init; } = [];

    /// <summary>When it dies; null: it does not.</summary>
    public Death? Dies { get; init; }

    /// <summary>The changes in words; empty: none.</summary>
    public string Change =>
        string.Join(' ', Changes) + (Dies is { } death ? $"low.leakage x10000000000 {death}" : "");

    /// <summary>The same serial with a defect.</summary>
    public Device With(string defect, string outcome, params IReadOnlyList<Change> changes) => this with
    {
        Defect = defect,
        ExpectedOutcome = outcome,
        Changes = changes,
        Low = Population.Changes.On(Low, "low", changes),
        High = Population.Changes.On(High, "high", changes),
        Alone = (Population.Changes.On(Alone.Low, null, changes), Population.Changes.On(Alone.High, null, changes)),
    };

    /// <summary>The same serial, dying.</summary>
    public Device Dying(string defect, string outcome, Death death) => this with
    {
        Defect = defect,
        ExpectedOutcome = outcome,
        Dies = death,
        Low = Low with { DiesAfterOff2 = Death.Delay },
    };

    /// <summary>The circuit with this device in both places of a bench.</summary>
    public CircuitParameters On(BenchParts bench) => new(Population.Changes.On(bench, Changes), Low, High);
}
