"""What the command line writes, read by Python's own parsers (json, tomllib, csv, xml.etree).

  shell_check.py toml TEXT JSON      `describe` for people, a TOML 1.0 document, says the same as its JSON
  shell_check.py csv TRACE JSON      a trace has the figures of `drive --json`
  shell_check.py junit REPORT FILE   a report of FILE (3 expectations, 1 failing) and one more scenario
"""
import csv
import json
import math
import sys
import tomllib
import xml.etree.ElementTree


def without_nothing(value):
    """Drops what TOML cannot hold or the text leaves out: null, empty lists and texts."""
    if isinstance(value, dict):
        return {k: without_nothing(v) for k, v in value.items() if v not in (None, [], "")}
    return value


def toml(text, described):
    with open(text, "rb") as file:
        read = tomllib.load(file)
    assert read.pop("format") == "linewright 1"
    with open(described) as file:
        told = without_nothing(json.load(file)["scenario"])
    told["stress"].setdefault("spread", {})
    read["stress"].setdefault("spread", {})
    assert read == told, (read, told)


def near(a, b):
    return math.isclose(a, b, rel_tol=1e-9, abs_tol=1e-9)


def trace(table, driven):
    with open(table, newline="") as file:
        rows = [{k: float(v) for k, v in row.items()} for row in csv.DictReader(file)]
    with open(driven) as file:
        told = json.load(file)
    deviation = [row["deviation_mm"] for row in rows]
    mean = math.fsum(deviation) / len(rows)
    rms = math.sqrt(math.fsum(d * d for d in deviation) / len(rows))
    signs = [s for s in (math.copysign(1, r["steer"]) if r["steer"] else 0 for r in rows) if s]
    reversals = sum(a != b for a, b in zip(signs, signs[1:]))
    assert len(rows) == told["steps"]
    assert rows[-1]["t_s"] == told["time_s"]
    assert rows[-1]["progress_mm"] == told["progress_mm"]
    assert near(mean, told["deviation_mean_mm"]), mean
    assert near(rms, told["deviation_rms_mm"]), rms
    assert near(max(map(abs, deviation)), told["deviation_max_mm"])
    assert near(math.fsum(r["error"] for r in rows) / len(rows), told["error_mean"])
    assert near(reversals / told["time_s"], told["reversals_per_s"]), reversals


def junit(report, failing):
    root = xml.etree.ElementTree.parse(report).getroot()
    cases = root.findall("testsuite/testcase")
    failed = [case for case in cases if case.find("failure") is not None]
    assert root.tag == "testsuites" and len(root) == 2
    assert int(root.get("tests")) == len(cases) == 9, len(cases)
    assert int(root.get("failures")) == len(failed) == 1, len(failed)
    assert all(int(suite.get("tests")) == len(suite) for suite in root)
    assert failed[0].get("name") == "time_s_max" and failed[0].get("classname") == failing
    assert failed[0].find("failure").get("message").startswith("time_s_max: ")


{"toml": toml, "csv": trace, "junit": junit}[sys.argv[1]](*sys.argv[2:])
