"""One drive worked out a second time, from the description of the model alone, to hold the engine against.

    reference_drive.py SCENARIO.toml [KEY=VALUE ...]        prints one JSON object

Nothing here is shared with the engine: the floor is no raster (the share of line under a spot is an area in
closed form on straights and arcs, and a quadrature over the disc elsewhere), points of the plane are complex
numbers, drawn courses come from SciPy's CubicSpline. Lengths are in mm, times in s, angles in rad, commands
and readings as fractions.
Noise, texture and jitter are random and therefore left out: a scenario that asks for them is refused.
"""
import cmath
import json
import math
import sys
import tomllib
from dataclasses import dataclass

import numpy as np

DEFAULTS = {
    "vehicle": dict(track_width_mm=140.0, wheel_left_mm=60.0, wheel_right_mm=60.0, top_speed_rpm=220.0,
                    supply_pct=100.0, forward_time_constant_ms=80.0, turn_time_constant_ms=60.0,
                    dead_band_pct=0.0, command_step_pct=1.0, command_delay_ms=0.0, grip=0.0),
    "loop": dict(period_ms=5.5, jitter_pct=0.0),
    "sensors": dict(scheme="pair", forward_mm=70.0, lateral_mm=[10.0, -10.0], spot_mm=8.0, black_pct=10.0,
                    white_pct=90.0, noise_pct=0.0, step_pct=1.0, gain=[], offset_pct=[], refresh_ms=0.0,
                    lag_ms=0.0, edge="left", target_pct=50.0),
    "controller": dict(base_pct=40.0, kp=0.3, ki=0.0, kd=0.0, gains="per_loop", derivative_filter_ms=0.0,
                       integral_limit_pct=100.0, steer_limit_pct=100.0, ease=0.0),
    "course": dict(line_mm=20.0, closed=True, start_mm=[0.0, 0.0], heading_deg=0.0, pieces=[], points_mm=[],
                   corners=[], gaps_mm=[]),
    "floor": dict(texture_pct=0.0, texture_mm=80.0, light_pct_per_m=[0.0, 0.0], seed=1),
    "drive": dict(laps=1, time_limit_s=60.0, lost_mm=60.0, start_offset_mm=0.0, start_heading_deg=0.0,
                  seed=1),
}
GRAVITY = 9806.65                # mm/s^2
SAME_TIME = 1e-9                 # s; instants closer than this are one instant
SEEN = 0.2                       # least darkness at which a sensor of a bar sees the line
NODES, WEIGHTS = np.polynomial.legendre.leggauss(5)
NODES, WEIGHTS = (NODES + 1) / 2, WEIGHTS / 2


# ---- scenario ------------------------------------------------------------------------------------

def load(text, overrides=()):
    """The scenario as nested dictionaries, defaults filled in; overrides are "table.key=value" in TOML."""
    given = tomllib.loads(text)
    scenario = {table: {**keys, **given.get(table, {})} for table, keys in DEFAULTS.items()}
    for override in overrides:
        name, value = override.split("=", 1)
        table, key = name.split(".")
        if key not in scenario[table]:
            raise SystemExit(f"no such key: {name}")
        scenario[table][key] = tomllib.loads("value = " + value)["value"]
    for table, key in (("sensors", "noise_pct"), ("floor", "texture_pct"), ("loop", "jitter_pct")):
        if scenario[table][key] != 0:
            raise SystemExit(f"{table}.{key} is random and not part of this reference: set it to 0")
    return scenario


# ---- course --------------------------------------------------------------------------------------

@dataclass
class Piece:
    """A straight (curvature 0) or arc. Cut ends are square, as tape is; others round, to fill corners."""
    start: complex
    heading: float
    curvature: float             # 1/mm, left positive
    length: float
    station: float = 0.0         # of its start, along the centreline
    cut_start: bool = False
    cut_end: bool = False

    def local(self, t):
        """The point at t along the piece, seen from its start along its heading."""
        turn = 1j * self.curvature
        return t + 0j if turn == 0 else (cmath.exp(turn * t) - 1) / turn

    def point(self, t):
        return self.start + self.local(t) * cmath.exp(1j * self.heading)

    def part(self, begin, end, cut_start, cut_end):
        return Piece(self.point(begin), self.heading + self.curvature * begin, self.curvature, end - begin,
                     self.station + begin, cut_start, cut_end)


