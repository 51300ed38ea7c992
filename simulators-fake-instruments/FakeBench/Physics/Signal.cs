namespace FakeBench.Physics;

/// <summary>The signals of a half bridge, in the order of <see cref="TrainTrajectory.Signals"/>.</summary>
public enum Signal
{
    /// <summary>Gate-source voltage at the low place's pins, V.</summary>
    VgsLow,

    /// <summary>Drain-source voltage at the low place's pins, V.</summary>
    VdsLow,

    /// <summary>Drain current of the low place, A.</summary>
    IdLow,

    /// <summary>Gate-source voltage at the high place's pins, V.</summary>
    VgsHigh,

    /// <summary>Drain-source voltage at the high place's pins, V.</summary>
    VdsHigh,

    /// <summary>Drain current of the high place, A; a positive one is the diode's reverse current.</summary>
    IdHigh,

    /// <summary>Bus voltage at the half bridge, V.</summary>
    Vbus,

    /// <summary>Current of the whole load branch, winding capacitance included, A.</summary>
    ILoad,
}
