"""Drives for reference_check.py: a base scenario and what each case changes in it.

Readings and commands are not rounded unless a case says so: a rounded loop steers in jumps, and where two
drives round one reading differently their later errors differ by jumps too, so that only coarse figures could
be compared.
"""
import copy


def straight(mm):
    return {"straight_mm": float(mm)}


def bend(radius, turn):
    return {"radius_mm": float(radius), "turn_deg": float(turn)}


def corner(turn):
    return bend(0, turn)


OVAL = [straight(600), bend(300, 180), straight(600), bend(300, 180)]
S_BENDS = [straight(300), bend(250, 90), bend(250, -150), bend(300, 60), straight(400)]
EIGHT = [straight(300), bend(300, 270), straight(600), bend(300, -270), straight(300)]
HAIRPIN = [straight(500), bend(120, 180), straight(500)]
SQUARE = [straight(400), corner(90), straight(500), corner(-90), straight(400)]
BAR = {"scheme": "bar", "lateral_mm": [30.0, 18.0, 6.0, -6.0, -18.0, -30.0], "forward_mm": 80.0}
EDGE = {"scheme": "edge", "lateral_mm": [0.0], "spot_mm": 12.0}

BASE = {
    "vehicle": {"command_step_pct": 0.0},
    "sensors": {"step_pct": 0.0},
    "controller": {"base_pct": 40.0, "kp": 0.3},
    "course": {"closed": True, "pieces": OVAL},
}


def open_course(pieces, **more):
    return {"closed": False, "pieces": pieces, **more}