def locate(piece, point):
    """Nearest place t on the piece, and the point seen from there: real ahead, imaginary to the left.

    Works for one complex number and for an array of them. Only off the piece's ends has it a real part.
    """
    k, half = piece.curvature, piece.length / 2
    seen = (point - piece.start) * cmath.exp(-1j * piece.heading)
    if k == 0:
        t = np.clip(seen.real, 0.0, piece.length)
        return t, seen - t
    turned = (1 + 1j * k * seen) * cmath.exp(-1j * k * half)  # from the centre, 0 rad at the arc's middle
    t = np.clip(half + np.arctan2(turned.imag, turned.real) / k, 0.0, piece.length)
    turn = np.exp(1j * k * t)
    return t, (seen - (turn - 1) / (1j * k)) / turn


def pieces_of(course):
    """The pieces of a course as laid out, without stations."""
    place, heading = complex(*course["start_mm"]), math.radians(course["heading_deg"])
    pieces = []
    for entry in course["pieces"]:
        if "straight_mm" in entry:
            piece = Piece(place, heading, 0.0, entry["straight_mm"])
        else:
            turn, radius = math.radians(entry["turn_deg"]), entry["radius_mm"]
            if radius == 0:
                heading += turn                                   # a sharp corner
                continue
            piece = Piece(place, heading, math.copysign(1 / radius, turn), radius * abs(turn))
        pieces.append(piece)
        place, heading = piece.point(piece.length), heading + piece.curvature * piece.length
    return pieces


def arc_through(a, middle, b):
    """The arc (or straight) from a through middle to b."""
    chord = b - a
    cross = ((middle - a).conjugate() * chord).imag
    curvature = 2 * cross / (abs(middle - a) * abs(b - middle) * abs(chord))
    if abs(curvature) < 1e-7:
        return Piece(a, cmath.phase(chord), 0.0, abs(chord))
    half_turn = math.asin(curvature * abs(chord) / 2)
    return Piece(a, cmath.phase(chord) - half_turn, curvature, 2 * half_turn / curvature)


def drawn_section(knots, periodic):
    """Arcs of about 5 mm along a cubic spline over chord length; a list of pieces from knot to knot."""
    from scipy.interpolate import CubicSpline
    at = np.concatenate([[0.0], np.cumsum(np.abs(np.diff(knots)))])
    ends = "periodic" if periodic else "natural"
    spline = CubicSpline(at, np.array([knots.real, knots.imag]), axis=1, bc_type=ends)
    sections = []
    for begin, end in zip(at, at[1:]):
        steps = 2 * max(1, round((end - begin) / 5.0))
        x, y = spline(np.linspace(begin, end, steps + 1))
        z = [complex(*p) for p in zip(x, y)]
        sections.append([arc_through(*z[i:i + 3]) for i in range(0, steps, 2)])
    return sections


def drawn(course):
    """The pieces of a course of drawn points: places of the floor, which start and heading do not move."""
    points = [complex(*p) for p in course["points_mm"]]
    closed, count = course["closed"], len(course["points_mm"])
    sharp = sorted(set(course["corners"]))
    if closed and not sharp:
        return sum(drawn_section(np.array(points + points[:1]), True), [])
    if closed:
        breaks = sharp + [sharp[0] + count]
    else:
        breaks = sorted({0, *sharp, count - 1})
    after = {}
    for begin, end in zip(breaks, breaks[1:]):
        knots = np.array([points[i % count] for i in range(begin, end + 1)])
        for i, section in enumerate(drawn_section(knots, False)):
            after[(begin + i) % count] = section
    return sum((after[i] for i in sorted(after)), [])


def centreline(course):
    """All pieces with their stations, and the whole length."""
    pieces, station = (drawn(course) if course["points_mm"] else pieces_of(course)), 0.0
    for piece in pieces:
        piece.station = station
        station += piece.length
    return pieces, station


