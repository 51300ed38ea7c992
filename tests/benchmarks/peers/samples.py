"""What a channel's samples say: noise, levels, crossings, integrals, lines, maxima. Positions are in samples; None
stands for "cannot be formed". Loops are over events; what goes over samples is a numpy call.
"""

import math

import numpy as np

TOP = 4096


class Trace:
    """One channel: its codes, its values, the smallest step between them."""

    def __init__(self, codes, increment, origin, reference):
        self.codes = codes
        self.increment, self.origin, self.reference = increment, origin, reference
        self.x = codes * increment
        self.x += origin - reference * increment
        # No step is below one code: where a part of the record shows that one, the rest need not be looked at.
        step = smallest_step(codes[:TOP])
        self.step = abs(increment) * (step if step == 1 else smallest_step(codes) or 1)

    def levels(self, begin, end, noise):
        """Low and high state of a stretch, by the modes of its histogram."""
        codes = self.codes[begin:end]
        lowest = int(codes.min())
        index = codes.astype(np.intp)
        index -= lowest
        counts = np.bincount(index)
        held = np.flatnonzero(counts)
        return levels((held + lowest - self.reference) * self.increment + self.origin, counts[held], noise, self.step)


def smallest_step(codes):
    """Smallest distance of distinct codes, 0 where there is one code only."""
    lowest, highest = int(codes.min()), int(codes.max())
    seen = np.zeros(highest - lowest + 1, np.bool_)
    seen[codes.astype(np.intp) - lowest] = True
    held = np.flatnonzero(seen)
    return int(np.diff(held).min()) if len(held) > 1 else 0


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
