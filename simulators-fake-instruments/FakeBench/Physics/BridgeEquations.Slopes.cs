using static FakeBench.Physics.BridgeState;

namespace FakeBench.Physics;

/// <content>The Jacobian of the equations: what is constant, and what the devices and the load add.</content>
internal sealed partial class BridgeEquations
{
    /// <summary>Slopes that no state changes.</summary>
    private void ConstantSlopes(Span<double> j)
    {
        double rw = _b.WindingResistance;
        Span<double> high = stackalloc double[N];
        HighGradient(0, high);
        ReadOnlySpan<int> touching = [Winding, Loop, Low, VHigh];
        foreach (int s in touching)
        {
            double winding = (s == Low ? 1 : 0) - high[s];
            double across = (s == Winding ? 1 : 0) + rw * winding;
            j[Phi * N + s] = across;
            j[Winding * N + s] = winding * _perWinding;
            j[Loop * N + s] = (high[s] - (s == Loop ? 1 : 0)) * _perLoop;
            double loop = s == Low ? _b.BankDamping + _b.ShuntResistance + _rs : 0;
            SharedRows(s, -across - loop, s == Low ? -_rs : 0, j);
        }

        SharedRows(VLow, -1, 0, j);
        SharedRows(GLow, 0, -1, j);
        SharedRows(Bank, 1, 0, j);
        SharedRows(BankCurrent, _b.BankDamping, 0, j);
        j[JHigh * N + JHigh] = -(_b.HighGateResistance + _rgiHigh) * _perGate;
        j[JHigh * N + GHigh] = -_perGate;
        j[Bank * N + Bank] = -_perBank / _b.BleederResistance;
        j[Bank * N + Low] = -_perBank;
        j[BankCurrent * N + Low] = _b.BankDamping * _perBankInductance;
        j[BankCurrent * N + BankCurrent] = -(_b.BankDamping + _b.BankResistance) * _perBankInductance;
    }

    /// <summary>Column of the load's flux, whose current bends as the core saturates.</summary>
    private void PhiSlopes(double load, Span<double> j)
    {
        double high = -_kh * _b.WindingResistance * load;
        double winding = -high - load;
        double across = _b.WindingResistance * winding;
        j[Phi * N + Phi] = across - _b.LoadResistance * load;
        j[Winding * N + Phi] = winding * _perWinding;
        j[Loop * N + Phi] = high * _perLoop;
        SharedRows(Phi, -across, 0, j);
    }

    /// <summary>Rows of the two currents that share the source inductance.</summary>
    private void SharedRows(int state, double loop, double gate, Span<double> j)
    {
        j[Low * N + state] = _inverse11 * loop + _inverse12 * gate;
        j[JLow * N + state] = _inverse12 * loop + _inverse22 * gate;
    }

    private void HighGradient(double load, Span<double> high)
    {
        high[Phi] = -_kh * _b.WindingResistance * load;
        high[Winding] = _kh;
        high[Loop] = _kh * _rp;
        high[Low] = _kh * _b.WindingResistance;
        high[VHigh] = -_kh;
    }

    private void HighSlopes(in DeviceRates rates, double load, Span<double> j)
    {
        DeviceSlopes(rates, GHigh, VHigh, MHigh, JHigh, j);
        Span<double> high = stackalloc double[N];
        HighGradient(load, high);
        ReadOnlySpan<int> touching = [Phi, Winding, Loop, Low];
        foreach (int s in touching)
        {
            j[GHigh * N + s] = rates.GById * high[s];
            j[VHigh * N + s] = rates.VById * high[s];
        }

        j[GHigh * N + VHigh] += rates.GById * high[VHigh];
        j[VHigh * N + VHigh] += rates.VById * high[VHigh];
    }

    private static void DeviceSlopes(in DeviceRates rates, int g, int v, int m, int gate, Span<double> j)
    {
        j[g * N + g] = rates.GByG;
        j[g * N + v] = rates.GByV;
        j[g * N + m] = rates.GByM;
        j[g * N + gate] = rates.GByJ;
        j[v * N + g] = rates.VByG;
        j[v * N + v] = rates.VByV;
        j[v * N + m] = rates.VByM;
        j[v * N + gate] = rates.VByJ;
        j[m * N + v] = rates.MByV;
        j[m * N + m] = rates.MByM;
    }
}
