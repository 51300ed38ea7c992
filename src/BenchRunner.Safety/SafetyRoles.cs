using BenchRunner.Instruments.Roles;

namespace BenchRunner.Safety;

/// <summary>The instruments on connections of safety's own, so that a runner that waits on its link never holds them
/// up.</summary>
/// <param name="Pulser">Inhibited on the way to the safe state; its off bias stays until the bus is proved
/// down.</param>
/// <param name="Supply">Switched off on the way to the safe state.</param>
/// <param name="Interlock">Polled; its bleeder discharges the bank.</param>
/// <param name="Voltmeter">Polled; the only proof that the bus is down.</param>
/// <param name="Hotplate">Switched off on the way to the safe state; null: none.</param>
/// <param name="SupplyOutput">Asked for a sign of life; null where the run's own questions would hold it up.</param>
/// <param name="PulserOutput">Asked for a sign of life and whether the gates are still held; null likewise.</param>
/// <remarks>Where an instrument admits one client, its one connection serves both.</remarks>
public sealed record SafetyRoles(
    IGates Pulser, ISafeable Supply, IInterlock Interlock, IVoltmeter Voltmeter, ISafeable? Hotplate = null,
    IOutput? SupplyOutput = null, IOutput? PulserOutput = null)
{
    /// <summary>The same, as far as the safe state needs them: nothing here can energise or fire.</summary>
    public SafeableRoles Safeable => new(Pulser, Supply, Interlock, Voltmeter, Hotplate);
}