def inked(pieces, gaps, closed):
    """What is left of the pieces outside the gaps."""
    ink = []
    for index, piece in enumerate(pieces):
        spans = [(0.0, piece.length, not closed and index == 0, not closed and index == len(pieces) - 1)]
        for gap_begin, gap_end in gaps:
            begin, end, rest = gap_begin - piece.station, gap_end - piece.station, []
            for span in spans:
                if end <= span[0] or begin >= span[1]:
                    rest.append(span)
                    continue
                if begin > span[0]:
                    rest.append((span[0], begin, span[2], True))
                if end < span[1]:
                    rest.append((end, span[1], True, span[3]))
            spans = rest
        ink += [piece.part(*span) for span in spans]
    return ink


# ---- floor ---------------------------------------------------------------------------------------

def half_disc(x):
    """Share of a disc of radius 1 that lies below x."""
    x = min(1.0, max(-1.0, x))
    return (math.acos(-x) + x * math.sqrt(1 - x * x)) / math.pi


def lens(circle, spot, distance):
    """Share of the disc of radius `spot` inside a circle whose centre is `distance` away."""
    if distance >= circle + spot:
        return 0.0
    if distance <= abs(circle - spot):
        return 1.0 if circle >= spot else (circle / spot) ** 2
    a = math.acos((distance ** 2 + spot ** 2 - circle ** 2) / (2 * distance * spot))
    b = math.acos((distance ** 2 + circle ** 2 - spot ** 2) / (2 * distance * circle))
    area = spot ** 2 * (a - math.sin(2 * a) / 2) + circle ** 2 * (b - math.sin(2 * b) / 2)
    return area / (math.pi * spot ** 2)


def strip_under(spot, lateral, half_width, curvature):
    """Share of a spot under one long strip, straight or bent."""
    if abs(curvature) < 1e-5:
        return half_disc((half_width - lateral) / spot) - half_disc((-half_width - lateral) / spot)
    radius, distance = 1 / abs(curvature), abs(1 - curvature * lateral) / abs(curvature)
    inner = lens(radius - half_width, spot, distance) if radius > half_width else 0.0
    return lens(radius + half_width, spot, distance) - inner


def disc_points(rings):
    """Middles of cells of equal area in a disc of radius 1: one, and 6, 12, 18 ... around it."""
    points = [0j]
    for ring in range(1, rings):
        count = 6 * ring
        points += [ring * cmath.exp(2j * math.pi * (i + 0.5) / count) for i in range(count)]
    return np.array(points) / (rings - 0.5)


class Floor:
    """Brightness under a spot, from the pieces that carry ink."""
    CELLS = disc_points(12)

    def __init__(self, ink, line, spot):
        self.ink, self.half_width, self.spot = ink, line / 2, max(spot, 1e-3) / 2
        self.middle = np.array([p.point(p.length / 2) for p in ink])
        self.reach = np.array([p.length / 2 for p in ink]) + self.half_width + self.spot

    def brightness(self, place):
        near = []
        for index in np.nonzero(np.abs(self.middle - place) < self.reach)[0]:
            piece = self.ink[index]
            t, seen = locate(piece, place)
            if abs(seen) < self.half_width + self.spot:
                near.append((piece, t, seen))
        if not near:
            return 1.0
        piece, t, seen = near[0]
        if len(near) == 1 and self.spot <= t <= piece.length - self.spot:
            return 1 - strip_under(self.spot, float(seen.imag), self.half_width, piece.curvature)
        return 1 - self.union_under(place, [piece for piece, _, _ in near])

    def union_under(self, place, pieces):
        """By quadrature: each cell counts in proportion to how far the edge of the line crosses it."""
        points = place + self.spot * self.CELLS
        cell = self.spot * math.sqrt(math.pi / len(points))
        outside = np.full(len(points), np.inf)
        for piece in pieces:
            _, seen = locate(piece, points)
            distance = np.abs(seen) - self.half_width
            flat = np.maximum(np.abs(seen.imag) - self.half_width, np.abs(seen.real))
            square = (piece.cut_start & (seen.real < -1e-9)) | (piece.cut_end & (seen.real > 1e-9))
            outside = np.minimum(outside, np.where(square, flat, distance))
        return float(np.mean(np.clip(0.5 - outside / cell, 0.0, 1.0)))


