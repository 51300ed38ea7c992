"""Damped cosines fitted to a ring: subspace start by a singular value decomposition, then Levenberg-Marquardt.

Model over t from 0 to 1 (the window): c + d t + sum of exp(-s t) (p cos(w t) + q sin(w t)), one to three modes; the
order is that of the shortest description. Parameters in the order c, d, (p, q) a mode, (s, w) a mode.
"""

import math

import numpy as np
from scipy.linalg import svd
from scipy.optimize import least_squares

MOST_MODES = 3
POINTS = 100  # of the start: more cost their cube and move it little
ROUGH = 1e-5
FINE = 1e-9  # the least squares are within rounding there: 1e-12 changes frequency and damping by less than 1e-9
ROUGH_STEPS = 25  # an order that has not settled by then is taken as it stands
FINE_STEPS = 60
SLOWEST_TURN = 0.1  # rad over the window: what turns slower is a bare decay
FLOOR = 1e-7


class Model:
    """Value and Jacobian of one order; the exponentials of the last parameters serve both."""

    def __init__(self, y, modes, bare=False):
        n = len(y)
        self.y, self.modes = y, modes
        self.t = np.arange(n) / n
        self.rows = np.empty((2 + 4 * modes, n))  # the Jacobian transposed: every column of it lies in one piece
        self.rows[0] = 1
        self.rows[1] = self.t
        self.at = None
        # A bare decay is the last mode without its sine and its turn.
        self.free = np.array([i for i in range(2 + 4 * modes)
                              if not (bare and i in (1 + 2 * modes, 1 + 4 * modes))])
        self.bare = bare

    def basis(self, shape):
        """The rows of the linear parameters, for s and w of each mode."""
        for k in range(self.modes):
            s, w = shape[2 * k], shape[2 * k + 1]
            e = np.exp(-s * self.t)
            angle = w * self.t
            np.multiply(e, np.cos(angle), out=self.rows[2 + 2 * k])
            np.multiply(e, np.sin(angle), out=self.rows[3 + 2 * k])
        return self.rows[: 2 + 2 * self.modes]

    def full(self, x):
        if not self.bare:
            return x
        whole = np.zeros(2 + 4 * self.modes)
        whole[self.free] = x
        return whole

    def move(self, x):
        at = x.tobytes()
        if at != self.at:
            self.at = at
            self.basis(self.full(x)[2 + 2 * self.modes:])

    def residual(self, x):
        self.move(x)
        linear = 2 + 2 * self.modes
        return self.full(x)[:linear] @ self.rows[:linear] - self.y

    def jacobian(self, x):
        self.move(x)
        x = self.full(x)
        linear = 2 + 2 * self.modes
        for k in range(self.modes):
            p, q = x[2 + 2 * k], x[3 + 2 * k]
            cosine, sine = self.rows[2 + 2 * k], self.rows[3 + 2 * k]
            np.multiply(self.t, -p * cosine - q * sine, out=self.rows[linear + 2 * k])
            np.multiply(self.t, q * cosine - p * sine, out=self.rows[linear + 2 * k + 1])
        return self.rows[self.free].T if self.bare else self.rows.T

    def start(self, shape):
        """All parameters, the linear ones by least squares at the shape."""
        basis = self.basis(shape)
        normal, right = basis @ basis.T, basis @ self.y
        if self.bare:
            normal[-1, :] = normal[:, -1] = right[-1] = 0
            normal[-1, -1] = 1
        return np.concatenate((np.linalg.solve(normal, right), shape))[self.free]

    def fit(self, x, tolerance, most):
        """Least squares to a relative tolerance."""
        return least_squares(self.residual, x, self.jacobian, method="lm", x_scale="jac",
                             ftol=max(tolerance * tolerance, 1e-14), xtol=tolerance, gtol=1e-15, max_nfev=most)


