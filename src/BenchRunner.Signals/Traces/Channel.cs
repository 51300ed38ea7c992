namespace BenchRunner.Signals.Traces;

/// <summary>What a scope channel sees on the half bridge. Currents are positive into the drain (collector).</summary>
public enum Channel
{
    /// <summary><c>vgs_low</c>: gate-source voltage of the low position, V.</summary>
    VgsLow,

    /// <summary><c>vds_low</c>: drain-source voltage of the low position, V.</summary>
    VdsLow,

    /// <summary><c>id_low</c>: current into the drain of the low position, A.</summary>
    IdLow,

    /// <summary><c>vgs_high</c>: gate-source voltage of the high position, V.</summary>
    VgsHigh,

    /// <summary><c>vds_high</c>: drain-source voltage of the high position, V.</summary>
    VdsHigh,

    /// <summary><c>id_high</c>: current into the drain of the high position, A; positive is a diode's reverse
    /// current.</summary>
    IdHigh,

    /// <summary><c>vbus</c>: voltage of the bus capacitor at the half bridge, V.</summary>
    Vbus,

    /// <summary><c>i_load</c>: current of the load inductor's branch, A.</summary>
    ILoad,
}