# ---- progress ------------------------------------------------------------------------------------

class Tracker:
    """Progress of the guide point: nearest place of the centreline within a window about the last one."""

    def __init__(self, pieces, length, closed, window):
        self.length, self.closed, self.window, self.chunks = length, closed, window, []
        for piece in pieces:
            count = max(1, math.ceil(piece.length / 40.0))
            for i in range(count):
                begin, end = piece.length * i / count, piece.length * (i + 1) / count
                self.chunks.append(piece.part(begin, end, False, False))
        self.ends = np.array([[c.station, c.station + c.length] for c in self.chunks])

    def near(self, progress):
        """The chunks in the window, each with how often the whole length is to be added."""
        laps = math.floor(progress / self.length) if self.closed else 0
        for lap in (laps - 1, laps, laps + 1) if self.closed else (0,):
            low, high = (progress + side * self.window - lap * self.length for side in (-1, 1))
            for index in np.nonzero((self.ends[:, 1] >= low) & (self.ends[:, 0] <= high))[0]:
                yield lap, index

    def follow(self, progress, place):
        """New progress and deviation."""
        best = None
        for lap, index in self.near(progress):
            chunk = self.chunks[index]
            t, seen = locate(chunk, place)
            tie = best is not None and abs(abs(seen) - best[0]) <= 1e-9    # outside a corner: both its legs
            if best is None or abs(seen) < best[0] - 1e-9 or (tie and abs(seen.imag) > best[3]):
                at_end = not self.closed and ((index == 0 and t == 0) or
                                              (index == len(self.chunks) - 1 and t == chunk.length))
                size = abs(seen.imag) if at_end else abs(seen)
                station = lap * self.length + chunk.station + float(t)
                best = abs(seen), station, math.copysign(size, seen.imag), abs(seen.imag)
        return best[1], best[2]


# ---- vehicle -------------------------------------------------------------------------------------

class Vehicle:
    def __init__(self, keys, place, heading):
        self.track = keys["track_width_mm"]
        self.left, self.right = keys["wheel_left_mm"] / 2, keys["wheel_right_mm"] / 2
        self.full = keys["top_speed_rpm"] * 2 * math.pi / 60 * keys["supply_pct"] / 100
        self.forward_lag = keys["forward_time_constant_ms"] / 1000
        self.turn_lag = keys["turn_time_constant_ms"] / 1000
        self.dead, self.step = keys["dead_band_pct"] / 100, keys["command_step_pct"] / 100
        self.grip = keys["grip"] * GRAVITY
        self.place, self.heading, self.mean, self.half, self.slid = place, heading, 0.0, 0.0, False
        self.goal_mean = self.goal_half = 0.0

    def rounded(self, command):
        command = min(1.0, max(-1.0, command))
        return command if self.step == 0 else float(np.rint(command / self.step)) * self.step

    def command(self, left, right):
        """Rounded commands begin to act."""
        def heads_for(c):
            return math.copysign(max(0.0, abs(c) - self.dead) / (1 - self.dead), c) * self.full
        self.goal_mean = (heads_for(right) + heads_for(left)) / 2
        self.goal_half = (heads_for(right) - heads_for(left)) / 2

    def advance(self, time):
        """Drives on for `time` with the commands that act."""
        def lagged(now, goal, lag, t):
            """A first-order lag after t: its value and its integral."""
            if lag == 0:
                return goal, goal * t
            gone = -math.expm1(-t / lag)
            return goal + (now - goal) * (1 - gone), goal * t + (now - goal) * lag * gone

        def turned(t):
            mean = lagged(self.mean, self.goal_mean, self.forward_lag, t)[1]
            half = lagged(self.half, self.goal_half, self.turn_lag, t)[1]
            return (mean * (self.right - self.left) + half * (self.right + self.left)) / self.track

        def speed(t):
            mean = lagged(self.mean, self.goal_mean, self.forward_lag, t)[0]
            half = lagged(self.half, self.goal_half, self.turn_lag, t)[0]
            return (mean * (self.right + self.left) + half * (self.right - self.left)) / 2

        turn = turned(time)
        speeds = [speed(time * node) for node in NODES]
        mean_speed = float(np.dot(WEIGHTS, speeds))
        headings = [turned(time * node) for node in NODES]
        if self.grip > 0 and abs(mean_speed * turn / time) > self.grip:
            turn = math.copysign(self.grip / abs(mean_speed) * time, turn)
            headings, self.slid = [turn * node for node in NODES], True
        for weight, v, heading in zip(WEIGHTS, speeds, headings):
            self.place += time * weight * v * cmath.exp(1j * (self.heading + heading))
        self.heading += turn
        self.mean = lagged(self.mean, self.goal_mean, self.forward_lag, time)[0]
        self.half = lagged(self.half, self.goal_half, self.turn_lag, time)[0]


