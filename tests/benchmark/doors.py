"""Wall time and peak memory of the program as a user starts it: `guys --help`, and `guys solve` of a shipped scenario."""

from __future__ import annotations

import os
import re
import subprocess
import sys
import tempfile
import time
from dataclasses import dataclass
from pathlib import Path

SCENARIOS = Path(__file__).parents[2] / "scenarios"
START = "from guys.cli import main; main()"
TWO_CASES = '\n[[case]]\nname = "full wind"\nwind = 1.0\n\n[[case]]\nname = "half wind"\nwind = 0.5\n'


@dataclass(frozen=True)
class Run:
    """Least wall time [s] of several runs and greatest peak memory [MB]; exit status of the last."""

    seconds: float
    megabytes: float
    status: int


def run(arguments: list[str], repeats: int) -> Run:
    """Start the program several times in a fresh interpreter."""
    seconds, memory, status = [], [], 0
    for _ in range(repeats):
        began = time.perf_counter()
        child = subprocess.Popen([sys.executable, "-c", START, *arguments], stdout=subprocess.DEVNULL, stderr=subprocess.DEVNULL)
        _, code, used = os.wait4(child.pid, 0)
        seconds.append(time.perf_counter() - began)
        memory.append(used.ru_maxrss / 1024.0)
        status = child.returncode = os.waitstatus_to_exitcode(code)
    return Run(min(seconds), max(memory), status)


def help_run(repeats: int) -> Run:
    """`guys --help`."""
    return run(["--help"], repeats)


def solve_run(name: str, repeats: int) -> Run:
    """`guys solve`, sheet and all, of a shipped scenario with 36 wind directions and two cases."""
    with tempfile.TemporaryDirectory() as folder:
        path = Path(folder) / name
        path.write_text(with_36_directions_and_two_cases((SCENARIOS / name).read_text(encoding="utf-8")), encoding="utf-8")
        return run(["solve", str(path), "--out", str(Path(folder) / "out")], repeats)


def with_36_directions_and_two_cases(text: str) -> str:
    """The scenario with its wind directions and cases replaced."""
    text = re.sub(r"(?m)^directions\s*=.*\n", "", text)
    text = re.sub(r"(?m)^\[wind\].*$", '[wind]\ndirections = "every 10 deg"', text, count=1)
    text = re.sub(r"(?ms)^\[\[case\]\].*?(?=^\[|\Z)", "", text)
    return text + TWO_CASES
