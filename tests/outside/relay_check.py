"""The oscillation of a relay with hysteresis around 1 / (s + 1)^3, found as the fixed point of half a period.

    relay_check.py FOUND.toml    a list of cases: hysteresis, period, amplitude, gain, first_harmonic_gain

Nothing is stepped: with the output held at +1 over half a period h the state goes from x to
e^(A h) x + A^-1 (e^(A h) - I) B, which has to be -x; h is the root of "the error is at the hysteresis there"
(Tsypkin's condition in the form of state space). The amplitude is then the largest error over the half
period, the first harmonic its Fourier integral.
"""
import math
import sys
import tomllib

import numpy
from scipy.integrate import quad
from scipy.linalg import expm
from scipy.optimize import brentq, minimize_scalar

A = numpy.array([[-1.0, 0, 0], [1, -1, 0], [0, 1, -1]])
B = numpy.array([1.0, 0, 0])
C = numpy.array([0, 0, 1.0])


def start_of(h):
    grown = expm(A * h)
    push = numpy.linalg.solve(A, (grown - numpy.eye(3)) @ B)
    return numpy.linalg.solve(numpy.eye(3) + grown, -push)


def oscillation(hysteresis):
    # error = -y rises to the hysteresis where the output turns to +1
    h = brentq(lambda h: -C @ start_of(h) - hysteresis, 0.3, 20, xtol=1e-13)
    x0 = start_of(h)
    rest = numpy.linalg.solve(A, B)

    def error(t):
        return -C @ (expm(A * t) @ (x0 + rest) - rest)

    amplitude = -minimize_scalar(lambda t: -abs(error(t)), bounds=(0, h), method="bounded",
                                 options={"xatol": 1e-10}).fun
    omega = math.pi / h
    re = quad(lambda t: error(t) * math.cos(omega * t), 0, h, epsabs=1e-11)[0] * 2 / h
    im = quad(lambda t: error(t) * math.sin(omega * t), 0, h, epsabs=1e-11)[0] * 2 / h
    return {"period": 2 * h, "amplitude": amplitude,
            "gain": 4 / (math.pi * math.sqrt(amplitude**2 - hysteresis**2)),
            "first_harmonic_gain": 4 / math.pi / math.hypot(re, im)}


def main():
    with open(sys.argv[1], "rb") as file:
        cases = tomllib.load(file)["case"]
    bad = 0
    for case in cases:
        for key, want in oscillation(case["hysteresis"]).items():
            if not math.isclose(case[key], want, rel_tol=2e-3):
                bad += 1
                print(f"hysteresis {case['hysteresis']}: {key} is {want:.6g}, found {case[key]:.6g}",
                      file=sys.stderr)
    if len(cases) < 3:
        bad += 1
        print("too few cases", file=sys.stderr)
    sys.exit(1 if bad else 0)


main()
