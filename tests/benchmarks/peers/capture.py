"""A capture of a double pulse analysed with numpy and scipy: the default definition of every quantity that the four
channels vgs_low, vds_low, id_low and vds_high allow. Positions are in samples; None stands for "cannot be formed".
"""

import math

import numpy as np

import ring

BUS_WINDOW = 200e-9
TOP = 4096


class Trace:
    """One channel: its codes, how often each occurs, its values."""

    def __init__(self, codes, increment, origin, reference):
        self.codes = codes
        self.increment, self.origin, self.reference = increment, origin, reference
        self.x = codes * increment
        self.x += origin - reference * increment
        self.lowest, self.counts = counted(codes)
        held = np.flatnonzero(self.counts)
        self.step = abs(increment) * (int(np.diff(held).min()) if len(held) > 1 else 1)

    def values(self, lowest, count):
        return (np.arange(lowest, lowest + count) - self.reference) * self.increment + self.origin


def counted(codes):
    """How often each code occurs, from the lowest on; differences wrap to what they are as unsigned numbers."""
    lowest = codes.min()
    return int(lowest), np.bincount((codes - lowest).view(np.uint16))


def median(v):
    """Of an even count the mean of the middle two."""
    half = len(v) // 2
    if len(v) % 2:
        return float(np.partition(v, half)[half])
    low, high = np.partition(v, (half - 1, half))[half - 1:half + 1]
    return float(low + (high - low) / 2)


def sigma(x, step, stride=1):
    """Noise by the median absolute deviation of the first differences, at least that of rounding."""
    floor = step / math.sqrt(12)
    count = (len(x) - 2 + stride) // stride
    if len(x) < 3:
        return floor
    d = np.diff(x) if stride == 1 else x[1::stride][:count] - x[::stride][:count]
    return max(1.4826 * median(np.abs(d - median(d))) / math.sqrt(2), floor)


def levels(values, counts, noise, step):
    """Low and high state by the modes of a histogram, refined to the mean near each."""
    held = np.flatnonzero(counts)
    values, counts = values[held], counts[held]
    low, high = values.min(), values.max()
    span = high - low
    if not span > 0:
        return None
    width = max(span / 256, step)
    count = min(max(math.ceil(span / width), 2), 256)
    bins = np.minimum(count - 1, ((values - low) * (1 / width)).astype(np.intp))
    histogram = np.bincount(bins, weights=counts, minlength=count)
    half = count // 2
    reach = max(3 * noise, width)
    modes = []
    for at in (histogram[:half].argmax(), half + histogram[half:].argmax()):
        centre = low + (at + 0.5) * width
        near = np.abs(values - centre) <= reach
        weight = counts[near].sum()
        modes.append(centre + (counts[near] @ (values[near] - centre)) / weight if weight else centre)
    return tuple(modes) if modes[1] - modes[0] > 6 * noise else None


def first(x, level, up, start, stop):
    """The first sample at or beyond a level, stop where there is none; looked for in growing pieces."""
    size = TOP
    while start < stop:
        part = x[start:min(start + size, stop)]
        hit = part >= level if up else part <= level
        k = int(hit.argmax())
        if hit[k]:
            return start + k
        start += len(part)
        size = min(4 * size, 65536)
    return stop


def last_before(x, level, up, start, beyond):
    """Where the signal last crossed the level before a sample that lies beyond it."""
    size, end = 64, beyond
    while end > start:
        low = max(start, end - size)
        part = x[low:end]
        back = np.flatnonzero(part <= level if up else part >= level)
        if len(back):
            i = low + int(back[-1])
            return i + float((level - x[i]) / (x[i + 1] - x[i]))
        end = low
        size *= 8
    return None


def counts_at(level, hysteresis, up):
    return max(level + hysteresis, math.nextafter(level, math.inf)) if up else \
        min(level - hysteresis, math.nextafter(level, -math.inf))


def crossing(x, level, hysteresis, up, start, stop):
    """The first crossing that goes on beyond the level by the hysteresis."""
    begin = max(0, math.floor(start))
    last = min(len(x) - 1, math.ceil(stop))
    counts = counts_at(level, hysteresis, up)
    while begin < last:
        beyond = first(x, counts, up, begin + 1, last + 1)
        if beyond > last:
            return None
        found = last_before(x, level, up, begin, beyond)
        if found is not None and found >= start:
            return found if found <= stop else None
        begin = first(x, level, not up, beyond + 1, last + 1)
    return None