class Start:
    """Poles by the matrix pencil of the record, averaged down to a hundred points or so."""

    def __init__(self, y):
        self.n = len(y)
        self.stride = -(-self.n // POINTS)
        points = self.n // self.stride
        x = y[: points * self.stride].reshape(points, self.stride).mean(axis=1) if self.stride > 1 else y
        rows = points // 3
        hankel = np.lib.stride_tricks.sliding_window_view(x, points - rows + 1).copy()
        # A constant and a slope are taken out of every row: that leaves the poles as they are.
        line = np.arange(hankel.shape[1]) - (hankel.shape[1] - 1) / 2
        hankel -= hankel.mean(axis=1, keepdims=True)
        hankel -= np.outer(hankel @ line / (line @ line), line)
        self.vectors = svd(hankel, full_matrices=False, check_finite=False, overwrite_a=True)[0]

    def poles(self, count):
        u = self.vectors[:, :count]
        z = np.linalg.eigvals(np.linalg.lstsq(u[:-1], u[1:], rcond=None)[0])
        turning = z[(z.imag > 1e-7) & (abs(z) > 1e-6)]
        still = z.real[(abs(z.imag) <= 1e-7) & (z.real > 1e-6)]
        return turning, still

    def shape(self, modes):
        """s and w of each mode in window units, and whether the last is a bare decay; None: too few."""
        if 2 * modes > self.vectors.shape[0] - 2:
            return None
        scale = self.n / self.stride
        z, _ = self.poles(2 * modes)
        bare = len(z) < modes
        if bare:
            z, still = self.poles(2 * modes - 1)
            if len(z) != modes - 1 or len(still) == 0:
                return None
            z = np.append(z, still.max())
        z = z[:modes]
        shape = np.empty(2 * modes)
        shape[0::2] = -np.log(abs(z)) * scale
        shape[1::2] = np.angle(z) * scale
        return shape, bare


def detrended(samples):
    """Scaled to 1, its line taken out; also the scale."""
    scale = np.abs(samples).max()
    n = len(samples)
    y = samples / scale
    centred = np.arange(n) - (n - 1) / 2
    y -= y.mean()
    y -= centred @ y / (n * (n * n - 1.0) / 12) * centred
    return y, scale


def fit(samples, dt, most=MOST_MODES):
    """The modes as (frequency, damping, amplitude), strongest ringing first; None where there is no ring."""
    n = len(samples)
    most = min(most, (n // 4 - 2) // 4)
    if most < 1:
        return None
    y, scale = detrended(samples)
    whole = y @ y
    start = Start(y)
    log_n = math.log(n)
    shortest = n * math.log(math.sqrt(whole / n)) + log_n
    fits = []
    for modes in range(1, most + 1):
        shape = start.shape(modes)
        if shape is None:
            continue
        model, found = settled(y, modes, *shape)
        rms = math.sqrt(2 * found.cost / n)
        length = n * math.log(max(rms, FLOOR * math.sqrt(whole / n))) + (2 + 4 * modes) / 2 * log_n
        if length < shortest:
            shortest = length
            fits.append((model, found))
        elif fits:
            break
    for model, found in reversed(fits):
        found = model.fit(found.x, FINE, FINE_STEPS)
        if found.status <= 0 or 2 * found.cost > whole / 2:
            continue
        modes = described(model, found, n, dt, scale)
        if modes is not None:
            return modes
    return None


def settled(y, modes, shape, bare):
    """The rough fit of an order. A mode that stops turning is a bare decay and starts again as one: with its sine left
    in, its amplitudes and its decay could not be told apart."""
    model = Model(y, modes, bare)
    found = model.fit(model.start(shape), ROUGH, ROUGH_STEPS)
    if bare:
        return model, found
    shape = found.x[2 + 2 * modes:].reshape(modes, 2)
    slow = int((shape[:, 1] / np.abs(shape[:, 0])).argmin())
    if shape[slow, 1] >= SLOWEST_TURN and (found.status > 0 or shape[slow, 1] >= shape[slow, 0]):
        return model, found
    shape = np.concatenate((np.delete(shape, slow, axis=0), [[shape[slow, 0], 0]])).ravel()
    decay = Model(y, modes, True)
    again = decay.fit(decay.start(shape), ROUGH, ROUGH_STEPS)
    return (decay, again) if again.cost < found.cost or found.status <= 0 else (model, found)


def described(model, found, n, dt, scale):
    """Modes with their believability: each beyond 3 of its own uncertainties, 1/T apart, decaying, two periods."""
    residual = found.fun
    squares = residual @ residual
    factor = 1.0
    for lag in range(1, n):
        product = residual[:-lag] @ residual[lag:]
        if not product > 0:
            break
        factor += 2 * product / squares
    jacobian = model.jacobian(found.x)
    covariance = np.linalg.inv(jacobian.T @ jacobian) * (squares / (n - len(found.x)) * factor)
    x = model.full(found.x)
    window = n * dt
    linear = 2 + 2 * model.modes
    modes = []
    for k in range(model.modes - (1 if model.bare else 0)):
        p, q = x[2 + 2 * k], x[3 + 2 * k]
        s, w = x[linear + 2 * k], abs(x[linear + 2 * k + 1])
        if not s > 1e-9:
            return None
        amplitude = math.hypot(p, q)
        g = np.array([p, q]) / amplitude
        at = 2 + 2 * k
        if not amplitude >= 3 * math.sqrt(g @ covariance[at:at + 2, at:at + 2] @ g):
            return None
        modes.append((w / (2 * math.pi * window), s / math.hypot(s, w), scale * amplitude, s / window))
    modes.sort(key=lambda m: (m[1] >= 0.3, -m[2] * m[2] / m[3]))
    for i in range(len(modes)):
        for j in range(i):
            if abs(modes[i][0] - modes[j][0]) < 1 / window:
                return None
    if not modes or modes[0][1] >= 0.3 or modes[0][0] * window < 2:
        return None
    return [m[:3] for m in modes]


def envelope(samples, dt, period):
    """One damped cosine through the first periods: frequency, decay, amplitude at the first sample; None: none."""
    if len(samples) < 24:
        return None
    y, scale = detrended(samples)
    n = len(y)
    model = Model(y, 1)
    turn = 2 * math.pi / period * n
    found = model.fit(model.start(np.array([0.05 * turn, turn])), FINE, FINE_STEPS)
    p, q, s, w = found.x[2:]
    if not (0 < s < w) or 2 * found.cost >= y @ y / 2:
        return None
    window = n * dt
    return w / (2 * math.pi * window), s / window, scale * math.hypot(p, q)
