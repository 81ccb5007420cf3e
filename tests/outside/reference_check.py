"""Holds `linewright drive --json` against reference_drive.py, drive by drive.

    reference_check.py LINEWRIGHT [--quick] [--scenarios FOLDER] [--unlike KEY=VALUE] [NAME ...]

One line a case. Cases are the files of FOLDER, their random keys set to 0, and the variations of
reference_cases.py. Outcome and sliding have to be equal; time within 1 % or two loops; progress within 1 %;
deviation (rms, largest) within 1 % or 0.02 mm, its mean within 1 % of the rms or 0.05 mm; mean error within
1 % or 0.0002 of full scale (bar: 0.02 mm). Where readings or commands are rounded, 0.05 mm and 0.0005. What
is left is the raster's: 0.001 of brightness mostly, 0.008 where a spot just touches the line's edge.

A drive out of bounds is judged once more where the figures of the reference themselves hang on nothing:
started up to 0.1 mm aside. Rounding, dead bands and growing oscillations make some drives so; then each
figure has to lie within what these starts give, and the line says "ok~".

--quick runs the cases marked for it. With NAMEs only the cases that contain one of them run. --unlike
overrides a key for Linewright alone, so that a test can see the check fail. Ends with 1 when a case fails.
"""
import argparse
import json
import subprocess
import sys
import time
from pathlib import Path

sys.dont_write_bytecode = True  # the source tree stays as it is

import reference_cases
import reference_drive

RANDOM = ["sensors.noise_pct=0.0", "floor.texture_pct=0.0", "loop.jitter_pct=0.0"]


def engine(binary, text, overrides):
    command = [binary, "drive", "--json", "-"] + [word for key in overrides for word in ("--set", key)]
    run = subprocess.run(command, input=text, capture_output=True, text=True, check=False)
    if run.returncode != 0:
        raise SystemExit(f"{binary} refused:\n{run.stderr}\n{text}")
    return json.loads(run.stdout)


def from_aside(scenario):
    """The reference's figures from starts a hair beside the scenario's."""
    drives = []
    for aside in (-0.1, -0.06, -0.03, -0.01, 0.01, 0.03, 0.06, 0.1):
        moved = {**scenario, "drive": {**scenario["drive"]}}
        moved["drive"]["start_offset_mm"] += aside
        drives.append(reference_drive.drive(moved))
    return drives


def disagreements(scenario, ours, theirs, others=()):
    """Texts that name each figure out of bounds; the bounds reach about all of theirs and the others'."""
    bar = scenario["sensors"]["scheme"] == "bar"
    rounded = scenario["sensors"]["step_pct"] > 0 or scenario["vehicle"]["command_step_pct"] > 0
    least, least_error = (0.05, 0.0005) if rounded else (0.02, 0.0002)
    rms = abs(theirs["deviation_rms_mm"])
    bounds = {
        "time_s": (0.01 * theirs["time_s"], 2 * scenario["loop"]["period_ms"] / 1000),
        "progress_mm": (0.01 * theirs["progress_mm"], 0.02),
        "deviation_rms_mm": (0.01 * rms, least),
        "deviation_max_mm": (0.01 * theirs["deviation_max_mm"], least),
        "deviation_mean_mm": (0.01 * rms, 0.05),
        "error_mean": (0.01 * abs(theirs["error_mean"]), 0.02 if bar else least_error),
    }
    wrong = [f"{key} {ours[key]} not {theirs[key]}"
             for key in ("outcome", "slid") if ours[key] != theirs[key]]
    for key, bound in bounds.items():
        figures = [drive[key] for drive in (theirs, *others)]
        if not min(figures) - max(bound) - 1e-9 <= ours[key] <= max(figures) + max(bound) + 1e-9:
            wrong.append(f"{key} {ours[key]:.6g} not {theirs[key]:.6g}")
    return wrong


def cases(folder, quick):
    if folder and not quick:
        for file in sorted(Path(folder).glob("*.toml")):
            yield file.stem, file.read_text(encoding="utf-8")
    for name, in_quick, text in reference_cases.all_cases():
        if in_quick or not quick:
            yield name, text


def main():
    arguments = argparse.ArgumentParser()
    arguments.add_argument("linewright")
    arguments.add_argument("--quick", action="store_true")
    arguments.add_argument("--scenarios")
    arguments.add_argument("--unlike", action="append", default=[])
    arguments.add_argument("names", nargs="*")
    given = arguments.parse_intermixed_args()
    ran = failed = 0
    for name, text in cases(given.scenarios, given.quick):
        if given.names and not any(part in name for part in given.names):
            continue
        scenario = reference_drive.load(text, RANDOM)
        begin = time.monotonic()
        theirs = reference_drive.drive(scenario)
        ours = engine(given.linewright, text, RANDOM + given.unlike)
        wrong, verdict = disagreements(scenario, ours, theirs), "ok  "
        if wrong and ours["outcome"] == theirs["outcome"]:
            wrong, verdict = disagreements(scenario, ours, theirs, from_aside(scenario)), "ok~ "
        ran, failed = ran + 1, failed + bool(wrong)
        figures = f"{theirs['outcome']} {theirs['time_s']:.3f} s rms {theirs['deviation_rms_mm']:.4g} mm"
        took = f"worked out in {time.monotonic() - begin:.1f} s"
        print(f"{'FAIL' if wrong else verdict} {name}: {figures}, {took}"
              + "".join(f"\n       {line}" for line in wrong), flush=True)
    print(f"{ran} drives, {failed} disagree")
    sys.exit(1 if failed or ran == 0 else 0)


if __name__ == "__main__":
    main()
