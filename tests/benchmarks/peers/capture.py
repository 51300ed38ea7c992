"""A capture of a double pulse analysed with numpy and scipy: the default definition of every quantity that the four
channels vgs_low, vds_low, id_low and vds_high allow.
"""

import math

import numpy as np

import ring
from samples import (
    Trace, at, crossing, integral, integral_of_product, line, maxima, mean, on_line, peak, sigma, vertex)
from train import Switching, edges_of

BUS_WINDOW = 200e-9


def between(begin, end, factor):
    return None if begin is None or end is None or not end > begin else (end - begin) * factor


def slope(begin, end, change, dt):
    return None if begin is None or end is None or not end > begin else change / ((end - begin) * dt)


class Capture:
    """One analysis, stage after stage."""

    def __init__(self, traces, dt, forward_voltage, dead_time):
        self.traces, self.dt = traces, dt
        self.gate, self.vds, self.id, self.high = (
            traces[name].x for name in ("vgs_low", "vds_low", "id_low", "vds_high"))
        self.count = len(self.gate)
        self.values = {}
        self.find_train(dead_time)
        rest = mean(self.id, 0, self.on1.departure)
        self.id = self.id - rest
        self.bus = mean(self.vds, self.on2.departure - BUS_WINDOW / dt, self.on2.departure) - forward_voltage
        self.values["bus_voltage"] = self.bus
        self.on_off1 = self.on_state(self.on1, self.off1)
        self.on_on2 = self.on_state(self.on2, self.off2)
        self.values["vds_on"] = self.on_off1
        self.fit_ramp()
        self.maxima = []
        self.ring_on = self.ring_above_bus(self.high, "vds_high", self.on2.departure, self.off2.departure, 3)
        self.high_peaks()
        self.fit_load_line()
        self.turn_on()
        self.turn_off()
        self.recovery()
        self.rings()
        self.facts()

    # The train.
    def find_train(self, dead_time):
        trace, gate = self.traces["vgs_low"], self.gate
        noise = sigma(gate, trace.step, max(1, self.count // 2048))
        pair = trace.levels(0, self.count, noise)
        self.sort(pair, noise, dead_time)
        begin = (self.on1.at + self.off1.at) / 2
        end = (self.off1.at + self.on2.at) / 2
        noise = sigma(gate[:int(self.on1.departure)], trace.step)
        pair = trace.levels(math.ceil(begin), int(end) + 1, noise)
        self.sort(pair, noise, dead_time)
        self.pair = pair
        self.values["vgs_off"], self.values["vgs_on"] = pair
        quiet = int(self.on1.departure)
        self.sigma = {name: sigma(t.x[:quiet], t.step) for name, t in self.traces.items()}

    def sort(self, pair, noise, dead_time):
        self.gate_hysteresis = max(3 * noise, 0.01 * (pair[1] - pair[0]))
        self.edges = edges_of(self.gate, self.dt, pair, self.gate_hysteresis, dead_time)
        self.on1, self.off1, self.on2, self.off2 = self.edges

    def on_state(self, on, off):
        return mean(self.vds, off.departure - 0.1 * (off.at - on.at), off.departure)

    # The load's current.
    def fit_ramp(self):
        pulse = self.off1.at - self.on1.at
        begin = self.on1.at + 0.30 * pulse
        end = self.off1.departure - 0.05 * pulse
        fitted = line(self.id, begin, end)
        self.slope = fitted[2]
        self.i_off = on_line(fitted, self.off1.at)
        head, count = math.ceil(begin), math.floor(end) - math.ceil(begin) + 1
        marks = head + count * np.arange(21) // 20
        sizes = np.diff(marks)
        means = np.add.reduceat(self.id[head:head + count], marks[:-1] - head) / sizes
        residuals = means - on_line(fitted, marks[:-1] + (sizes - 1) / 2)
        early = line(self.id, begin, begin + (end - begin) / 3)
        late = line(self.id, end - (end - begin) / 4, end)
        self.values["ramp_slope"] = self.slope / self.dt
        self.values["ramp_straightness"] = float(np.abs(residuals).max()) / abs(self.i_off)
        self.values["ramp_growth"] = late[2] / early[2] - 1
        self.values["i_off"] = self.i_off

    def fit_load_line(self):
        turn_on = Switching(self, True, self.on2.departure, self.off2.departure, self.on_on2, None)
        knee = turn_on.voltage(0.5, decided=False)
        ringing = self.ring_on is not None
        pulse = self.off2.at - self.on2.at
        decay = 2 * math.pi * self.ring_on[0] * self.ring_on[1] / math.sqrt(1 - self.ring_on[1] ** 2) if ringing else 0
        start = self.on2.at + (5 / (decay * self.dt) if ringing else 0.25 * pulse)
        end = self.off2.at - 0.05 * pulse
        self.origin = max(0, int(self.on2.departure) - 1)
        length = math.floor(self.off2.departure) - self.origin + 1
        for _ in range(3):
            held = end - start < max(100, 0.1 * pulse)
            fitted = line(self.id, start, end, self.slope if held else None)
            positions = np.arange(self.origin, self.origin + length, dtype=float)
            np.maximum(positions, knee, out=positions)
            positions -= fitted[0]
            positions *= -fitted[2]
            positions -= fitted[1]
            self.irr = self.id[self.origin:self.origin + length] + positions
            self.find_recovery()
            over = None if self.chord is None else self.chord + self.origin + 20e-9 / self.dt
            if not ringing or over is None or over <= start:
                break
            start = over
        self.i_on = on_line(fitted, knee)
        self.values["i_on"] = self.i_on

    def find_recovery(self):
        noise = self.sigma["id_low"]
        departure = self.on2.departure - self.origin
        self.irm = peak(self.irr, departure, self.off2.departure - self.origin)
        height, position, top = self.irm
        self.irr_hysteresis = max(3 * noise, 0.01 * height)
        self.t0 = crossing(self.irr, 0.0, self.irr_hysteresis, True, departure, position)
        self.fall90, self.fall25 = (
            crossing(self.irr, part * height, self.irr_hysteresis, False, top, len(self.irr) - 1)
            for part in (0.90, 0.25))
        self.chord = None if self.fall90 is None or self.fall25 is None else \
            self.fall25 + (self.fall25 - self.fall90) * 0.25 / 0.65

    # What the edges say.
    def turn_on(self):
        e = Switching(self, True, self.on2.departure, self.off2.departure, self.on_on2, self.i_on)
        v90, v80, v20, v10 = (e.voltage(f) for f in (0.9, 0.8, 0.2, 0.1))
        i10, i90 = e.amperes(0.1), e.amperes(0.9)
        v = self.values
        v["td_on"] = between(e.departure, v90, self.dt)
        v["tr"] = between(v90, v10, self.dt)
        v["dvdt_on"] = slope(v80, v20, 0.6 * e.step, self.dt)
        v["didt_on"] = slope(i10, i90, 0.8 * self.i_on, self.dt)
        v["id_peak_on"] = peak(self.id, e.departure, e.end)[0]
        end = e.voltage(0.1, decided=False)
        v["eon"] = integral_of_product(self.vds, self.id, i10, end) * self.dt
        length = i90 - i10
        flux = self.bus * length - integral(self.vds, i10, i90) - integral(self.high, i10, i90)
        v["loop_inductance"] = flux * self.dt / (at(self.id, i90) - at(self.id, i10))

    def turn_off(self):
        e = Switching(self, False, self.off1.departure, self.on2.departure, self.on_off1, self.i_off)
        v90, v80, v20, v10 = (e.voltage(f) for f in (0.9, 0.8, 0.2, 0.1))
        i90, i10 = e.amperes(0.9), e.amperes(0.1)
        v = self.values
        v["td_off"] = between(e.departure, v10, self.dt)
        v["tf"] = between(v10, v90, self.dt)
        v["dvdt_off"] = slope(v20, v80, 0.6 * e.step, self.dt)
        v["didt_off"] = slope(i90, i10, 0.8 * self.i_off, self.dt)
        v["eoff"] = integral_of_product(self.vds, self.id, e.voltage(0.1, decided=False), i10) * self.dt
        v["vds_peak_off"] = peak(self.vds, e.departure, e.end)[0]

    def recovery(self):
        v, dt = self.values, self.dt
        height, position, _ = self.irm
        v["irm"] = height
        v["trr"] = (self.chord - self.t0) * dt
        v["ta"] = (position - self.t0) * dt
        v["tb"] = (self.chord - position) * dt
        v["softness"] = (self.chord - position) / (position - self.t0)
        v["qrr"] = integral(self.irr, self.t0, self.chord) * dt
        v["dirr_dt"] = slope(self.fall90, self.fall25, 0.65 * height, dt)
        half = crossing(self.irr, -0.5 * self.i_on, self.irr_hysteresis, True,
                        self.on2.departure - self.origin, self.t0)
        change = at(self.id, self.t0 + self.origin) - at(self.id, half + self.origin)
        v["dif_dt"] = change / ((self.t0 - half) * dt)
        voltage = self.high[self.origin:self.origin + len(self.irr)]
        v["err"] = integral_of_product(voltage, self.irr, self.t0, self.chord) * dt

    # Ringing.
    def prominence(self, name):
        return max(5 * self.sigma[name], 0.005 * abs(self.bus))

    def high_peaks(self):
        above = [i for i in self.maxima if self.high[i] > self.bus]
        for number in (1, 2, 3):
            self.values[f"vds_high_peak_{number}"] = \
                vertex(self.high, above[number - 1])[0] if len(above) >= number else None

    def ring_above_bus(self, x, name, begin, end, wanted):
        """The strongest mode, and extremum, period and window of the search; None where nothing rings."""
        tops, head = [], None
        for top in maxima(x, self.prominence(name), math.ceil(begin), math.floor(end)):
            tops.append(top)
            if head is None and x[top] > self.bus:
                head = len(tops) - 1
            if head is not None and len(tops) > head + 1 and sum(x[t] > self.bus for t in tops) >= wanted:
                break
        if wanted > 1:
            self.maxima = tops
        if head is None or len(tops) < head + 2:
            return None
        height, extremum = vertex(x, tops[head])
        shape = self.first_mode(x, extremum, tops[head + 1] - tops[head], end)
        if shape is None:
            return None
        period = 1 / (shape[0] * self.dt)
        return self.fit_ring(x, name, extremum, period, shape, height - self.bus, end)

    def first_mode(self, x, extremum, period, end):
        stop = min(extremum + 6 * period, end, len(x) - 1)
        if stop - extremum < 2 * period:
            return None
        return ring.envelope(x[math.ceil(extremum):int(stop) + 1], self.dt, period)

    def fit_ring(self, x, name, extremum, period, shape, swing, end):
        least = max(2 * self.sigma[name], 0.01 * swing)
        decayed = extremum + math.log(shape[2] / least) / (shape[1] * self.dt)
        begin, stop = extremum + period, min(decayed, end, len(x) - 1)
        if stop - begin < 2 * period:
            return None
        modes = ring.fit(x[math.ceil(begin):int(stop) + 1], self.dt)
        if modes is None:
            return None
        frequency, damping, amplitude = modes[0]
        decay = 2 * math.pi * frequency * damping / math.sqrt(1 - damping * damping)
        # The fit counts from its first sample, the quantity from the window's start.
        amplitude *= math.exp(decay * (math.ceil(begin) - begin) * self.dt)
        return frequency, damping, amplitude, extremum, period, begin, stop

    def rings(self):
        v = self.values
        if self.ring_on is not None:
            frequency, damping, amplitude, extremum, period = self.ring_on[:5]
            v["ring_frequency"], v["ring_damping"], v["ring_amplitude"] = frequency, damping, amplitude
            v["ring_q"] = 1 / (2 * damping)
            shape = self.first_mode(self.id, extremum, period, self.off2.departure)
            if shape is not None:
                found = self.fit_ring(self.id, "id_low", extremum, period, shape, shape[2], self.off2.departure)
                if found is not None:
                    v["ring_frequency_id"], v["ring_damping_id"] = found[:2]
        off = self.ring_above_bus(self.vds, "vds_low", self.off1.departure, self.on2.departure, 1)
        if off is not None:
            v["ring_frequency_off"], v["ring_damping_off"] = off[:2]
            begin, stop = off[5:]
            settled = mean(self.vds, stop - (stop - begin) / 3, stop)
            v["vds_overshoot_off"] = v["vds_peak_off"] - settled

    def facts(self):
        """What validity rests on: how long the gate takes, the largest voltage with the gate on."""
        low, high = self.pair
        slowest = 0.0
        for edge in self.edges:
            level = low + (0.9 if edge.up else 0.1) * (high - low)
            end = crossing(self.gate, level, self.gate_hysteresis, edge.up, edge.departure, self.count - 1)
            slowest = max(slowest, end - edge.departure)
        self.values["gate_edge"] = slowest * self.dt
        self.values["on_state_maximum"] = max(
            float(self.vds[math.ceil(on.at + 0.25 * (off.at - on.at)):int(off.departure) + 1].max())
            for on, off in ((self.on1, self.off1), (self.on2, self.off2)))


def analyse(codes, scales, dt, forward_voltage, dead_time):
    """All values by name."""
    traces = {name: Trace(codes[name], *scales[name]) for name in codes}
    return Capture(traces, dt, forward_voltage, dead_time).values
