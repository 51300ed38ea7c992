"""The half bridge's equations, fourteen states, for LSODA: plain numbers inside the right-hand side, because arrays of
fourteen cost more than they save; the signals of all samples at once, because there arrays pay.

States: flux of the load, winding voltage, current of the high inductance, drain current of the low place, drain-source
voltages (high, low), gate voltages (high, low), gate currents (high, low), diode charges over transit time (high, low),
bank voltage, bank current.
"""

import math

import numpy as np
from scipy.integrate import odeint

TOP = 2.3538526683702e17  # exp(40): above it the diode goes on in a straight line


def device(place):
    """Rates of g, v and m of one place's device."""
    s, d = place["Switch"], place["Diode"]
    vto, a, kp, mtr, rd = (s[k] for k in (
        "Threshold", "ThresholdSoftness", "Transconductance", "TriodeFactor", "DrainResistance"))
    cgs, cmin, cmax, steep = (s[k] for k in (
        "GateSource", "GateDrainMinimum", "GateDrainMaximum", "GateDrainSteepness"))
    cj, vj, grading, fixed = (s[k] for k in (
        "JunctionCapacitance", "JunctionVoltage", "JunctionGrading", "FixedCapacitance"))
    bv, rav, leak = float(s["Breakdown"]), s["AvalancheResistance"], s["Leakage"]
    inj, n, tm, tau, rs = (d[k] for k in (
        "InjectionCurrent", "EmissionVoltage", "TransitTime", "Lifetime", "SeriesResistance"))
    own = d["JunctionCapacitance"]
    if own != 0 or kp == 0 or inj == 0 or rs == 0:
        raise ValueError("the peer knows sound places alone")
    swing = (cmax - cmin) / (1 + math.pi / 2)
    middle = cmax - swing
    gain = 1 + tm / tau
    half = cj * 0.5 ** -grading
    exp, log, sqrt, tanh, atan = math.exp, math.log, math.sqrt, math.tanh, math.atan

    def forward(g, v):
        x = (g - vto) / a
        if x < -40:
            return 0.0
        w = a * (x + log(1 + exp(-x))) if x > 0 else a * log(1 + exp(x))
        saturated = 0.5 * kp * w * w
        if mtr * (v - rd * saturated) >= w:
            return saturated
        b = kp * rd * w + 1 / mtr
        z = 2 * v / (b + sqrt(b * b - 2 * kp * rd * v))
        return kp * z * (w - 0.5 * z)

    def injection(v, m):
        right = -v + rs * (m + inj)
        x = right / n
        if x < -40:
            return -inj
        if x > 0:
            x = min(x, log(1 + right / (rs * inj)))
        k = rs * inj / n
        for _ in range(40):
            e = slope = exp(x) if x <= 40 else TOP
            if x > 40:
                e = TOP * (1 + x - 40)
            change = (x + k * e - right / n) / (1 + k * slope)
            x -= change
            if abs(change) < 1e-7:
                break
        return inj * ((exp(x) if x <= 40 else TOP * (1 + x - 40)) - 1)

    def rates(g, v, m, j, drain):
        channel = forward(g, v) if v >= 0 else -forward(g - v, -v)
        injected = injection(v, m)
        x = (v - bv) / 2
        avalanche = 0.0 if x < -40 else 2 * (log(1 + exp(-abs(x))) + max(x, 0)) / rav
        ax = steep * (g - v + rd * channel)
        cgd = middle + swing * (tanh(ax) if ax > 0 else atan(ax))
        x = 1 + v / vj
        cds = fixed + (cj * x ** -grading if x > 0.5 else half - 2 * grading * half * (x - 0.5))
        ca, cd = cgs + cgd, cds + cgd
        scale = 1 / (ca * cd - cgd * cgd)
        drain += injected - channel - m - avalanche - leak * v
        return (cd * j + cgd * drain) * scale, (cgd * j + ca * drain) * scale, (injected - m * gain) / tm

    return rates