def crossings(x, level, hysteresis, start, last):
    """All crossings that count, upwards and downwards in turn, as (position, upwards)."""
    above = x[start] > level
    i = start
    while True:
        up = not above
        beyond = first(x, counts_at(level, hysteresis, up), up, i + 1, last + 1)
        found = last_before(x, level, up, i, beyond) if beyond <= last else None
        if found is None:
            return
        yield found, up
        above, i = up, beyond


class Edge:
    def __init__(self, at, departure, up):
        self.at, self.departure, self.up = at, departure, up


def departure_of(gate, dt, low_high, hysteresis, dead, state, at, up):
    long_enough = (at - state) * dt >= 0.8e-6
    begin = at - 0.8e-6 / dt if long_enough else state + (at - state) / 4
    end = at - 0.4e-6 / dt if long_enough else at - (at - state) / 4
    head = min(max(math.ceil(begin), 0), len(gate) - 1)
    count = min(max(math.floor(end) - head + 1, 1), len(gate) - head)
    left = median(gate[head:head + count])
    level = left + 0.1 * ((low_high[1] if up else low_high[0]) - left)
    last, earliest = -math.inf, None
    for position, direction in crossings(gate, level, hysteresis, int(state), min(len(gate) - 1, math.ceil(at))):
        if position > at:
            break
        if position - last >= dead:
            earliest = None
        if earliest is None and direction == up:
            earliest = position
        last = position
    return at if earliest is None else earliest


def edges_of(gate, dt, low_high, hysteresis, dead_time):
    middle = low_high[0] + 0.5 * (low_high[1] - low_high[0])
    dead = dead_time / dt
    edges, skipped = [], None

    def add(at, up):
        state = edges[-1].at if edges else 0
        edges.append(Edge(at, departure_of(gate, dt, low_high, hysteresis, dead, state, at, up), up))

    above = gate[0] > middle
    for position, up in crossings(gate, middle, hysteresis, 0, len(gate) - 1):
        above = up
        if edges and position - edges[-1].at < dead:
            skipped = position
            continue
        if edges and edges[-1].up == up:
            add(skipped, not up)
        add(position, up)
    if edges and above != edges[-1].up:
        add(skipped, not edges[-1].up)
    return edges


def at(x, position):
    i = int(position)
    part = position - i
    return float(x[i] if part == 0 else x[i] + part * (x[i + 1] - x[i]))


def integral(x, begin, end):
    """Trapezoidal rule with the part-samples at both ends, in units of the sample interval."""
    head, tail = math.ceil(begin), math.floor(end)
    y0, y1 = at(x, begin), at(x, end)
    if head > tail:
        return (y0 + y1) / 2 * (end - begin)
    inner = float(x[head:tail + 1].sum()) - (float(x[head]) + float(x[tail])) / 2
    return inner + (y0 + float(x[head])) / 2 * (head - begin) + (float(x[tail]) + y1) / 2 * (end - tail)


def mean(x, begin, end):
    return integral(x, begin, end) / (end - begin) if end > begin else at(x, begin)


def integral_of_product(x, y, begin, end):
    head, tail = int(begin), math.floor(end) + 2
    product = x[head:tail] * y[head:tail]
    return integral(product, begin - head, end - head)


def line(x, begin, end, slope=None):
    """Least-squares line as (centre, value, slope a sample)."""
    head = max(0, math.ceil(begin))
    tail = min(len(x) - 1, math.floor(end))
    n = tail - head + 1
    if n < (3 if slope is None else 1):
        return None
    y = x[head:tail + 1]
    half = (n - 1) / 2
    if slope is None:
        centred = np.arange(-half, half + 0.5)
        slope = float(centred @ y) / (n * (n * n - 1.0) / 12)
    return head + half, float(y.mean()), slope


def on_line(fitted, position):
    return fitted[1] + fitted[2] * (position - fitted[0])


def vertex(x, top):
    """Height and position of the parabola through three samples."""
    low, mid, high = (float(v) for v in x[top - 1:top + 2])
    difference, bend = high - low, 2 * mid - low - high
    return (mid + difference * difference / (8 * bend), top + difference / (2 * bend)) if bend > 0 else (mid, top)


