using BenchRunner.Signals.Units;

namespace BenchRunner.Instruments.Roles;

/// <summary>The pulse train and gate levels that a pulser is given.</summary>
/// <param name="First">Width of the first pulse.</param>
/// <param name="Gap">Time between the pulses.</param>
/// <param name="Second">Width of the second pulse.</param>
/// <param name="GateOn">On level of the gate.</param>
/// <param name="GateOff">Off level of the gate.</param>
public sealed record TrainSettings(Seconds First, Seconds Gap, Seconds Second, Volts GateOn, Volts GateOff);
