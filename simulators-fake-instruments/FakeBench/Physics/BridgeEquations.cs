using static FakeBench.Physics.BridgeState;

namespace FakeBench.Physics;

/// <summary>The half bridge as fourteen ordinary differential equations with their Jacobian.</summary>
/// <remarks>
/// Bank with series resistance and inductance (a damping resistor across both) to the bus; load with its winding
/// capacitance from the bus to the switch node; high device behind its inductance, a resistor across that; low device
/// behind its own inductance, its source inductance common to the gate loop, then the shunt. Mesh and node equations by
/// Kirchhoff; a resistor in series with the winding capacitance makes the voltage of the switch node explicit, and the
/// gate and power loops share a constant 2 x 2 inductance matrix that is inverted once.
/// </remarks>
internal sealed class BridgeEquations : IOdeSystem
{
    private const int N = Count;
    private static readonly SparseElimination Order = new(BridgeState.Pattern(), N);

    private readonly BenchParts _b;
    private readonly DeviceModel _high, _low;
    private readonly double _lp, _rp, _rh, _ls, _rs, _rgiLow, _rgiHigh;
    private readonly double _kh;
    private readonly double _inverse11, _inverse12, _inverse22;
    private readonly double _supplyVoltage, _highDrive;
    private readonly double[] _scale;

    /// <summary>The equations of one circuit at one bus voltage.</summary>
    /// <param name="parts">The circuit.</param>
    /// <param name="busVoltage">Voltage of the bank at rest, V.</param>
    /// <param name="highDrive">Constant driver voltage of the high place, V.</param>
    public BridgeEquations(CircuitParameters parts, double busVoltage, double highDrive)
    {
        _b = parts.Bench;
        _high = new DeviceModel(parts.High);
        _low = new DeviceModel(parts.Low);
        var package = parts.Low.Package;
        (_lp, _rp, _rh) = (parts.High.Package.DrainInductance, parts.High.Package.EddyResistance,
            parts.High.Package.SeriesResistance);
        (_ls, _rs) = (package.SourceInductance, parts.Low.Switch.SourceResistance);
        (_rgiLow, _rgiHigh) = (parts.Low.Switch.GateResistance, parts.High.Switch.GateResistance);
        _kh = 1 / (_rp + _rh + _b.WindingResistance);
        double loop = package.DrainInductance + _ls + _b.ShuntInductance;
        double gate = _ls + _b.GateInductance;
        double determinant = loop * gate - _ls * _ls;
        (_inverse11, _inverse12, _inverse22) = (gate / determinant, -_ls / determinant, loop / determinant);
        _supplyVoltage = busVoltage * (1 + _b.SupplyResistance / _b.BleederResistance);
        _highDrive = highDrive;
        _scale = BridgeState.Scales(_b, Math.Max(20, Math.Abs(busVoltage)));
    }

    /// <inheritdoc/>
    public int Size => N;

    /// <inheritdoc/>
    public SparseElimination Elimination => Order;

    /// <inheritdoc/>
    public ReadOnlySpan<double> Scale => _scale;

    /// <summary>Driver voltage of the low place at <see cref="DriveSince"/>, V.</summary>
    public double Drive { get; set; }

    /// <summary>Its slope from there on, V/s.</summary>
    public double DriveSlope { get; set; }

    /// <summary>Start of the present piece of the driver's voltage, s.</summary>
    public double DriveSince { get; set; }

    /// <summary>Leakage of the low device, S; a short when it dies.</summary>
    public double LowLeakage
    {
        get => _low.Leakage;
        set => _low.Leakage = value;
    }

    /// <inheritdoc/>
    public void Evaluate(double time, ReadOnlySpan<double> y, Span<double> dy)
    {
        var linear = Circuit(time, y, dy);
        _high.Rates(y[GHigh], y[VHigh], y[MHigh], y[JHigh], linear.High, out var high);
        _low.Rates(y[GLow], y[VLow], y[MLow], y[JLow], y[Low], out var low);
        (dy[GHigh], dy[VHigh], dy[MHigh]) = (high.G, high.V, high.M);
        (dy[GLow], dy[VLow], dy[MLow]) = (low.G, low.V, low.M);
    }

