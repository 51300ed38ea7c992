namespace FakeBench.Physics;

/// <summary>Positions of the fourteen states of the half bridge.</summary>
internal static class BridgeState
{
    /// <summary>Flux of the load inductor, Wb.</summary>
    public const int Phi = 0;

    /// <summary>Voltage on the winding capacitance, V.</summary>
    public const int Winding = 1;

    /// <summary>Current in the high place's inductance alone, without its parallel resistor, A.</summary>
    public const int Loop = 2;

    /// <summary>Drain current of the low place, A.</summary>
    public const int Low = 3;

    /// <summary>Drain-source voltage inside the high and the low device, V.</summary>
    public const int VHigh = 4, VLow = 5;

    /// <summary>Gate-source voltage inside the high and the low device, V.</summary>
    public const int GHigh = 6, GLow = 7;

    /// <summary>Gate current of the high and the low place, A.</summary>
    public const int JHigh = 8, JLow = 9;

    /// <summary>Charge qM of the high and the low diode over its transit time, A.</summary>
    public const int MHigh = 10, MLow = 11;

    /// <summary>Voltage on the bank's capacitance, V.</summary>
    public const int Bank = 12;

    /// <summary>Current out of the bank through its series inductance, A.</summary>
    public const int BankCurrent = 13;

    /// <summary>Number of states.</summary>
    public const int Count = 14;
}
