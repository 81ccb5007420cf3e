#!/usr/bin/env python3
"""Holds courses and floors against SciPy.

  course_check.py NUMBERS

NUMBERS is a JSON file written by course_test.cpp:
  splines  each: points (m), closed, nodes as [x, y, tangent x, tangent y], length (m)
           against scipy.interpolate.CubicSpline over the chord length: the nodes lie on it at even arc length
  strips   [distance, half-width, radius, share] against the area under the chord length, scipy.integrate.quad
  ellipse  [a, b, length] against 4 a E(m), scipy.special.ellipe
Prints "ok N checks", or what does not agree and exit code 1; 2 for a wrong call.
"""
import json
import sys

import numpy as np
from scipy.integrate import quad
from scipy.interpolate import CubicSpline
from scipy.special import ellipe


def spline_misfit(case):
    """Largest misfit of place (m), tangent and length (m) from SciPy's spline at even arc length."""
    points = np.array(case["points"] + case["points"][:1] if case["closed"] else case["points"])
    knots = np.concatenate([[0.0], np.cumsum(np.hypot(*np.diff(points, axis=0).T))])
    spline = CubicSpline(knots, points, bc_type="periodic" if case["closed"] else "natural")

    def arc(a, b):
        return quad(lambda t: np.hypot(*spline(t, 1)), a, b, epsabs=1e-13, epsrel=1e-13)[0]

    fine = np.concatenate([np.linspace(a, b, 40, endpoint=False) for a, b in zip(knots, knots[1:])])
    fine = np.append(fine, knots[-1])
    lengths = np.concatenate([[0.0], np.cumsum([arc(a, b) for a, b in zip(fine, fine[1:])])])
    nodes = np.array(case["nodes"])
    intervals = len(nodes) if case["closed"] else len(nodes) - 1
    s = np.arange(len(nodes)) * lengths[-1] / intervals
    t = np.interp(s, lengths, fine)
    for _ in range(3):  # Newton, with the length from the sample below
        below = np.clip(np.searchsorted(fine, t, side="right") - 1, 0, len(fine) - 2)
        gauss, weight = np.polynomial.legendre.leggauss(8)
        half = 0.5 * (t - fine[below])
        at = fine[below] + half + np.outer(gauss, half)
        speed = np.hypot(*np.moveaxis(spline(at, 1), -1, 0))
        t = t - (lengths[below] + half * (weight @ speed) - s) / np.hypot(*spline(t, 1).T)
    tangent = spline(t, 1)
    tangent /= np.hypot(*tangent.T)[:, None]
    return (np.hypot(*(nodes[:, :2] - spline(t)).T).max(), np.hypot(*(nodes[:, 2:] - tangent).T).max(),
            abs(case["length"] - lengths[-1]))


def main():
    if len(sys.argv) != 2:
        print(__doc__, file=sys.stderr)
        return 2
    with open(sys.argv[1], encoding="utf-8") as file:
        numbers = json.load(file)
    checks = 0
    bad = []

    def check(name, value, bound):
        nonlocal checks
        checks += 1
        if not value <= bound:
            bad.append(f"{name}: {value:.3g}, bound {bound:.3g}")

    for i, case in enumerate(numbers["splines"]):
        place, tangent, length = spline_misfit(case)
        check(f"spline {i}: place (m)", place, 1e-8)
        check(f"spline {i}: tangent", tangent, 1e-6)
        check(f"spline {i}: length (m)", length, 1e-8)
    for distance, half_width, radius, share in numbers["strips"]:
        low, high = (np.clip(distance + side * half_width, -radius, radius) for side in (-1, 1))
        # x = r sin(a) takes the square root out of the chord length
        ends = np.arcsin(low / radius), np.arcsin(high / radius)
        area = quad(lambda a: 2 * radius**2 * np.cos(a) ** 2, *ends)[0]
        check(f"strip {distance} {half_width} {radius}", abs(area / (np.pi * radius**2) - share), 1e-12)
    a, b, length = numbers["ellipse"]
    check("ellipse (m)", abs(4 * a * ellipe(1 - (b / a) ** 2) - length), 1e-7)
    if bad or not numbers["splines"] or not numbers["strips"]:
        print("\n".join(bad) or "nothing to check")
        return 1
    print(f"ok {checks} checks")
    return 0


if __name__ == "__main__":
    sys.exit(main())
