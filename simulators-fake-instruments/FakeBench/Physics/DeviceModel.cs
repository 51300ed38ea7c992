namespace FakeBench.Physics;

/// <summary>One place's device as equations: from its states to their rates of change, and the slopes of
/// those.</summary>
/// <remarks>
/// States: g, the gate-source voltage inside; v, the drain-source voltage inside; m = qM/TM of the diode, A.
/// [Cgs + Cgd, -Cgd; -Cgd, Cds + Cgd] (g', v') = (j, id - ich + iD - iav - G v), j into the gate, id into the drain.
/// The body is one long function on purpose: the solver spends most of its time here.
/// </remarks>
internal sealed class DeviceModel
{
    private readonly SwitchParts _switch;
    private readonly DiodeParts _diode;
    private readonly double _gateDrainSwing, _gateDrainMiddle;
    private readonly double _chargeGain;

    public DeviceModel(PlaceParts parts)
    {
        _switch = parts.Switch;
        _diode = parts.Diode;
        Leakage = _switch.Leakage;
        _gateDrainSwing = (_switch.GateDrainMaximum - _switch.GateDrainMinimum) / (1 + Math.PI / 2);
        _gateDrainMiddle = _switch.GateDrainMaximum - _gateDrainSwing;
        _chargeGain = 1 + _diode.TransitTime / _diode.Lifetime;
    }

    /// <summary>Leakage from drain to source, S; set anew when the part dies.</summary>
    public double Leakage { get; set; }

    /// <summary>Rates of change.</summary>
    public void Rates(double g, double v, double m, double j, double id, out DeviceRates rates) =>
        Work(g, v, m, j, id, slopes: false, out rates);

    /// <summary>Rates of change and their slopes.</summary>
    public void RatesAndSlopes(double g, double v, double m, double j, double id, out DeviceRates rates) =>
        Work(g, v, m, j, id, slopes: true, out rates);

    /// <summary>Current through the channel, A, with its slopes by g and v.</summary>
    public (double Current, double ByGate, double ByDrain) Channel(double g, double v)
    {
        if (v >= 0) return ForwardChannel(g, v);
        // Drain and source change places: what was the gate-drain voltage drives the channel now.
        var (current, byGate, byDrain) = ForwardChannel(g - v, -v);
        return (-current, -byGate, byGate + byDrain);
    }

    private void Work(double g, double v, double m, double j, double id, bool slopes, out DeviceRates rates)
    {
        var (channel, channelByG, channelByV) = Channel(g, v);
        var (injected, injectedByV, injectedByM) = Injection(v, m);
        var (avalanche, avalancheByV) = Avalanche(v);
        double rd = _switch.DrainResistance;
        var (cgd, cgdSlope) = GateDrain(g - v + rd * channel, slopes);
        var (cds, cdsSlope) = DrainSource(v, slopes);
        double a = _switch.GateSource + cgd;
        double d = cds + cgd;
        double scale = 1 / (a * d - cgd * cgd);
        double drain = id - channel + injected - m - avalanche - Leakage * v;
        rates = default;
        rates.G = (d * j + cgd * drain) * scale;
        rates.V = (cgd * j + a * drain) * scale;
        rates.M = (injected - m * _chargeGain) / _diode.TransitTime;
        if (!slopes) return;

        rates.GByJ = d * scale;
        rates.GById = cgd * scale;
        rates.VByJ = rates.GById;
        rates.VById = a * scale;
        double spread = cgdSlope * (rates.G - rates.V);
        double byG = spread * (1 + rd * channelByG);
        double byV = spread * (-1 + rd * channelByV);
        double drainByG = -channelByG + byG;
        double drainByV = -channelByV + injectedByV - avalancheByV - Leakage + byV - cdsSlope * rates.V;
        rates.GByG = (-d * byG + cgd * drainByG) * scale;
        rates.VByG = (-cgd * byG + a * drainByG) * scale;
        rates.GByV = (-d * byV + cgd * drainByV) * scale;
        rates.VByV = (-cgd * byV + a * drainByV) * scale;
        rates.GByM = cgd * (injectedByM - 1) * scale;
        rates.VByM = a * (injectedByM - 1) * scale;
        rates.MByV = injectedByV / _diode.TransitTime;
        rates.MByM = (injectedByM - _chargeGain) / _diode.TransitTime;
    }