class Bridge:
    def __init__(self, circuit, train):
        self.b, self.low, self.high, self.train = circuit["Bench"], circuit["Low"], circuit["High"], train
        b, package, shunt = self.b, self.low["Package"], self.b["ShuntInductance"]
        self.ls, self.rs = package["SourceInductance"], self.low["Switch"]["SourceResistance"]
        loop = package["DrainInductance"] + self.ls + shunt
        gate = self.ls + b["GateInductance"]
        determinant = loop * gate - self.ls ** 2
        self.inverse = gate / determinant, -self.ls / determinant, loop / determinant
        self.drive = self.slope = self.since = 0.0
        self.rates = self.equations()

    def equations(self):
        """The right-hand side, its constants bound to local names."""
        b, high, low = self.b, self.high, self.low
        l0, rload, phis = b["LoadInductance"], b["LoadResistance"], b["SaturationFlux"]
        cw, rw, cb, esr, esl, rx = (b[k] for k in (
            "WindingCapacitance", "WindingResistance", "BankCapacitance", "BankResistance", "BankInductance",
            "BankDamping"))
        bleeder, rout, limit, rsh = (b[k] for k in (
            "BleederResistance", "SupplyResistance", "SupplyCurrentLimit", "ShuntResistance"))
        ron, roff, rhigh, lg = (b[k] for k in (
            "GateOnResistance", "GateOffResistance", "HighGateResistance", "GateInductance"))
        lp, rp, rh = (high["Package"][k] for k in ("DrainInductance", "EddyResistance", "SeriesResistance"))
        rgi_low, rgi_high = low["Switch"]["GateResistance"], high["Switch"]["GateResistance"]
        kh = 1 / (rp + rh + rw)
        rs, (i11, i12, i22) = self.rs, self.inverse
        supply_voltage = self.train["BusVoltage"] * (1 + rout / bleeder)
        held = self.train["HeldOff"]
        high_rates, low_rates = device(high), device(low)

        def rates(time, y):
            phi, vw, ip, i, vh, vl, gh, gl, jh, jl, mh, ml, vc, ic = y.tolist()
            load = phi / l0 * (1 + (phi / phis) ** 8)
            h = kh * (rp * ip + vw + rw * (i - load) - vh)
            winding = i - h - load
            across = vw + rw * winding
            damping = rx * (i - ic)
            source = rs * (i + jl)
            loop = vc - damping - across - rsh * i - vl - source
            gate = self.drive + self.slope * (time - self.since) - (rgi_low + (ron if jl > 0 else roff)) * jl - gl \
                - source
            supply = min(max((supply_voltage - vc) / rout, 0.0), limit)
            dgh, dvh, dmh = high_rates(gh, vh, mh, jh, h)
            dgl, dvl, dml = low_rates(gl, vl, ml, jl, i)
            return (across - rload * load, winding / cw, rp * (h - ip) / lp, i11 * loop + i12 * gate,
                    dvh, dvl, dgh, dgl, (held - (rhigh + rgi_high) * jh - gh) / lg, i12 * loop + i22 * gate, dmh, dml,
                    (supply - i - vc / bleeder) / cb, (damping - esr * ic) / esl)

        return rates

    def rest(self):
        bus, leak_conductance = self.train["BusVoltage"], self.low["Switch"]["Leakage"]
        resistance = self.b["LoadResistance"] + self.rs + self.b["ShuntResistance"]
        leak = bus * leak_conductance / (1 + leak_conductance * resistance)
        across = self.b["LoadResistance"] * leak
        return np.array([leak * self.b["LoadInductance"], across, 0, leak, across, bus - leak * resistance,
                         self.train["HeldOff"], self.train["GateOff"], 0, 0, 0, 0, bus, leak])

    def scales(self):
        bus = max(20.0, abs(self.train["BusVoltage"]))
        return np.array([25 * self.b["LoadInductance"], bus, 25, 25, bus, bus, 10, 10, 1, 1, 25, 25, bus, 25])

    def pieces(self, end):
        """The driver's voltage in straight pieces: from, to, voltage at its start, slope."""
        t, edge = self.train, self.b["DriverEdge"]
        off1 = t["FirstPulse"]
        on2 = off1 + t["Gap"]
        off2 = on2 + t["SecondPulse"]
        rise = (t["GateOn"] - t["GateOff"]) / edge
        corners = []
        for begin, slope in ((0.0, rise), (off1, -rise), (on2, rise), (off2, -rise)):
            on, off = t["GateOn"], t["GateOff"]
            corners += [(begin, off if slope > 0 else on, slope), (begin + edge, on if slope > 0 else off, 0.0)]
        ends = [c[0] for c in corners[1:]] + [end]
        return [(c[0], to, c[1], c[2]) for c, to in zip(corners, ends)]

    def observe(self, time, y, drive):
        """The signals vgs_low, vds_low, id_low, vds_high at the probe tips, all samples at once."""
        b, high = self.b, self.high["Package"]
        phi, vw, ip, i, vh, vl, _, gl, _, jl, _, _, vc, ic = y.T
        load = phi / b["LoadInductance"] * (1 + (phi / b["SaturationFlux"]) ** 8)
        rw, rp = b["WindingResistance"], high["EddyResistance"]
        h = (rp * ip + vw + rw * (i - load) - vh) / (rp + high["SeriesResistance"] + rw)
        across = vw + rw * (i - h - load)
        bus = vc - b["BankDamping"] * (i - ic)
        common = self.rs * (i + jl)
        rgi = self.low["Switch"]["GateResistance"]
        loop = bus - across - b["ShuntResistance"] * i - vl - common
        resistor = rgi + np.where(jl > 0, b["GateOnResistance"], b["GateOffResistance"])
        gate = drive - resistor * jl - gl - common
        i11, i12, i22 = self.inverse
        source = self.ls * ((i11 + i12) * loop + (i12 + i22) * gate) + common
        return np.array([gl + rgi * jl + source, vl + source, i, vh + high["SeriesResistance"] * h])


