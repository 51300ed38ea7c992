using BenchRunner.Instruments.Roles;

namespace BenchRunner.Safety;

/// <summary>All that the safe state needs of a bench, and all that the guardian is handed: what can be brought to its safe
/// side, and what can be read.</summary>
/// <param name="Pulser">Inhibited.</param>
/// <param name="Supply">Switched off.</param>
/// <param name="Bleeder">Put across the bank; the interlock controller's.</param>
/// <param name="Voltmeter">The only proof that the bus is down.</param>
/// <param name="Hotplate">Switched off; null: none.</param>
public sealed record SafeableRoles(
    ISafeable Pulser, ISafeable Supply, ISafeable Bleeder, IVoltmeter Voltmeter, ISafeable? Hotplate = null);
