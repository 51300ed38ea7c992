using FakeBench.Faults;
using FakeBench.Physics;

namespace FakeBench.Fixtures;

/// <summary>What the faults that have begun do to circuit and train.</summary>
public static class Flaws
{
    // How long a gate that is stuck on stays on, s: beyond every record. The device does not outlive it.
    private const double StuckFor = 20e-6;

    /// <summary>The bench's parts with the faults that last.</summary>
    public static BenchParts On(BenchParts parts, FaultPlan faults)
    {
        ArgumentNullException.ThrowIfNull(parts);
        ArgumentNullException.ThrowIfNull(faults);
        double load = faults.Has(FaultCatalogue.InductorFarOff) ? FaultCatalogue.FarOffInductor
            : faults.Has(FaultCatalogue.InductorOff) ? FaultCatalogue.OffInductor
            : 1;
        double flux = faults.Has(FaultCatalogue.SaturatingInductor) ? FaultCatalogue.SaturatingFlux : 1;
        return parts with
        {
            LoadInductance = parts.LoadInductance * load,
            SaturationFlux = parts.SaturationFlux * flux,
        };
    }

    /// <summary>The driver's levels with the faults that last.</summary>
    public static PulseTrain On(PulseTrain train, FaultPlan faults)
    {
        ArgumentNullException.ThrowIfNull(train);
        ArgumentNullException.ThrowIfNull(faults);
        double lower = faults.Has(FaultCatalogue.WeakGateDriver) ? FaultCatalogue.LevelError : 0;
        double higher = faults.Has(FaultCatalogue.HighOffLevel) ? FaultCatalogue.LevelError : 0;
        bool isDead = faults.Has(FaultCatalogue.DriverLost);
        double off = isDead ? 0 : train.GateOff + higher;
        return train with
        {
            GateOn = isDead ? 0 : train.GateOn - lower,
            GateOff = off,
            HeldOff = faults.Has(FaultCatalogue.GateLifts) ? Math.Max(off, 0) : off,
        };
    }

    /// <summary>Takes the faults of one train's pulses.</summary>
    public static PulseTrain Once(PulseTrain train, FaultPlan faults)
    {
        ArgumentNullException.ThrowIfNull(train);
        ArgumentNullException.ThrowIfNull(faults);
        double second = (faults.Take(FaultCatalogue.LongPulse) ? 1 + FaultCatalogue.PulseError : 1)
            * (faults.Take(FaultCatalogue.ShortPulse) ? 1 - FaultCatalogue.PulseError : 1);
        double stuck = faults.Take(FaultCatalogue.GateStuckOn) ? StuckFor : 0;
        double gap = faults.Take(FaultCatalogue.ShortGap) ? FaultCatalogue.ShortGapFactor : 1;
        return train with { SecondPulse = (train.SecondPulse * second) + stuck, Gap = train.Gap * gap };
    }

    /// <summary>Takes the faults of one train's circuit.</summary>
    public static CircuitParameters Once(CircuitParameters circuit, FaultPlan faults)
    {
        ArgumentNullException.ThrowIfNull(circuit);
        ArgumentNullException.ThrowIfNull(faults);
        double bank = faults.Take(FaultCatalogue.BankWeak) ? FaultCatalogue.WeakBank : 1;
        PlaceParts low = circuit.Low;
        low = faults.Has(FaultCatalogue.Desaturates)
            ? low with
            {
                Switch = low.Switch with
                {
                    Transconductance = low.Switch.Transconductance * FaultCatalogue.Desaturated,
                },
            }
            : low;
        PlaceParts firing = faults.Take(FaultCatalogue.DeviceDies) || faults.HasActed(FaultCatalogue.GateStuckOn)
            ? low with { DiesAfterOff2 = Population.Death.Delay }
            : low;
        return circuit with
        {
            Bench = circuit.Bench with { BankCapacitance = circuit.Bench.BankCapacitance * bank },
            Low = firing,
        };
    }
}