    /// <inheritdoc/>
    public void Linearise(double time, ReadOnlySpan<double> y, Span<double> dy, Span<double> jacobian,
        Span<double> timeDerivative)
    {
        var linear = Circuit(time, y, dy);
        _high.RatesAndSlopes(y[GHigh], y[VHigh], y[MHigh], y[JHigh], linear.High, out var high);
        _low.RatesAndSlopes(y[GLow], y[VLow], y[MLow], y[JLow], y[Low], out var low);
        (dy[GHigh], dy[VHigh], dy[MHigh]) = (high.G, high.V, high.M);
        (dy[GLow], dy[VLow], dy[MLow]) = (low.G, low.V, low.M);

        double load = LoadSlope(y[Phi]);
        CircuitSlopes(y, load, jacobian);
        HighSlopes(high, load, jacobian);
        DeviceSlopes(low, GLow, VLow, MLow, JLow, jacobian);
        jacobian[GLow * N + Low] = low.GById;
        jacobian[VLow * N + Low] = low.VById;
        timeDerivative[Low] = _inverse12 * DriveSlope;
        timeDerivative[JLow] = _inverse22 * DriveSlope;
    }

    /// <summary>The eight signals at the probe tips, in the order of <see cref="Signal"/>.</summary>
    public void Observe(double time, ReadOnlySpan<double> y, Span<double> signals)
    {
        Span<double> dy = stackalloc double[N];
        var linear = Circuit(time, y, dy);
        double source = _ls * (dy[Low] + dy[JLow]) + _rs * (y[Low] + y[JLow]);
        signals[(int)Signal.VgsLow] = y[GLow] + _rgiLow * y[JLow] + source;
        signals[(int)Signal.VdsLow] = y[VLow] + source;
        signals[(int)Signal.IdLow] = y[Low];
        signals[(int)Signal.VgsHigh] = y[GHigh] + _rgiHigh * y[JHigh];
        signals[(int)Signal.VdsHigh] = y[VHigh] + _rh * linear.High;
        signals[(int)Signal.IdHigh] = linear.High;
        signals[(int)Signal.Vbus] = linear.Bus;
        signals[(int)Signal.ILoad] = y[Low] - linear.High;
    }

    /// <summary>The state at rest: both places off, the low one blocking the bus through the load.</summary>
    public double[] Rest(double busVoltage, double lowDrive)
    {
        var y = new double[N];
        double resistance = _b.LoadResistance + _rs + _b.ShuntResistance;
        double leak = busVoltage * _low.Leakage / (1 + _low.Leakage * resistance);
        double across = _b.LoadResistance * leak;
        y[Phi] = LoadFlux(leak);
        y[Winding] = across;
        y[Low] = leak;
        y[VHigh] = across;
        y[VLow] = busVoltage - leak * resistance;
        (y[GHigh], y[GLow]) = (_highDrive, lowDrive);
        y[Bank] = busVoltage;
        y[BankCurrent] = leak;
        return y;
    }

    /// <summary>Current of the load inductor, A.</summary>
    public double LoadCurrent(double phi)
    {
        double r = phi / _b.SaturationFlux;
        double r2 = r * r;
        double r4 = r2 * r2;
        return phi / _b.LoadInductance * (1 + r4 * r4);
    }

    /// <summary>Flux at which the load carries a current, Wb: by halving, since the curve only rises.</summary>
    private double LoadFlux(double current)
    {
        double low = 0;
        double high = current * _b.LoadInductance;
        for (int i = 0; i < 60; i++)
        {
            double middle = 0.5 * (low + high);
            if (LoadCurrent(middle) < current) low = middle;
            else high = middle;
        }

        return high;
    }

    private double LoadSlope(double phi)
    {
        double r = phi / _b.SaturationFlux;
        double r2 = r * r;
        double r4 = r2 * r2;
        return (1 + 9 * r4 * r4) / _b.LoadInductance;
    }

