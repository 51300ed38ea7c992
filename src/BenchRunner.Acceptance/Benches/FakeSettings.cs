namespace BenchRunner.Acceptance.Benches;

/// <summary>How <c>run</c> starts its fake bench.</summary>
/// <param name="Seed">Seed of spread, noise and jitter.</param>
/// <param name="Pace">How much faster charging and bleeding components are than the lab's, 1 to 5.</param>
/// <param name="Faults">Faults as <c>name</c> or <c>name@when</c>.</param>
public sealed record FakeSettings(int Seed, double Pace, IReadOnlyList<string> Faults);