def simulate(circuit, train, start, interval, points, tolerance):
    """Peaks of one train sampled on a grid: the largest vds_low, id_low and vds_high."""
    bridge = Bridge(circuit, train)
    times = start + interval * np.arange(points)
    states = np.empty((points, 14))
    drive = np.full(points, float(train["GateOff"]))
    y = bridge.rest()
    states[times <= 0] = y
    atol = tolerance * bridge.scales()
    end = max(train["FirstPulse"] + train["Gap"] + train["SecondPulse"] + 2e-6, times[-1])
    evaluations = 0
    for begin, to, level, slope in bridge.pieces(end):
        bridge.drive, bridge.slope, bridge.since = level, slope, begin
        head, tail = np.searchsorted(times, (begin, to), side="right")
        grid = np.concatenate(([begin], times[head:tail], [to]))
        # A sample on the corner itself would make an empty interval.
        last = len(grid) - 1 if tail == head or grid[-2] < to else len(grid) - 2
        found, report = odeint(bridge.rates, y, grid[:last + 1], rtol=tolerance, atol=atol, tcrit=[to], h0=10e-12,
                               mxstep=200000, full_output=True, tfirst=True)
        if report["message"] != "Integration successful.":
            raise ArithmeticError(report["message"])
        evaluations += int(report["nfe"][-1])
        states[head:tail] = found[1:1 + tail - head]
        drive[head:tail] = level + slope * (times[head:tail] - begin)
        y = found[-1]
    signals = bridge.observe(times, states, drive)
    return {"vds_low": float(signals[1].max()), "id_low": float(signals[2].max()),
            "vds_high": float(signals[3].max()), "evaluations": evaluations}