# name, whether the quick check runs it, changes by table
CASES = [
    ("oval P", True, {}),
    ("oval to the right", False, {"course": {"pieces": [straight(600), bend(300, -180)] * 2}}),
    ("oval PI, three laps", False, {"controller": {"ki": 0.002}, "drive": {"laps": 3}}),
    ("turned and moved start", False, {"course": {"start_mm": [350.0, -120.0], "heading_deg": 35.0}}),
    ("offset and askew start", True, {
        "course": open_course([straight(2000)]),
        "drive": {"start_offset_mm": -15.0, "start_heading_deg": 6.0},
    }),
    ("unequal wheels", True, {"vehicle": {"wheel_left_mm": 61.5, "wheel_right_mm": 59.0}}),
    ("low supply", False, {"vehicle": {"supply_pct": 81.0}}),
    ("instant motors", False, {"vehicle": {"forward_time_constant_ms": 1.0, "turn_time_constant_ms": 1.0}}),
    ("slow motors", False, {
        "vehicle": {"forward_time_constant_ms": 300.0, "turn_time_constant_ms": 200.0},
        "controller": {"base_pct": 25.0, "kp": 0.15, "kd": 8.0},
    }),
    ("dead band", True, {"vehicle": {"dead_band_pct": 12.0}, "course": open_course(S_BENDS)}),
    ("dead band, inner wheel stands", False, {
        "vehicle": {"dead_band_pct": 15.0},
        "controller": {"base_pct": 25.0, "kp": 0.6},
        "course": open_course(HAIRPIN),
    }),
    ("command step 5 %", False, {
        "vehicle": {"command_step_pct": 5.0},
        "controller": {"kp": 0.6},
        "course": {"pieces": [bend(300, 360)]},
    }),
    ("delay 2 ms", False, {"vehicle": {"command_delay_ms": 2.0}}),
    ("delay of a whole period", False, {
        "vehicle": {"command_delay_ms": 5.5},
        "course": open_course(S_BENDS),
    }),
    ("delay 9.3 ms", True, {"vehicle": {"command_delay_ms": 9.3}, "course": open_course(S_BENDS)}),
    ("delay 20 ms in a loop of 1 ms", False, {
        "vehicle": {"command_delay_ms": 20.0},
        "loop": {"period_ms": 1.0},
        "controller": {"kp": 0.15},
        "course": open_course(S_BENDS),
    }),
    ("period 1 ms", False, {"loop": {"period_ms": 1.0}, "course": open_course(S_BENDS)}),
    ("period 10 ms", True, {"loop": {"period_ms": 10.0}}),
    ("period 20 ms, delay 13 ms", False, {
        "loop": {"period_ms": 20.0},
        "vehicle": {"command_delay_ms": 13.0},
        "controller": {"base_pct": 25.0, "kp": 0.2},
    }),
    ("readings of whole percents", False, {"sensors": {"step_pct": 1.0}}),
    ("readings in steps of 4 %", False, {
        "sensors": {"step_pct": 4.0},
        "course": {"pieces": [bend(250, 360)]},
    }),
    ("refresh 12 ms", True, {"sensors": {"refresh_ms": 12.0}, "course": open_course(S_BENDS)}),
    ("refresh 7 ms, loop 3 ms, D", False, {
        "sensors": {"refresh_ms": 7.0},
        "loop": {"period_ms": 3.0},
        "controller": {"kd": 2.0, "derivative_filter_ms": 20.0},
    }),
    ("lag 15 ms", False, {"sensors": {"lag_ms": 15.0}, "course": open_course(S_BENDS)}),
    ("lag 10 ms behind refresh 11 ms", False, {
        "sensors": {"lag_ms": 10.0, "refresh_ms": 11.0},
        "course": open_course(S_BENDS),
    }),
    ("gain and offset", True, {"sensors": {"gain": [1.05, 0.9], "offset_pct": [-3.0, 4.0]}}),
    ("readings clamped", False, {
        "sensors": {"white_pct": 97.0, "black_pct": 4.0, "offset_pct": [6.0, 6.0]},
    }),
    ("light gradient", True, {"floor": {"light_pct_per_m": [6.0, -9.0]}, "sensors": {"gain": [1.0, 0.95]}}),
    ("small spots", False, {
        "sensors": {"spot_mm": 3.0, "lateral_mm": [9.0, -9.5]},
        "controller": {"kp": 0.1},
    }),
    ("large spots", False, {"sensors": {"spot_mm": 16.0}}),
    ("spots wider than the line", False, {
        "course": {"line_mm": 8.0},
        "sensors": {"spot_mm": 14.0, "lateral_mm": [6.0, -6.0]},
    }),
    ("sensors off centre", False, {"sensors": {"lateral_mm": [12.0, -7.0]}}),
    ("sensors right first", False, {"sensors": {"lateral_mm": [-10.0, 10.0]}}),
    ("sensors near the axle", False, {
        "sensors": {"forward_mm": 25.0},
        "controller": {"base_pct": 20.0, "kp": 0.1, "kd": 3.0},
    }),
    ("edge left", True, {"sensors": EDGE, "controller": {"kp": 0.4}}),
    ("edge right, D, target 40 %", False, {
        "sensors": {**EDGE, "edge": "right", "target_pct": 40.0},
        "controller": {"kp": 0.4, "kd": 2.0},
    }),
    ("edge, sensor left of the middle", False, {
        "sensors": {**EDGE, "lateral_mm": [15.0]},
        "controller": {"kp": 0.4},
    }),
    ("bar", True, {"sensors": BAR, "controller": {"kp": 0.015}, "course": open_course(S_BENDS)}),
    ("bar of three, PID", False, {
        "sensors": {**BAR, "lateral_mm": [14.0, 0.0, -14.0]},
        "controller": {"kp": 0.015, "ki": 0.0001, "kd": 0.1, "derivative_filter_ms": 10.0},
        "course": open_course(S_BENDS, line_mm=18.0),
    }),
    ("bar, offsets and gains", False, {
        "sensors": {
            **BAR,
            "gain": [1.0, 0.9, 1.0, 1.1, 1.0, 0.95],
            "offset_pct": [0.0, 1.0, -2.0, 0.0, 1.5, 0.0],
        },
        "controller": {"kp": 0.015},
    }),
    ("bar round corners", True, {
        "sensors": BAR,
        "controller": {"base_pct": 20.0, "kp": 0.02, "ease": 0.8},
        "course": open_course(SQUARE),
    }),
    ("pair round blunt corners", True, {
        "controller": {"base_pct": 25.0, "kp": 0.5},
        "course": open_course([straight(300), corner(35), straight(300), corner(-50), straight(300)]),
    }),
    ("corner between samples", False, {
        "sensors": BAR,
        "controller": {"base_pct": 20.0, "kp": 0.02, "ease": 0.8},
        "course": open_course([straight(333.4), corner(60), straight(287.9), corner(-90), straight(310.3)]),
    }),
    ("square, closed, corner at the start", False, {
        "sensors": BAR,
        "controller": {"base_pct": 20.0, "kp": 0.02, "ease": 0.8},
        "course": {"pieces": [straight(500), corner(90)] * 4},
    }),
    ("crossing", False, {"course": {"pieces": EIGHT, "line_mm": 18.0}, "controller": {"base_pct": 35.0}}),
    ("crossing aslant", False, {
        "course": open_course([straight(800), bend(150, 240), straight(900)]),
        "controller": {"base_pct": 30.0, "kp": 0.4},
    }),
    ("gap on the straight", True, {
        "course": open_course([straight(1500)], gaps_mm=[[500.0, 620.0], [900.0, 915.0]]),
        "drive": {"start_offset_mm": 5.0},
    }),
    ("gap in the bend, PI", False, {
        "course": {"gaps_mm": [[250.0, 300.0], [1000.0, 1040.0]]},
        "controller": {"ki": 0.003},
    }),
    ("bar over gaps", False, {
        "course": {"gaps_mm": [[250.0, 330.0], [900.0, 925.0]]},
        "sensors": BAR,
        "controller": {"kp": 0.015},
        "drive": {"start_offset_mm": 5.0},
    }),
    ("gap too wide", False, {"course": {"gaps_mm": [[700.0, 1100.0]]}}),
    ("sliding", True, {"vehicle": {"grip": 0.06}, "controller": {"base_pct": 50.0, "kp": 0.4}}),
    ("sliding off", False, {"vehicle": {"grip": 0.03}, "controller": {"base_pct": 60.0, "kp": 0.4}}),
    ("ease", True, {
        "controller": {"base_pct": 50.0, "kp": 0.4, "ease": 0.9},
        "course": open_course(HAIRPIN),
    }),
    ("ease beyond nothing", False, {
        "controller": {"base_pct": 40.0, "kp": 0.5, "ease": 2.5},
        "course": open_course(S_BENDS),
    }),
    ("steer saturated", False, {
        "controller": {"base_pct": 50.0, "kp": 0.8, "steer_limit_pct": 20.0},
        "course": open_course(S_BENDS),
    }),
    ("wheels saturated", False, {
        "controller": {"base_pct": 95.0, "kp": 0.6},
        "course": open_course([straight(500), bend(600, 120)]),
    }),
    ("PI and anti-windup", True, {
        "controller": {"base_pct": 45.0, "kp": 0.3, "ki": 0.004, "steer_limit_pct": 22.0},
        "course": open_course(S_BENDS),
    }),
    ("integral limit", False, {"controller": {"ki": 0.01, "integral_limit_pct": 5.0}}),
    ("PD without filter", False, {"controller": {"kp": 0.4, "kd": 4.0}}),
    ("PID per second", True, {
        "controller": {
            "gains": "per_second",
            "kp": 0.4,
            "ki": 0.6,
            "kd": 0.02,
            "derivative_filter_ms": 12.0,
        },
        "loop": {"period_ms": 4.0},
    }),
    ("PID per second, slow loop", False, {
        "controller": {"gains": "per_second", "base_pct": 30.0, "kp": 0.3, "ki": 0.4, "kd": 0.02},
        "loop": {"period_ms": 16.0},
    }),
    ("lost in the hairpin", True, {
        "controller": {"base_pct": 80.0, "kp": 0.3},
        "course": open_course(HAIRPIN),
    }),
    ("lost soon", False, {"drive": {"lost_mm": 4.0}, "controller": {"base_pct": 60.0, "kp": 0.1}}),
    ("lost at a corner", False, {"controller": {"base_pct": 60.0}, "course": open_course(SQUARE)}),
    ("lost by swinging", False, {
        "controller": {"base_pct": 45.0, "kp": 3.0},
        "vehicle": {"command_delay_ms": 15.0},
        "drive": {"lost_mm": 20.0, "start_offset_mm": 4.0},
        "course": open_course([straight(3000)]),
    }),
    ("time out", False, {"drive": {"time_limit_s": 3.0}}),
    ("stands still", False, {
        "controller": {"base_pct": 0.0},
        "drive": {"time_limit_s": 2.0, "start_offset_mm": 4.0},
    }),
    ("drawn and closed", True, {
        "course": {
            "pieces": None,
            "points_mm": [[0, 0], [400, -30], [800, 100], [750, 500], [350, 420], [-50, 520], [-200, 250]],
        },
    }),
    ("drawn and open", False, {
        "course": {
            "pieces": None,
            "closed": False,
            "points_mm": [[0, 0], [300, 20], [600, 180], [900, 60], [1300, 250]],
        },
    }),
    ("drawn with a corner", False, {
        "course": {
            "pieces": None,
            "closed": False,
            "corners": [2],
            "points_mm": [[0, 0], [250, 40], [500, 0], [700, 250], [1000, 300]],
        },
        "controller": {"base_pct": 25.0, "kp": 0.5},
    }),
    ("drawn, closed, with corners", False, {
        "course": {
            "pieces": None,
            "corners": [2, 4],
            "points_mm": [[0, 0], [300, -40], [600, 0], [650, 300], [600, 600], [200, 620], [-100, 300]],
        },
        "sensors": BAR,
        "controller": {"base_pct": 20.0, "kp": 0.02, "ease": 0.8},
    }),
]


def scenario_of(changes):
    scenario = copy.deepcopy(BASE)
    for table, keys in changes.items():
        scenario.setdefault(table, {}).update(copy.deepcopy(keys))
    return scenario


def value_text(value):
    if isinstance(value, bool):
        return str(value).lower()
    if isinstance(value, str):
        return f'"{value}"'
    if isinstance(value, list):
        return "[" + ", ".join(map(value_text, value)) + "]"
    if isinstance(value, dict):
        return "{ " + ", ".join(f"{k} = {value_text(v)}" for k, v in value.items()) + " }"
    return repr(value)


def all_cases():
    for name, quick, changes in CASES:
        lines = ['format = "linewright 1"']
        for table, keys in scenario_of(changes).items():
            lines += [f"[{table}]"] + [f"{k} = {value_text(v)}" for k, v in keys.items() if v is not None]
        yield name, quick, "\n".join(lines) + "\n"
