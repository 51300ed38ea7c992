using BenchRunner.Runner.Devices;

namespace BenchRunner.Runner.Sessions;

/// <summary>How a session ended.</summary>
/// <param name="Devices">A report a device that was run, in order.</param>
/// <param name="NotRun">Serials that got no run after a trip or failure.</param>
/// <param name="Simulated">Whether the bench was simulated.</param>
public sealed record RunSummary(IReadOnlyList<DeviceReport> Devices, IReadOnlyList<string> NotRun, bool Simulated);