    private (double Current, double ByGate, double ByDrain) ForwardChannel(double g, double v)
    {
        double kp = _switch.Transconductance;
        double a = _switch.ThresholdSoftness;
        double x = (g - _switch.Threshold) / a;
        if (x < -40 || kp == 0) return (0, 0, 0);
        double e = Math.Exp(-Math.Abs(x));
        double w = x > 0 ? a * (x + Math.Log(1 + e)) : a * Math.Log(1 + e);
        double wSlope = x > 0 ? 1 / (1 + e) : e / (1 + e);
        double rd = _switch.DrainResistance;
        double mtr = _switch.TriodeFactor;
        double saturated = 0.5 * kp * w * w;
        if (mtr * (v - rd * saturated) >= w) return (saturated, kp * w * wSlope, 0);
        double b = kp * rd * w + 1 / mtr;
        double z = 2 * v / (b + Math.Sqrt(b * b - 2 * kp * rd * v));
        double byZ = kp * (w - z);
        double divide = 1 / (1 + byZ * mtr * rd);
        return (kp * z * (w - 0.5 * z), kp * z * wSlope * divide, byZ * mtr * divide);
    }

    /// <summary>Injection iE of the diode, A, by its voltage and charge: vj + RS (iE - m) = -v by Newton's
    /// method.</summary>
    private (double Current, double ByV, double ByM) Injection(double v, double m)
    {
        double s = _diode.InjectionCurrent;
        if (s == 0) return (0, 0, 0);
        double n = _diode.EmissionVoltage;
        double rs = _diode.SeriesResistance;
        double right = -v + rs * (m + s);
        double x = right / n;
        if (x < -40) return (-s, 0, 0);
        double e;
        double slope;
        if (rs > 0)
        {
            // Both starts lie right of the root of a convex function, so the iteration only ever falls.
            if (x > 0) x = Math.Min(x, Math.Log(1 + right / (rs * s)));
            double k = rs * s / n;
            for (int i = 0; i < 40; i++)
            {
                (e, slope) = Exponential(x);
                double change = (x + k * e - right / n) / (1 + k * slope);
                x -= change;
                if (Math.Abs(change) < 1e-7) break;
            }
        }

        (e, slope) = Exponential(x);
        double conductance = s * slope / n;
        double through = conductance / (1 + rs * conductance);
        return (s * (e - 1), -through, rs * through);
    }

    private static (double Value, double Slope) Exponential(double x)
    {
        const double linearAbove = 40;
        if (x <= linearAbove)
        {
            double e = Math.Exp(x);
            return (e, e);
        }

        const double top = 2.3538526683702e17;
        return (top * (1 + x - linearAbove), top);
    }

    private (double Current, double Slope) Avalanche(double v)
    {
        const double width = 2;
        double x = (v - _switch.Breakdown) / width;
        if (x < -40) return (0, 0);
        double e = Math.Exp(-Math.Abs(x));
        double soft = Math.Log(1 + e) + Math.Max(x, 0);
        double conductance = 1 / _switch.AvalancheResistance;
        return (width * soft * conductance, conductance * (x > 0 ? 1 / (1 + e) : e / (1 + e)));
    }

    private (double Capacitance, double Slope) GateDrain(double x, bool slope)
    {
        double a = _switch.GateDrainSteepness;
        double ax = a * x;
        if (x > 0)
        {
            double t = Math.Tanh(ax);
            return (_gateDrainMiddle + _gateDrainSwing * t, slope ? _gateDrainSwing * a * (1 - t * t) : 0);
        }

        return (_gateDrainMiddle + _gateDrainSwing * Math.Atan(ax), slope ? _gateDrainSwing * a / (1 + ax * ax) : 0);
    }

    private (double Capacitance, double Slope) DrainSource(double v, bool slope)
    {
        var (c, s) = Junction(v, _switch.JunctionCapacitance, _switch.JunctionVoltage, _switch.JunctionGrading, slope);
        c += _switch.FixedCapacitance;
        if (_diode.JunctionCapacitance == 0) return (c, s);
        var (c2, s2) = Junction(v, _diode.JunctionCapacitance, _diode.JunctionVoltage, _diode.JunctionGrading, slope);
        return (c + c2, s + s2);
    }

    private static (double Capacitance, double Slope) Junction(
        double v, double c0, double vj, double grading, bool slope)
    {
        if (c0 == 0) return (0, 0);
        double x = 1 + v / vj;
        if (x > 0.5)
        {
            double c = c0 * Math.Pow(x, -grading);
            return (c, slope ? -grading * c / (x * vj) : 0);
        }

        double half = c0 * Math.Pow(0.5, -grading);
        double fall = -2 * grading * half;
        return (half + fall * (x - 0.5), fall / vj);
    }
}
