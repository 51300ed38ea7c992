namespace FakeBench.Physics;

/// <summary>Positions, couplings and sizes of the fourteen states of the half bridge.</summary>
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

    /// <summary>Where the Jacobian of the half bridge may differ from 0, row-major.</summary>
    public static bool[] Pattern()
    {
        var pattern = new bool[Count * Count];
        void Row(int row, params ReadOnlySpan<int> columns)
        {
            foreach (int column in columns) pattern[row * Count + column] = true;
        }

        foreach (int row in (int[])[Phi, Winding, Loop]) Row(row, Phi, Winding, Loop, Low, VHigh);
        foreach (int row in (int[])[Low, JLow])
        {
            Row(row, Phi, Winding, Loop, Low, VHigh, VLow, GLow, JLow, Bank, BankCurrent);
        }

        foreach (int row in (int[])[GHigh, VHigh]) Row(row, Phi, Winding, Loop, Low, GHigh, VHigh, MHigh, JHigh);
        foreach (int row in (int[])[GLow, VLow]) Row(row, Low, GLow, VLow, MLow, JLow);
        Row(MHigh, MHigh, VHigh);
        Row(MLow, MLow, VLow);
        Row(JHigh, JHigh, GHigh);
        Row(Bank, Bank, Low);
        Row(BankCurrent, BankCurrent, Low);
        return pattern;
    }

    /// <summary>Size that counts as one in each state: that of the bus, 10 V of gate, 25 A, 1 A of gate
    /// current.</summary>
    public static double[] Scales(BenchParts bench, double voltage)
    {
        const double current = 25, gate = 10, gateCurrent = 1;
        var scale = new double[Count];
        scale[Phi] = current * bench.LoadInductance;
        foreach (int s in (int[])[Winding, VHigh, VLow, Bank]) scale[s] = voltage;
        foreach (int s in (int[])[Loop, Low, MHigh, MLow, BankCurrent]) scale[s] = current;
        foreach (int s in (int[])[GHigh, GLow]) scale[s] = gate;
        foreach (int s in (int[])[JHigh, JLow]) scale[s] = gateCurrent;
        return scale;
    }
}
