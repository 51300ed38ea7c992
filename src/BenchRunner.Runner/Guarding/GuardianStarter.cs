using BenchRunner.Acceptance.Benches;

namespace BenchRunner.Runner.Guarding;

/// <summary>Starts the guardian of a run; it is not ready before <see cref="IRunGuardian.Begin"/>.</summary>
/// <param name="bench">The bench.</param>
/// <param name="log">Where it writes down what it does.</param>
/// <param name="time">The clock.</param>
/// <exception cref="Benches.BenchException">It cannot be started.</exception>
public delegate IRunGuardian GuardianStarter(Bench bench, string log, TimeProvider time);
