"""Holds the linear loop against SciPy and NumPy on the same scenarios.

    theory_check.py CASE.toml...     beside each CASE.toml lies CASE.toml.found, the figures to be checked

Nothing is shared with the engine but the scenario text. The sensors' slope comes from numerical integration
of the spot over the line; the vehicle from scipy.signal.cont2discrete (zero-order hold) over the two parts of
a period; the closed loop from stepping the law as a programmer writes it on unit vectors, which gives its
state matrix. Poles are that matrix's eigenvalues; gain margins are the factors at which its spectral radius
is 1; phase margin, delay margin and sensitivity come from the open loop's C (zI - A)^-1 B.
"""
import math
import sys
import tomllib

import numpy
from scipy.integrate import quad
from scipy.optimize import brentq, minimize_scalar
from scipy.signal import cont2discrete


def dark_share(x, half_width, radius):
    """Share of a disc around x that lies within the line, by quadrature over chords."""
    low, high = max(-half_width - x, -radius), min(half_width - x, radius)
    if high <= low:
        return 0.0
    # over the angle, so that no square root meets the rim
    low, high = math.asin(max(low / radius, -1)), math.asin(min(high / radius, 1))
    return quad(lambda a: 2 * math.cos(a) ** 2, low, high, epsabs=1e-14, epsrel=1e-13)[0] / math.pi


class Sensors:
    def __init__(self, scenario):
        s = self.s = scenario.get("sensors", {})
        self.scheme = s.get("scheme", "pair")
        self.lateral = [1e-3 * x for x in s.get("lateral_mm", [10.0, -10.0])]
        self.radius = 0.5e-3 * s.get("spot_mm", 8.0)
        self.half_width = 0.5e-3 * scenario["course"].get("line_mm", 20.0)
        self.black, self.white = s.get("black_pct", 10.0) / 100, s.get("white_pct", 90.0) / 100
        count = len(self.lateral)
        self.gain, self.offset = s.get("gain", [1.0] * count), s.get("offset_pct", [0.0] * count)

    def error(self, d):
        readings = []
        for lateral, gain, offset in zip(self.lateral, self.gain, self.offset):
            bright = 1 - dark_share(d + lateral, self.half_width, self.radius)
            readings.append(self.black + gain * (self.white - self.black) * bright + offset / 100)
        if self.scheme == "pair":
            left = 0 if self.lateral[0] > self.lateral[1] else 1
            return readings[1 - left] - readings[left]
        if self.scheme == "edge":
            target = self.s.get("target_pct", 50.0) / 100
            return (target - readings[0]) * (1 if self.s.get("edge", "left") == "left" else -1)
        dark = [max(0, self.white - reading) / (self.white - self.black) for reading in readings]
        return 1e3 * sum(a * b for a, b in zip(dark, self.lateral)) / sum(dark)

    def slope(self):
        at, step = 0.0, 1e-3 * self.radius
        if abs(self.error(0.0)) > 1e-9:  # the nearest place that is held, out to either side
            for k in range(2000):
                places = [(k * step * 8, (k + 1) * step * 8), (-(k + 1) * step * 8, -k * step * 8)]
                hit = [p for p in places if self.error(p[0]) > 0 >= self.error(p[1])]
                if hit:
                    at = brentq(self.error, *hit[0], xtol=1e-15)
                    break
        difference = lambda h: (self.error(at - h) - self.error(at + h)) / (2 * h)
        return (4 * difference(step) - difference(2 * step)) / 3  # Richardson


