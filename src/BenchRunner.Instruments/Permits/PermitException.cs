namespace BenchRunner.Instruments.Permits;

/// <summary>An operation that energises or fires was refused because its permit is not live or does not go that
/// far.</summary>
public sealed class PermitException(string message) : Exception(message);
