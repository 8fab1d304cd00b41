"""Wall time and peak memory of the program as a user starts it: `guys --help`, `guys solve` and the studies of shipped scenarios."""

from __future__ import annotations

import json
import re
import subprocess
import sys
import tempfile
from dataclasses import dataclass
from pathlib import Path

SCENARIOS = Path(__file__).parents[2] / "scenarios"
START = "from guys.cli import main; main()"
LAUNCH = """
import json, os, subprocess, sys, time
began = time.perf_counter()
child = subprocess.Popen([sys.executable, "-c", *sys.argv[1:]], stdout=subprocess.DEVNULL, stderr=subprocess.DEVNULL)
_, code, used = os.wait4(child.pid, 0)
seconds, child.returncode = time.perf_counter() - began, os.waitstatus_to_exitcode(code)
busy = used.ru_utime + used.ru_stime
print(json.dumps({"seconds": seconds, "busy": busy, "megabytes": used.ru_maxrss / 1024, "status": child.returncode}))
"""
"""Starts the program from a small process: a child's peak memory counts what its parent held when it was started."""
STUDIES = {
    "compare": "bench-mast.toml",
    "search": "bench-mast.toml",
    "limit": "quarry-relay-mast.toml",
    "reserve": "quarry-relay-mast.toml",
    "lost": "quarry-relay-mast.toml",
    "matters": "quarry-relay-mast.toml",
    "raise": "tilt-up-mast.toml",
    "field": "quarry-relay-mast.toml",
    "record": "quarry-relay-mast.toml",
}
"""Commands timed, each with the shipped scenario it is asked of as it stands."""
TWO_CASES = '\n[[case]]\nname = "full wind"\nwind = 1.0\n\n[[case]]\nname = "half wind"\nwind = 0.5\n'


@dataclass(frozen=True)
class Run:
    """Least wall time and least processor time [s] of several runs, greatest peak memory [MB]; exit status of the last."""

    seconds: float
    busy: float
    megabytes: float
    status: int


def run(arguments: list[str], repeats: int) -> Run:
    """Start the program several times in a fresh interpreter."""
    runs = [_one(arguments) for _ in range(repeats)]
    return Run(min(r.seconds for r in runs), min(r.busy for r in runs), max(r.megabytes for r in runs), runs[-1].status)


def _one(arguments: list[str]) -> Run:
    told = subprocess.run([sys.executable, "-c", LAUNCH, START, *arguments], capture_output=True, text=True, check=True)
    return Run(**json.loads(told.stdout))


def help_run(repeats: int) -> Run:
    """`guys --help`."""
    return run(["--help"], repeats)


def solve_run(name: str, repeats: int) -> Run:
    """`guys solve`, sheet and all, of a shipped scenario with 36 wind directions and two cases."""
    with tempfile.TemporaryDirectory() as folder:
        path = Path(folder) / name
        path.write_text(with_36_directions_and_two_cases((SCENARIOS / name).read_text(encoding="utf-8")), encoding="utf-8")
        return run(["solve", str(path), "--out", str(Path(folder) / "out")], repeats)


def study_run(command: str, repeats: int) -> Run:
    """One of `STUDIES` with every file it writes."""
    with tempfile.TemporaryDirectory() as folder:
        return run([command, str(SCENARIOS / STUDIES[command]), "--out", str(Path(folder) / "out")], repeats)


def with_36_directions_and_two_cases(text: str) -> str:
    """The scenario with its wind directions and cases replaced."""
    text = re.sub(r"(?m)^directions\s*=.*\n", "", text)
    text = re.sub(r"(?m)^\[wind\].*$", '[wind]\ndirections = "every 10 deg"', text, count=1)
    text = re.sub(r"(?ms)^\[\[case\]\].*?(?=^\[|\Z)", "", text)
    return text + TWO_CASES
