"""Holds a drive against SciPy's DOP853 (Hairer, Norsett and Wanner) on the differential equations of the
vehicle.

    drive_ode.py SCENARIO.toml TRACE.csv

Reads the wheel commands of every loop from the trace, works the vehicle's constants out of the scenario
by itself, and integrates lag, heading and position with tight tolerances from the start, without ever
being corrected. Pose and wheel motion have to agree with the trace at every loop to 1e-6 m and 1e-6 rad.
"""
import csv
import math
import sys
import tomllib

from scipy.integrate import solve_ivp


def equations(vehicle):
    left_radius, right_radius = vehicle["wheel_left_mm"] / 2000, vehicle["wheel_right_mm"] / 2000
    track = vehicle["track_width_mm"] / 1000
    forward, turn = vehicle["forward_time_constant_ms"] / 1000, vehicle["turn_time_constant_ms"] / 1000
    full = vehicle["top_speed_rpm"] * 2 * math.pi / 60 * vehicle.get("supply_pct", 100) / 100
    dead = vehicle.get("dead_band_pct", 0) / 100

    def wheel(command):
        return math.copysign(max(0.0, abs(command) - dead) / (1 - dead) * full, command)

    def rates(left, right):
        goal_mean, goal_half = (wheel(right) + wheel(left)) / 2, (wheel(right) - wheel(left)) / 2

        def rate(_, state):
            _, _, heading, mean, half = state
            v_left, v_right = (mean - half) * left_radius, (mean + half) * right_radius
            v = (v_left + v_right) / 2
            return [v * math.cos(heading), v * math.sin(heading), (v_right - v_left) / track,
                    (goal_mean - mean) / forward, (goal_half - half) / turn]

        return rate

    return rates


def main(scenario_file, trace_file):
    with open(scenario_file, "rb") as file:
        vehicle = tomllib.load(file)["vehicle"]
    with open(trace_file, newline="") as file:
        rows = [{key: float(value) for key, value in row.items()} for row in csv.DictReader(file)]
    rates = equations(vehicle)
    delay = vehicle.get("command_delay_ms", 0) / 1000
    events = [(row["t_s"] + delay, row["left"], row["right"]) for row in rows]

    state = [rows[0]["x_mm"] / 1000, rows[0]["y_mm"] / 1000, math.radians(rows[0]["heading_deg"]), 0.0, 0.0]
    acting, now, next_event, worst = (0.0, 0.0), 0.0, 0, 0.0
    for row in rows[1:]:
        while now < row["t_s"]:
            while next_event < len(events) and events[next_event][0] <= now + 1e-12:
                acting, next_event = events[next_event][1:], next_event + 1
            to = min(row["t_s"], events[next_event][0]) if next_event < len(events) else row["t_s"]
            state = solve_ivp(rates(*acting), (now, to), state, "DOP853", rtol=1e-12, atol=1e-13).y[:, -1]
            now = to
        worst = max(worst, math.hypot(state[0] - row["x_mm"] / 1000, state[1] - row["y_mm"] / 1000),
                    abs(state[2] - math.radians(row["heading_deg"])))
    travelled = math.hypot(state[0] - rows[0]["x_mm"] / 1000, state[1] - rows[0]["y_mm"] / 1000)
    if len(rows) < 100 or travelled < 0.1:
        sys.exit("the drive is too short to say anything")
    if worst > 1e-6:
        sys.exit(f"pose differs from DOP853 by {worst:g} m or rad")
    print(f"ok {len(rows)} loops, largest difference {worst:.2g} m or rad")


main(*sys.argv[1:])