class Loop:
    def __init__(self, scenario):
        vehicle, sensors = scenario.get("vehicle", {}), scenario.get("sensors", {})
        law = scenario.get("controller", {})
        self.period = scenario.get("loop", {}).get("period_ms", 5.5) / 1000
        left, right = vehicle.get("wheel_left_mm", 60.0) / 2000, vehicle.get("wheel_right_mm", 60.0) / 2000
        track = vehicle.get("track_width_mm", 140.0) / 1000
        dead = vehicle.get("dead_band_pct", 0.0) / 100
        full = vehicle.get("top_speed_rpm", 220.0) * 2 * math.pi / 60 * vehicle.get("supply_pct", 100.0) / 100
        per_command = full / (1 - dead)
        base = law.get("base_pct", 40.0) / 100
        # Straight on: both rims equally fast while the mean wheel speed is the base's.
        self.speed = 2 * left * right / (left + right) * per_command * (base - dead)
        yaw = (left + right) / track * per_command
        turn = vehicle.get("turn_time_constant_ms", 60.0) / 1000
        if turn > 0:
            a = numpy.array([[0, self.speed, 0], [0, 0, 1], [0, 0, -1 / turn]])
            b = numpy.array([[0], [0], [yaw / turn]])
        else:
            a, b = numpy.array([[0, self.speed], [0, 0]]), numpy.array([[0], [yaw]])
        self.order = len(a)
        self.guide = numpy.array([1, sensors.get("forward_mm", 70.0) / 1000, 0][: self.order])
        delay = vehicle.get("command_delay_ms", 0.0) / 1000
        self.waiting = int(delay / self.period + 1e-9)
        self.parts = []
        for h, age in ((delay - self.waiting * self.period, self.waiting + 1), (None, self.waiting)):
            h = self.period - sum(p[3] for p in self.parts) if h is None else h
            if h < 1e-12:
                continue
            ad, bd, *_ = cont2discrete((a, b, self.guide[None, :], numpy.zeros((1, 1))), h, "zoh")
            self.parts.append((ad, bd[:, 0], age, h))
        self.slope = Sensors(scenario).slope()
        self.lag_share = self.period / (self.period + sensors.get("lag_ms", 0.0) / 1000)
        self.filter_share = self.period / (self.period + law.get("derivative_filter_ms", 0.0) / 1000)
        self.kp, self.ki, self.kd = law.get("kp", 0.3), law.get("ki", 0.0), law.get("kd", 0.0)
        if law.get("gains", "per_loop") == "per_second":
            self.ki, self.kd = self.ki * self.period, self.kd / self.period

    def size(self):
        return self.order + self.waiting + 1 + 4  # pose, commands before, low-pass, I, error before, D

    def step(self, state, extra, gain, closed, p_alone):
        """One loop. Returns the next state and the error read; `extra` is added to the error."""
        pose, queue = state[: self.order], list(state[self.order : self.order + self.waiting + 1])
        low, integral, before, derivative = state[self.order + self.waiting + 1 :]
        read = -self.slope * (self.guide @ pose)
        error = (gain * read if closed else 0.0) + extra
        low = low + self.lag_share * (error - low)
        kp, ki, kd = (1.0, 0.0, 0.0) if p_alone else (self.kp, self.ki, self.kd)
        integral += ki * low
        derivative += self.filter_share * (kd * (low - before) - derivative)
        queue = [kp * low + integral + derivative] + queue
        for ad, bd, age, _ in self.parts:
            pose = ad @ pose + bd * queue[age]
        return numpy.concatenate([pose, queue[: self.waiting + 1], [low, integral, low, derivative]]), read

    def matrix(self, gain=1.0, closed=True, p_alone=False):
        return numpy.array([self.step(e, 0.0, gain, closed, p_alone)[0] for e in numpy.eye(self.size())]).T

    def radius(self, gain, p_alone=False):
        """Largest |z|. States that stand for a term that is off (I at rest) stay at 1 and do not count."""
        keep = numpy.ones(self.size(), bool)
        if p_alone or self.ki == 0:
            keep[-3] = False
        return max(abs(numpy.linalg.eigvals(self.matrix(gain, True, p_alone)[numpy.ix_(keep, keep)])))

    def edges(self, p_alone=False):
        """Factors at which the spectral radius passes 1."""
        grid = numpy.geomspace(1e-3, 1e3, 400)
        values = [self.radius(g, p_alone) - 1 for g in grid]
        return [brentq(lambda g: self.radius(g, p_alone) - 1, grid[i], grid[i + 1], xtol=1e-13)
                for i in range(len(grid) - 1) if (values[i] < 0) != (values[i + 1] < 0)]

    def open_loop(self):
        a = self.matrix(closed=False)
        b = self.step(numpy.zeros(self.size()), 1.0, 1.0, False, False)[0]
        c = numpy.array([self.step(e, 0.0, 1.0, False, False)[1] for e in numpy.eye(self.size())])
        identity = numpy.eye(self.size())
        return lambda w: -c @ numpy.linalg.solve(numpy.exp(1j * w * self.period) * identity - a, b)