# ---- sensors -------------------------------------------------------------------------------------

class Sensors:
    def __init__(self, keys, light, floor, period):
        self.keys, self.light, self.floor, self.period = keys, complex(*light) / 1e5, floor, period
        count = len(keys["lateral_mm"])
        self.gain, self.offset = keys["gain"] or [1.0] * count, keys["offset_pct"] or [0.0] * count
        self.black, self.white = keys["black_pct"] / 100, keys["white_pct"] / 100
        self.smooth, self.shown, self.next_refresh, self.side = None, None, 0.0, 0.0

    def read(self, vehicle, time):
        """Light and low-pass act all the time; the readings change only when refreshed."""
        ahead, raw = cmath.exp(1j * vehicle.heading), []
        for lateral, gain, offset in zip(self.keys["lateral_mm"], self.gain, self.offset):
            place = vehicle.place + complex(self.keys["forward_mm"], lateral) * ahead
            contrast = gain * (self.white - self.black)
            value = self.black + contrast * self.floor.brightness(place) + offset / 100
            raw.append(value + self.light.real * place.real + self.light.imag * place.imag)
        raw, lag = np.array(raw), self.keys["lag_ms"] / 1000
        before = raw if self.smooth is None else self.smooth
        self.smooth = before + self.period / (lag + self.period) * (raw - before)
        if time >= self.next_refresh - SAME_TIME:
            step = self.keys["step_pct"] / 100
            self.shown = np.clip(np.rint(self.smooth / step) * step if step > 0 else self.smooth, 0.0, 1.0)
            refresh = self.keys["refresh_ms"] / 1000
            if refresh > 0:
                self.next_refresh = (math.floor((time + SAME_TIME) / refresh) + 1) * refresh
        return self.shown

    def error(self, readings):
        """What the controller is given; positive when the vehicle has to turn left."""
        if self.keys["scheme"] == "edge":
            above = readings[0] - self.keys["target_pct"] / 100
            return -above if self.keys["edge"] == "left" else above
        lateral = np.array(self.keys["lateral_mm"])
        if self.keys["scheme"] == "pair":
            return readings[np.argmin(lateral)] - readings[np.argmax(lateral)]
        dark = np.maximum(0.0, (self.white - readings) / (self.white - self.black))
        if np.max(dark) < SEEN:
            return self.side * np.max(np.abs(lateral))
        centroid = float(np.dot(dark, lateral) / np.sum(dark))
        self.side = math.copysign(1.0, centroid) if centroid else self.side
        return centroid


# ---- controller ----------------------------------------------------------------------------------

