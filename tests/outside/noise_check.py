"""Holds the noise on steer and deviation against SciPy's discrete Lyapunov equation.

    noise_check.py CASE.toml...     beside each CASE.toml lies CASE.toml.noise, the figures to be checked

The closed loop is the state matrix that theory_check.py gets by stepping the law as a programmer writes it.
White noise on the error has the steady covariance P of P = A P A' + b b' (Astrom and Wittenmark,
"Computer-Controlled Systems", chapter on stochastic systems), by scipy.linalg.solve_discrete_lyapunov. Its
variance is summed over the sensors here as well, by difference quotients of the error. Cases have no refresh.
"""
import math
import sys
import tomllib

sys.dont_write_bytecode = True  # the source tree stays as it is

import numpy
from scipy.integrate import quad
from scipy.linalg import solve_discrete_lyapunov

from theory_check import Loop, Sensors, dark_share


def error_variance(scenario):
    """Of the error, with a variance of 1 of every reading."""
    sensors = scenario.get("sensors", {})
    scheme = sensors.get("scheme", "pair")
    if scheme != "bar":
        return {"edge": 1.0, "pair": 2.0}[scheme]
    geometry, step, total = Sensors(scenario), 1e-6, 0.0
    for i, dark in enumerate(darkness(geometry)):
        above = centroid(geometry, step, i) if dark > 0 else centroid(geometry, 0.0, i)
        slope = (above - centroid(geometry, -step, i)) / (2 * step if dark > 0 else step)
        # a sensor that sees no line has darkness max(0, -noise)
        total += slope**2 * (1 if dark > 0 else quad(normal, 0, 9)[0] - quad(half, 0, 9)[0] ** 2)
    return total


def half(x):
    return x * math.exp(-x * x / 2) / math.sqrt(2 * math.pi)


def normal(x):
    return x * half(x)


def darkness(geometry, shift=0.0, which=-1):
    dark = []
    for i, lateral in enumerate(geometry.lateral):
        bright = 1 - dark_share(lateral, geometry.half_width, geometry.radius)
        reading = geometry.black + (geometry.white - geometry.black) * bright + (shift if i == which else 0)
        dark.append(max(0, geometry.white - reading) / (geometry.white - geometry.black))
    return dark


def centroid(geometry, shift, which):
    dark = darkness(geometry, shift, which)
    return 1e3 * sum(a * b for a, b in zip(dark, geometry.lateral)) / sum(dark)


def deviations(scenario, behind_low_pass):
    loop = Loop(scenario)
    zero = numpy.zeros(loop.size())
    if behind_low_pass:
        loop.lag_share, low_pass = 1.0, loop.lag_share
        assert low_pass == 1.0, "cases with rounding have no low-pass"
    drive = loop.step(zero, 1.0, 1.0, True, False)[0]
    matrix = loop.matrix()
    keep = numpy.ones(loop.size(), bool)
    if loop.ki == 0:
        keep[-3] = False
    matrix, drive = matrix[numpy.ix_(keep, keep)], drive[keep]
    covariance = solve_discrete_lyapunov(matrix, numpy.outer(drive, drive))
    guide = numpy.zeros(len(drive))
    guide[: loop.order] = loop.guide
    return math.sqrt(covariance[loop.order, loop.order]), math.sqrt(guide @ covariance @ guide)


def check(path):
    with open(path, "rb") as file:
        scenario = tomllib.load(file)
    with open(path + ".noise", "rb") as file:
        found = tomllib.load(file)
    sensors = scenario.get("sensors", {})
    unit = math.sqrt(error_variance(scenario))
    noise = unit * sensors.get("noise_pct", 0.0) / 100
    rounding = unit * sensors.get("step_pct", 1.0) / 100 / math.sqrt(12)
    steer, moved = deviations(scenario, False)
    expected = {"from_readings": noise * steer}
    if rounding > 0:
        rounded, moved_rounded = deviations(scenario, True)
        expected["from_rounding"] = rounding * rounded
        expected["deviation"] = math.hypot(noise * moved, rounding * moved_rounded)
        expected["steer"] = math.hypot(noise * steer, rounding * rounded)
    else:
        expected["deviation"], expected["steer"] = noise * moved, noise * steer
    worst = 0.0
    for key, value in expected.items():
        off = abs(found[key] / value - 1)
        worst = max(worst, off)
        if off > 1e-4:
            sys.exit(f"{path}: {key} is {found[key]:.9g}, SciPy has {value:.9g}")
    return worst


if __name__ == "__main__":
    apart = max(check(path) for path in sys.argv[1:])
    print(f"ok {len(sys.argv) - 1} loops, largest relative difference {apart:.2g}")