def figures(scenario):
    loop, found = Loop(scenario), {}
    found["slope"], found["speed"] = loop.slope, loop.speed
    alone = loop.edges(p_alone=True)
    if alone:
        found["critical_gain"] = alone[-1]
        values = numpy.linalg.eigvals(loop.matrix(alone[-1], True, True))
        turning = [abs(numpy.angle(z)) for z in values if abs(abs(z) - 1) < 1e-6]  # I at rest does not turn
        found["critical_period"] = 2 * math.pi * loop.period / max(turning)
    found["stable"] = loop.radius(1.0) < 1
    edges = loop.edges()
    if found["stable"]:
        above, below = [g for g in edges if g > 1], [g for g in edges if g < 1]
        if above:
            found["gain_high"] = min(above)
        if below:
            found["gain_low"] = max(below)
    response = loop.open_loop()
    grid = numpy.geomspace(1e-3 / loop.period, math.pi / loop.period, 3000)
    values = numpy.array([response(w) for w in grid])
    crossings = [brentq(lambda w: math.log(abs(response(w))), grid[i], grid[i + 1], xtol=1e-12)
                 for i in range(len(grid) - 1) if (abs(values[i]) > 1) != (abs(values[i + 1]) > 1)]
    phases = [numpy.angle(-response(w)) for w in crossings]
    if phases:
        found["phase"] = min(phases, key=abs)
    if found["stable"]:
        if phases:
            found["delay"] = min((p if p >= 0 else p + 2 * math.pi) / w for p, w in zip(phases, crossings))
        i = int(numpy.argmin(abs(1 + values)))
        near = minimize_scalar(lambda w: abs(1 + response(w)), bounds=(grid[i - 1], grid[min(i + 1, 2999)]),
                               method="bounded", options={"xatol": 1e-9})
        found["sensitivity_peak"] = 1 / min(near.fun, abs(1 + values[i]))
    found["poles"] = numpy.linalg.eigvals(loop.matrix())
    return found


def check(path):
    with open(path, "rb") as file:
        expected = figures(tomllib.load(file))
    with open(path + ".found", "rb") as file:
        found = tomllib.load(file)
    worst = 0.0
    for key, value in expected.items():
        if key == "poles":
            # every pole of the engine is one of the matrix, and every one of the matrix one of the engine's,
            # but for z = 0 and the z = 1 of a term that is off
            ours = [complex(*pole) for pole in found["poles"]]
            far = [min(abs(pole - z) for z in value) for pole in ours]
            far += [min(abs(pole - z) for pole in ours) for z in value if 2e-3 < abs(z) and abs(z - 1) > 1e-9]
            if max(far) > 1e-6:
                sys.exit(f"{path}: a pole is {max(far):g} away from any other")
            worst = max(worst, max(far))
            continue
        if key not in found:
            sys.exit(f"{path}: {key} is {value}, and was not found")
        if key == "stable":
            if value != found[key]:
                sys.exit(f"{path}: stable differs")
            continue
        away = abs(found[key] - value) / abs(value)
        worst = max(worst, away)
        if away > 2e-6:
            sys.exit(f"{path}: {key} is {value!r}, found {found[key]!r}")
    extra = set(found) - set(expected)
    if extra:
        sys.exit(f"{path}: found {extra}, which there is not")
    return worst


if __name__ == "__main__":
    worst = max(check(path) for path in sys.argv[1:])
    print(f"ok {len(sys.argv) - 1} loops, largest relative difference {worst:.2g}")
