using System.Runtime.CompilerServices;

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
    /// <summary>Argument from which on an exponential is nothing beside 1, or 1 nothing beside it.</summary>
    private const double Far = 40;

    /// <summary>Injection below this is nothing beside the diode's saturation current and leakage, A.</summary>
    private const double NoInjection = 1e-18;

    private readonly double _kp, _threshold, _softness, _perSoftness, _rd, _mtr, _perMtr;
    private readonly double _gateSource, _gateDrainSwing, _gateDrainMiddle, _steepness;
    private readonly double _breakdown, _avalanche;
    private readonly double _injection, _injectionFrom, _injectionShift, _perEmission, _diodeResistance;
    private readonly double _perTransit, _chargeGain;
    private readonly double _fixed;
    private readonly JunctionCapacitance _switchJunction, _diodeJunction;

    public DeviceModel(PlaceParts parts)
    {
        var (s, diode) = (parts.Switch, parts.Diode);
        (_kp, _threshold, _softness) = (s.Transconductance, s.Threshold, s.ThresholdSoftness);
        (_perSoftness, _rd, _mtr, _perMtr) = (1 / _softness, s.DrainResistance, s.TriodeFactor, 1 / s.TriodeFactor);
        (_gateSource, _steepness) = (s.GateSource, s.GateDrainSteepness);
        _gateDrainSwing = (s.GateDrainMaximum - s.GateDrainMinimum) / (1 + Math.PI / 2);
        _gateDrainMiddle = s.GateDrainMaximum - _gateDrainSwing;
        (_breakdown, _avalanche) = (s.Breakdown, 1 / s.AvalancheResistance);
        (_injection, _diodeResistance) = (diode.InjectionCurrent, diode.SeriesResistance);
        _perEmission = 1 / diode.EmissionVoltage;
        _injectionFrom = diode.EmissionVoltage * Math.Log(NoInjection / _injection);
        _injectionShift = Math.Log(_diodeResistance * _injection * _perEmission);
        _perTransit = 1 / diode.TransitTime;
        _chargeGain = 1 + diode.TransitTime / diode.Lifetime;
        _fixed = s.FixedCapacitance;
        _switchJunction = new(s.JunctionCapacitance, s.JunctionVoltage, s.JunctionGrading);
        _diodeJunction = new(diode.JunctionCapacitance, diode.JunctionVoltage, diode.JunctionGrading);
        Leakage = s.Leakage;
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
    [MethodImpl(MethodImplOptions.AggressiveInlining)]
    public (double Current, double ByGate, double ByDrain) Channel(double g, double v)
    {
        // Below 0 drain and source change places: what was the gate-drain voltage drives the channel now.
        bool swapped = v < 0;
        var (current, byGate, byDrain) = ForwardChannel(swapped ? g - v : g, Math.Abs(v));
        return swapped ? (-current, -byGate, byGate + byDrain) : (current, byGate, byDrain);
    }

    [MethodImpl(MethodImplOptions.AggressiveInlining)]
    private void Work(double g, double v, double m, double j, double id, bool slopes, out DeviceRates rates)
    {
        var (channel, channelByG, channelByV) = Channel(g, v);
        var (injected, injectedByV, injectedByM) = Injection(v, m);
        var (avalanche, avalancheByV) = Avalanche(v);
        double rd = _rd;
        var (cgd, cgdSlope) = GateDrain(g - v + rd * channel);
        var (cds, cdsSlope) = DrainSource(v);
        double a = _gateSource + cgd;
        double d = cds + cgd;
        double scale = 1 / (a * d - cgd * cgd);
        double drain = id - channel + injected - m - avalanche - Leakage * v;
        rates = default;
        rates.G = (d * j + cgd * drain) * scale;
        rates.V = (cgd * j + a * drain) * scale;
        rates.M = (injected - m * _chargeGain) * _perTransit;
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
        rates.MByV = injectedByV * _perTransit;
        rates.MByM = (injectedByM - _chargeGain) * _perTransit;
    }

    [MethodImpl(MethodImplOptions.AggressiveInlining)]
    private (double Current, double ByGate, double ByDrain) ForwardChannel(double g, double v)
    {
        double kp = _kp;
        double x = (g - _threshold) * _perSoftness;
        if (x < -Far || kp == 0) return (0, 0, 0);
        double w = _softness * x;
        double wSlope = 1;
        if (x < Far)
        {
            double e = Math.Exp(-Math.Abs(x));
            w = Math.Max(w, 0) + _softness * Math.Log(1 + e);
            wSlope = (x > 0 ? 1 : e) / (1 + e);
        }

        double rd = _rd;
        double mtr = _mtr;
        double saturated = 0.5 * kp * w * w;
        if (mtr * (v - rd * saturated) >= w) return (saturated, kp * w * wSlope, 0);
        double b = kp * rd * w + _perMtr;
        double z = 2 * v / (b + Math.Sqrt(b * b - 2 * kp * rd * v));
        double byZ = kp * (w - z);
        double divide = 1 / (1 + byZ * mtr * rd);
        return (kp * z * (w - 0.5 * z), kp * z * wSlope * divide, byZ * mtr * divide);
    }

    /// <summary>Injection iE of the diode, A, by its voltage and charge: vj + RS (iE - m) = -v.</summary>
    [MethodImpl(MethodImplOptions.AggressiveInlining)]
    private (double Current, double ByV, double ByM) Injection(double v, double m)
    {
        double s = _injection;
        double rs = _diodeResistance;
        double right = -v + rs * (m + s);
        if (right < _injectionFrom) return (-s, 0, 0);
        if (rs > 0)
        {
            // With u = RS (iE + s)/n the equation is u + ln u = right/n + ln(RS s/n).
            double u = WrightOmega.Of(right * _perEmission + _injectionShift);
            double slope = u / (1 + u);
            return (u / (rs * _perEmission) - s, -slope / rs, slope);
        }

        var (e, eSlope) = Exponential(right * _perEmission);
        return (s * (e - 1), -s * eSlope * _perEmission, 0);
    }

    private static (double Value, double Slope) Exponential(double x)
    {
        if (x <= Far)
        {
            double e = Math.Exp(x);
            return (e, e);
        }

        const double top = 2.3538526683702e17;
        return (top * (1 + x - Far), top);
    }

    [MethodImpl(MethodImplOptions.AggressiveInlining)]
    private (double Current, double Slope) Avalanche(double v)
    {
        const double width = 2;
        double x = (v - _breakdown) / width;
        if (x < -Far) return (0, 0);
        double e = Math.Exp(-Math.Abs(x));
        double soft = Math.Log(1 + e) + Math.Max(x, 0);
        return (width * soft * _avalanche, _avalanche * (x > 0 ? 1 : e) / (1 + e));
    }

    [MethodImpl(MethodImplOptions.AggressiveInlining)]
    private (double Capacitance, double Slope) GateDrain(double x)
    {
        double ax = _steepness * x;
        double full = _gateDrainSwing * _steepness;
        if (x <= 0) return (_gateDrainMiddle + _gateDrainSwing * Math.Atan(ax), full / (1 + ax * ax));
        double t = 1 - 2 / (1 + Math.Exp(2 * ax));
        return (_gateDrainMiddle + _gateDrainSwing * t, full * (1 - t * t));
    }

    [MethodImpl(MethodImplOptions.AggressiveInlining)]
    private (double Capacitance, double Slope) DrainSource(double v)
    {
        var (c, s) = _switchJunction.At(v);
        var (c2, s2) = _diodeJunction.At(v);
        return (_fixed + c + c2, s + s2);
    }
}