class Controller:
    def __init__(self, keys, period, full_error):
        per_second = keys["gains"] == "per_second"
        self.kp, self.ki = keys["kp"], keys["ki"] * (period if per_second else 1.0)
        self.kd = keys["kd"] / (period if per_second else 1.0)
        self.share = period / (keys["derivative_filter_ms"] / 1000 + period)
        self.base, self.ease, self.full_error = keys["base_pct"] / 100, keys["ease"], full_error
        self.limit, self.integral_limit = keys["steer_limit_pct"] / 100, keys["integral_limit_pct"] / 100
        self.i, self.d, self.before, self.steer = 0.0, 0.0, None, 0.0

    def step(self, error):
        """Wheel commands, left and right, before the vehicle clamps and rounds them."""
        p = self.kp * error
        if self.before is not None:
            self.d += self.share * (self.kd * (error - self.before) - self.d)
        self.before = error
        push = self.ki * error
        updated = min(self.integral_limit, max(-self.integral_limit, self.i + push))
        wanted = p + updated + self.d
        if not (abs(wanted) > self.limit and push * wanted > 0):
            self.i = updated
        self.steer = min(self.limit, max(-self.limit, p + self.i + self.d))
        base = self.base * max(0.0, 1 - self.ease * abs(error) / self.full_error)
        return base - self.steer, base + self.steer


# ---- drive ---------------------------------------------------------------------------------------

def drive(scenario, trace=None):
    """Runs a scenario; returns what `linewright drive --json` calls by the same names."""
    course, sensing, run = scenario["course"], scenario["sensors"], scenario["drive"]
    period, delay = scenario["loop"]["period_ms"] / 1000, scenario["vehicle"]["command_delay_ms"] / 1000
    pieces, length = centreline(course)
    floor = Floor(inked(pieces, course["gaps_mm"], course["closed"]), course["line_mm"], sensing["spot_mm"])
    tracker = Tracker(pieces, length, course["closed"], 2 * run["lost_mm"])
    first = pieces[0]
    beside = run["start_offset_mm"] * 1j * cmath.exp(1j * first.heading)
    vehicle = Vehicle(scenario["vehicle"], first.start + beside,
                      first.heading + math.radians(run["start_heading_deg"]))
    sensors = Sensors(sensing, scenario["floor"]["light_pct_per_m"], floor, period)
    full_error = max(map(abs, sensing["lateral_mm"])) if sensing["scheme"] == "bar" else 1.0
    controller = Controller(scenario["controller"], period, full_error)

    goal = length * (run["laps"] if course["closed"] else 1)
    progress, waiting, deviations, errors, loop = sensing["forward_mm"], [], [], [], 0
    while True:
        now = loop * period
        guide_point = vehicle.place + sensing["forward_mm"] * cmath.exp(1j * vehicle.heading)
        progress, deviation = tracker.follow(progress, guide_point)
        error = float(sensors.error(sensors.read(vehicle, now)))
        left, right = (vehicle.rounded(c) for c in controller.step(error))
        waiting.append((now + delay, left, right))
        deviations.append(deviation)
        errors.append(error)
        if trace is not None:
            trace.append((now, vehicle.place.real, vehicle.place.imag, math.degrees(vehicle.heading),
                          progress, deviation, error, controller.i, controller.d, controller.steer,
                          left, right, *sensors.shown))
        if abs(deviation) > run["lost_mm"]:
            outcome = "line_lost"
        elif progress >= goal - 1e-9:
            outcome = "finished"
        else:
            outcome = "time_out" if now >= run["time_limit_s"] - SAME_TIME else None
        if outcome:
            break
        loop += 1
        while now < loop * period - SAME_TIME:
            while waiting and waiting[0][0] <= now + SAME_TIME:
                vehicle.command(*waiting.pop(0)[1:])
            until = min(loop * period, waiting[0][0]) if waiting else loop * period
            vehicle.advance(until - now)
            now = until
    deviations = np.array(deviations)
    return {"outcome": outcome, "time_s": loop * period, "progress_mm": progress,
            "deviation_mean_mm": float(deviations.mean()),
            "deviation_rms_mm": float(np.sqrt(np.mean(deviations ** 2))),
            "deviation_max_mm": float(np.max(np.abs(deviations))), "error_mean": float(np.mean(errors)),
            "slid": vehicle.slid}


if __name__ == "__main__":
    with open(sys.argv[1], encoding="utf-8") as file:
        print(json.dumps(drive(load(file.read(), sys.argv[2:])), indent=2))
