namespace BenchRunner.Evidence.Captures;

/// <summary>The pulse train that a pulser was set to when a capture was taken. All values SI.</summary>
/// <param name="FirstPulse">Width of the first pulse, s.</param>
/// <param name="Gap">Time between the pulses, s.</param>
/// <param name="SecondPulse">Width of the second pulse, s.</param>
/// <param name="GateOn">On level of the gate, V.</param>
/// <param name="GateOff">Off level of the gate, V.</param>
public sealed record PulseTrain(double FirstPulse, double Gap, double SecondPulse, double GateOn, double GateOff);
