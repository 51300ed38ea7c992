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
internal sealed partial class BridgeEquations : IOdeSystem
{
    private const int N = Count;
    private static readonly SparseElimination Order = new(BridgeState.Pattern(), N);

    private readonly BenchParts _b;
    private readonly DeviceModel _high, _low;
    private readonly double _lp, _rp, _rh, _ls, _rs, _rgiLow, _rgiHigh;
    private readonly double _kh;
    private readonly double _inverse11, _inverse12, _inverse22;
    private readonly double _supplyVoltage, _highDrive;
    private readonly double _perWinding, _perGate, _perBank, _perBankInductance, _perLoop, _perLoad, _perSaturation;
    private readonly double[] _scale;
    private readonly double[] _constant = new double[N * N];
    private double _gateResistor;

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
        (_perLoad, _perSaturation) = (1 / _b.LoadInductance, 1 / _b.SaturationFlux);
        (_perWinding, _perGate) = (1 / _b.WindingCapacitance, 1 / _b.GateInductance);
        (_perBank, _perBankInductance, _perLoop) = (1 / _b.BankCapacitance, 1 / _b.BankInductance, _rp / _lp);
        _scale = BridgeState.Scales(_b, Math.Max(20, Math.Abs(busVoltage)));
        ConstantSlopes(_constant);
    }

    /// <inheritdoc/>
    public int Size => N;

    /// <inheritdoc/>
    public SparseElimination Elimination => Order;

    /// <inheritdoc/>
    public int Turning => JLow;

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
        double highCurrent = Circuit(time, y, dy);
        _high.Rates(y[GHigh], y[VHigh], y[MHigh], y[JHigh], highCurrent, out var high);
        _low.Rates(y[GLow], y[VLow], y[MLow], y[JLow], y[Low], out var low);
        (dy[GHigh], dy[VHigh], dy[MHigh]) = (high.G, high.V, high.M);
        (dy[GLow], dy[VLow], dy[MLow]) = (low.G, low.V, low.M);
    }

    /// <inheritdoc/>
    public void Linearise(double time, ReadOnlySpan<double> y, Span<double> dy, Span<double> jacobian,
        Span<double> timeDerivative)
    {
        _gateResistor = GateResistor(y[JLow]);
        double highCurrent = Circuit(time, y, dy);
        // A gate current that is just turning: its rate, to which the resistor adds nothing yet, tells where to.
        if (y[JLow] == 0) _gateResistor = GateResistor(dy[JLow]);
        _high.RatesAndSlopes(y[GHigh], y[VHigh], y[MHigh], y[JHigh], highCurrent, out var high);
        _low.RatesAndSlopes(y[GLow], y[VLow], y[MLow], y[JLow], y[Low], out var low);
        (dy[GHigh], dy[VHigh], dy[MHigh]) = (high.G, high.V, high.M);
        (dy[GLow], dy[VLow], dy[MLow]) = (low.G, low.V, low.M);

        _constant.CopyTo(jacobian);
        double load = LoadSlope(y[Phi]);
        PhiSlopes(load, jacobian);
        SharedRows(JLow, -_rs, -_gateResistor - _rs, jacobian);
        jacobian[Bank * N + Bank] -= SupplySlope(y[Bank]) * _perBank;
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
        var mesh = MeshAt(time, y);
        double source = _ls * (mesh.LowRate + mesh.GateRate) + _rs * (y[Low] + y[JLow]);
        signals[(int)Signal.VgsLow] = y[GLow] + _rgiLow * y[JLow] + source;
        signals[(int)Signal.VdsLow] = y[VLow] + source;
        signals[(int)Signal.IdLow] = y[Low];
        signals[(int)Signal.VgsHigh] = y[GHigh] + _rgiHigh * y[JHigh];
        signals[(int)Signal.VdsHigh] = y[VHigh] + _rh * mesh.High;
        signals[(int)Signal.IdHigh] = mesh.High;
        signals[(int)Signal.Vbus] = mesh.Bus;
        signals[(int)Signal.ILoad] = y[Low] - mesh.High;
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
    public double LoadCurrent(double phi) => phi * _perLoad * (1 + Saturation(phi));

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

    private double LoadSlope(double phi) => _perLoad * (1 + 9 * Saturation(phi));

    private double Saturation(double phi)
    {
        double r = phi * _perSaturation;
        double r2 = r * r;
        double r4 = r2 * r2;
        return r4 * r4;
    }

    /// <summary>Currents and voltages of the meshes that follow from the states without a delay.</summary>
    private Mesh MeshAt(double time, ReadOnlySpan<double> y)
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
        double gateVoltage = drive - _gateResistor * y[JLow] - y[GLow] - source;
        return new Mesh
        {
            High = high,
            Load = load,
            Winding = winding,
            Across = across,
            Damping = damping,
            Bus = bus,
            LowRate = _inverse11 * loopVoltage + _inverse12 * gateVoltage,
            GateRate = _inverse12 * loopVoltage + _inverse22 * gateVoltage,
        };
    }

    /// <summary>Writes the rates of all states outside the devices; gives the current of the high place, A.</summary>
    private double Circuit(double time, ReadOnlySpan<double> y, Span<double> dy)
    {
        var mesh = MeshAt(time, y);
        dy[Phi] = mesh.Across - _b.LoadResistance * mesh.Load;
        dy[Winding] = mesh.Winding * _perWinding;
        dy[Loop] = (mesh.High - y[Loop]) * _perLoop;
        dy[Low] = mesh.LowRate;
        dy[JLow] = mesh.GateRate;
        dy[JHigh] = (_highDrive - (_b.HighGateResistance + _rgiHigh) * y[JHigh] - y[GHigh]) * _perGate;
        dy[Bank] = (Supply(y[Bank]) - y[Low] - y[Bank] / _b.BleederResistance) * _perBank;
        dy[BankCurrent] = (mesh.Damping - _b.BankResistance * y[BankCurrent]) * _perBankInductance;
        return mesh.High;
    }

    private double GateResistor(double current) =>
        _rgiLow + (current > 0 ? _b.GateOnResistance : _b.GateOffResistance);

    private double Supply(double bank) =>
        Math.Clamp((_supplyVoltage - bank) / _b.SupplyResistance, 0, _b.SupplyCurrentLimit);

    private double SupplySlope(double bank)
    {
        double wanted = (_supplyVoltage - bank) / _b.SupplyResistance;
        return wanted > 0 && wanted < _b.SupplyCurrentLimit ? 1 / _b.SupplyResistance : 0;
    }

    private readonly struct Mesh
    {
        public required double High { get; init; }

        public required double Load { get; init; }

        public required double Winding { get; init; }

        public required double Across { get; init; }

        public required double Damping { get; init; }

        public required double Bus { get; init; }

        public required double LowRate { get; init; }

        public required double GateRate { get; init; }
    }
}
