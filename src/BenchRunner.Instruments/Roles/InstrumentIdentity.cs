namespace BenchRunner.Instruments.Roles;

/// <summary>What an instrument answered to <c>*IDN?</c> (IEEE 488.2, 10.14).</summary>
/// <param name="Text">The whole answer, control characters escaped.</param>
/// <param name="Maker">First field.</param>
/// <param name="Model">Second field.</param>
/// <param name="Serial">Third field; empty where the instrument says 0 (unknown).</param>
/// <param name="Firmware">Fourth field; empty where the instrument says 0.</param>
public sealed record InstrumentIdentity(string Text, string Maker, string Model, string Serial, string Firmware)
{
    /// <summary>Whether the instrument says of itself that it is simulated.</summary>
    public bool IsSimulated => Text.Contains("FAKEBENCH", StringComparison.OrdinalIgnoreCase);
}
