namespace BenchRunner.Acceptance.Validity;

/// <summary>The pulse train as it was set for one capture. All values SI.</summary>
/// <param name="First">Width of the first pulse, s.</param>
/// <param name="Gap">Time between the pulses, s.</param>
/// <param name="Second">Width of the second pulse, s.</param>
/// <param name="GateOn">On level of the gate, V.</param>
/// <param name="GateOff">Off level of the gate, V.</param>
public sealed record TrainSet(double First, double Gap, double Second, double GateOn, double GateOff);
