"""The edges of the gate, and the crossings of one turn-on or turn-off."""

import math

import numpy as np

from samples import counts_at, crossing, crossings, first, median


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
