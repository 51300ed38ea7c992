using FakeBench.Physics;

namespace FakeBench.Population;

/// <summary>One device of the population, as it would lie in the socket.</summary>
/// <param name="Serial">Its serial.</param>
/// <param name="Part">Its part number.</param>
/// <param name="Defect">What is wrong with it; null: sound.</param>
/// <param name="ExpectedOutcome">What the shipped incoming sequence ought to say: accepted, rejected or
/// undecided.</param>
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
    /// <summary>The device after its low place has died in a train: a short from now on.</summary>
    public Device AfterDeath() => this with { Low = Low.Shorted() };

    /// <summary>The device at a temperature, degC.</summary>
    public Device At(double celsius) => celsius <= ThermalDrift.Nominal
        ? this
        : this with { Low = ThermalDrift.At(Low, celsius), High = ThermalDrift.At(High, celsius) };

    /// <summary>The circuit with this device in both places of a bench.</summary>
    public CircuitParameters On(BenchParts bench) => new(bench, Low, High);
}