def peak(x, begin, end):
    head = max(0, math.ceil(begin))
    tail = min(len(x) - 1, math.floor(end))
    top = head + int(x[head:tail + 1].argmax())
    return (*vertex(x, top), top) if head < top < tail else None


def maxima(x, prominence, begin, end):
    """Samples of the maxima that stand out: risen to by the prominence and fallen from by it, piece by piece."""
    i, stop = max(0, begin), min(len(x) - 1, end) + 1
    low, high, top = float(x[i]), None, i
    i += 1
    size = 1024
    while i < stop:
        part = x[i:min(i + size, stop)]
        if high is None:
            lowest = np.minimum(np.minimum.accumulate(part), low)
            hit = part - lowest >= prominence
            k = int(hit.argmax())
            if not hit[k]:
                low = float(lowest[-1])
                i += len(part)
                continue
            high, top = float(part[k]), i + k
        else:
            highest = np.maximum(np.maximum.accumulate(part), high)
            hit = highest - part >= prominence
            k = int(hit.argmax())
            whole = not hit[k]
            reach = part if whole else part[:k]
            if len(reach):
                best = int(reach.argmax())
                if reach[best] > high:
                    high, top = float(reach[best]), i + best
            if whole:
                i += len(part)
                continue
            yield top
            low, high = float(part[k]), None
        i += k + 1


class Switching:
    """Levels and crossings of one turn-on or turn-off, each looked for once."""

    def __init__(self, capture, turns_on, departure, end, on_state, current):
        self.vds, self.id = capture.vds, capture.id
        self.turns_on, self.departure, self.end = turns_on, departure, end
        self.on_state, self.current = on_state, current
        self.step = capture.bus - on_state
        self.noise = capture.sigma["vds_low"]
        self.hysteresis = max(3 * self.noise, 0.01 * self.step)
        self.current_noise = capture.sigma["id_low"]
        self.known = {}

    def voltage(self, fraction, decided=True):
        key = ("v", fraction)
        if key not in self.known:
            self.known[key] = self.find_voltage(fraction)
        found, level = self.known[key]
        if found is None or not decided:
            return found
        key = ("d", fraction)
        if key not in self.known:
            self.known[key] = self.moves_back(level)
        return None if self.known[key] else found

    def find_voltage(self, fraction):
        level = self.on_state + fraction * self.step
        if not self.step > 0 or fraction * self.step <= self.hysteresis:
            return None, level
        return crossing(self.vds, level, self.hysteresis, not self.turns_on, self.departure, self.end), level

    def moves_back(self, level):
        clear = 0.02 * self.step
        if 3 * self.noise > clear:
            return False
        begin = max(1, math.ceil(self.departure))
        stop = min(len(self.vds) - 1, math.floor(self.end)) + 1
        up = not self.turns_on
        sign = 1 if up else -1
        i = first(self.vds, counts_at(level, 0, up), up, begin, stop)
        part = sign * (self.vds[i:first(self.vds, level + sign * clear, up, i, stop)] - level)
        return len(part) > 0 and bool((np.maximum.accumulate(part) - part >= self.hysteresis).any())

    def amperes(self, fraction):
        key = ("i", fraction)
        if key not in self.known:
            self.known[key] = self.find_amperes(fraction)
        return self.known[key]

    def find_amperes(self, fraction):
        if self.current is None:
            return None
        hysteresis = max(3 * self.current_noise, 0.01 * self.current)
        level = fraction * self.current
        if level <= hysteresis:
            return None
        return crossing(self.id, level, hysteresis, self.turns_on, self.departure, self.end)


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
        pair = levels(trace.values(trace.lowest, len(trace.counts)), trace.counts, noise, trace.step)
        self.sort(pair, noise, dead_time)
        begin = (self.on1.at + self.off1.at) / 2
        end = (self.off1.at + self.on2.at) / 2
        noise = sigma(gate[:int(self.on1.departure)], trace.step)
        lowest, counts = counted(trace.codes[math.ceil(begin):int(end) + 1])
        pair = levels(trace.values(lowest, len(counts)), counts, noise, trace.step)
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
        return None if modes is None else (*modes[0], extremum, period, begin, stop)

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