    private (double High, double Bus) Circuit(double time, ReadOnlySpan<double> y, Span<double> dy)
    {
        double i = y[Low];
        double rw = _b.WindingResistance;
        double load = LoadCurrent(y[Phi]);
        double high = _kh * (_rp * y[Loop] + y[Winding] + rw * (i - load) - y[VHigh]);
        double winding = i - high - load;
        double across = y[Winding] + rw * winding;
        double damping = _b.BankDamping * (i - y[BankCurrent]);
        double bus = y[Bank] - damping;
        double drive = Drive + DriveSlope * (time - DriveSince);
        double source = _rs * (i + y[JLow]);
        double loopVoltage = bus - across - _b.ShuntResistance * i - y[VLow] - source;
        double gateVoltage = drive - GateResistor(y[JLow]) * y[JLow] - y[GLow] - source;
        double supply = Supply(y[Bank]);

        dy[Phi] = across - _b.LoadResistance * load;
        dy[Winding] = winding / _b.WindingCapacitance;
        dy[Loop] = _rp * (high - y[Loop]) / _lp;
        dy[Low] = _inverse11 * loopVoltage + _inverse12 * gateVoltage;
        dy[JLow] = _inverse12 * loopVoltage + _inverse22 * gateVoltage;
        dy[JHigh] = (_highDrive - (_b.HighGateResistance + _rgiHigh) * y[JHigh] - y[GHigh]) / _b.GateInductance;
        dy[Bank] = (supply - i - y[Bank] / _b.BleederResistance) / _b.BankCapacitance;
        dy[BankCurrent] = (damping - _b.BankResistance * y[BankCurrent]) / _b.BankInductance;
        return (high, bus);
    }

    private double GateResistor(double current) =>
        _rgiLow + (current > 0 ? _b.GateOnResistance : _b.GateOffResistance);

    private double Supply(double bank) =>
        Math.Clamp((_supplyVoltage - bank) / _b.SupplyResistance, 0, _b.SupplyCurrentLimit);

    private void CircuitSlopes(ReadOnlySpan<double> y, double load, Span<double> j)
    {
        double rw = _b.WindingResistance;
        Span<double> high = stackalloc double[N];
        HighGradient(load, high);
        ReadOnlySpan<int> touching = [Phi, Winding, Loop, Low, VHigh];
        double gateResistor = GateResistor(y[JLow]);
        foreach (int s in touching)
        {
            double winding = (s == Low ? 1 : 0) - high[s] - (s == Phi ? load : 0);
            double across = (s == Winding ? 1 : 0) + rw * winding;
            double loop = -across;
            double gate = 0;
            if (s == Low)
            {
                loop -= _b.BankDamping + _b.ShuntResistance + _rs;
                gate -= _rs;
            }

            j[Phi * N + s] = across - (s == Phi ? _b.LoadResistance * load : 0);
            j[Winding * N + s] = winding / _b.WindingCapacitance;
            j[Loop * N + s] = _rp * (high[s] - (s == Loop ? 1 : 0)) / _lp;
            SharedRows(s, loop, gate, j);
        }

        SharedRows(VLow, -1, 0, j);
        SharedRows(GLow, 0, -1, j);
        SharedRows(JLow, -_rs, -gateResistor - _rs, j);
        SharedRows(Bank, 1, 0, j);
        SharedRows(BankCurrent, _b.BankDamping, 0, j);
        j[JHigh * N + JHigh] = -(_b.HighGateResistance + _rgiHigh) / _b.GateInductance;
        j[JHigh * N + GHigh] = -1 / _b.GateInductance;
        double wanted = (_supplyVoltage - y[Bank]) / _b.SupplyResistance;
        bool linear = wanted > 0 && wanted < _b.SupplyCurrentLimit;
        j[Bank * N + Bank] = (-1 / _b.BleederResistance - (linear ? 1 / _b.SupplyResistance : 0)) / _b.BankCapacitance;
        j[Bank * N + Low] = -1 / _b.BankCapacitance;
        j[BankCurrent * N + Low] = _b.BankDamping / _b.BankInductance;
        j[BankCurrent * N + BankCurrent] = -(_b.BankDamping + _b.BankResistance) / _b.BankInductance;
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
