"""The benchmark: `python -m tests.benchmark.bench` from a checkout prints it; with `--write` it also becomes docs/benchmark.md.

One thread.  Figures are the best of several runs on the machine described, not promises; nothing in the tests depends on them.
"""

from __future__ import annotations

import argparse
import datetime
import os
import platform
import sys
from collections.abc import Iterator
from pathlib import Path

from tests.benchmark import doors, masts, outside
from tests.benchmark.measure import Figures, coarse, figures, growth_with_cases, growth_with_nodes

PAGE = Path(__file__).parents[2] / "docs" / "benchmark.md"
ONE_THREAD = dict.fromkeys(("OPENBLAS_NUM_THREADS", "OMP_NUM_THREADS", "MKL_NUM_THREADS"), "1")
MASTS = {
    "18 m tube, 2 x 3 guys": (masts.slender_18m_toml, 1.0),
    "45 m lattice, 3 x 3 guys": (masts.lattice_45m_toml, 0.8),
    "150 m lattice, 6 x 3 guys": (masts.lattice_150m_toml, 1.5),
}
"""Text of the scenario, and the goal in milliseconds a case."""
RATIO_GOAL = 15.0
BALANCE_GOAL = 1e-9
MESH_GOAL = 1e-3
OUTSIDE_GOAL = 25.0
CASE_COUNTS = (1, 3, 10, 30, 72, 144, 300, 1000)
FINER = (1, 2, 3, 4, 6)
COARSE = 2
"""Elements in a span: our coarsest mesh within 0.1 % on the slender mast."""
SOLVED = (0, 3, 4)
"""Exit statuses of a run that solved and wrote everything."""
SHIPPED = "quarry-relay-mast.toml"
STUDY_GOALS = {"raise": 2.0}
"""Seconds by the clock, for studies that have a goal."""


def main() -> None:
    """Print the page; write it when asked."""
    parser = argparse.ArgumentParser(description="Measure the speed of guys on this machine.")
    parser.add_argument("--write", action="store_true", help=f"write {PAGE.name} in docs")
    parser.add_argument("--repeats", type=int, default=9, help="runs of which the best is taken")
    arguments = parser.parse_args()
    lines = []
    for line in page(arguments.repeats):
        print(line, flush=True)
        lines.append(line)
    if arguments.write:
        PAGE.write_text("\n".join(lines) + "\n", encoding="utf-8")


def page(repeats: int) -> Iterator[str]:
    """Lines of the page."""
    yield from _head()
    found = {name: figures(text(), repeats) for name, (text, _) in MASTS.items()}
    yield from _solver(found)
    yield from _profile(found)
    yield from _growth(repeats)
    yield from _side_by_side(next(iter(found.values())), repeats)
    yield from _doors(repeats)
    yield from _studies(repeats)


def _head() -> Iterator[str]:
    import numpy
    import scipy

    yield "# Benchmark"
    yield ""
    yield "Made by `python -m tests.benchmark.bench --write`. Times are the best of several runs of one thread, processor time but"
    yield "for the commands, which are by the clock; they say what to expect and where time goes, and are no part of the tests. What is"
    yield "timed is said in `tests/benchmark/measure.py`, the masts are in `tests/benchmark/masts.py`."
    yield ""
    versions = f"Python {platform.python_version()}, numpy {numpy.__version__}, scipy {scipy.__version__}"
    yield f"Machine: {os.cpu_count()} cores of a shared server, {_processor()}; {platform.system()}; {versions}."
    yield f"{datetime.date.today()}, load average {os.getloadavg()[0]:.1f} at the start."


def _processor() -> str:
    info = Path("/proc/cpuinfo")
    if info.exists():
        for line in info.read_text(encoding="utf-8").splitlines():
            if line.startswith("model name"):
                return line.partition(":")[2].strip()
    return platform.processor() or platform.machine()


def _goal(met: bool) -> str:
    return "met" if met else "not met"


def _solver(found: dict[str, Figures]) -> Iterator[str]:
    yield ""
    yield f"## The search for equilibrium, {masts.DIRECTIONS} wind directions in one batch"
    yield ""
    yield "From the still-air state, per case. Guy tensions are compared with a mesh twice as fine; the ratio is the search over the sum of"
    yield "its bare banded factorisations timed in the same run."
    yield ""
    yield "| mast | nodes | guys | ms per case | goal | rounds | out-of-balance | mesh error, of the greatest tension | of each tension |"
    yield "|---|---|---|---|---|---|---|---|---|"
    for name, f in found.items():
        goal = MASTS[name][1]
        balance = f"{f.out_of_balance:.0e}" + ("" if f.out_of_balance < BALANCE_GOAL else " (**over 1e-9**)")
        yield (
            f"| {name} | {f.nodes} | {f.cables} | **{f.search_ms:.2f}** | {goal} {_goal(f.search_ms <= goal)} | {f.rounds:.1f} | {balance}"
            f" | {100 * f.mesh_of_greatest:.4f} % | {100 * f.mesh_each:.4f} % {_goal(f.mesh_each < MESH_GOAL)} |"
        )
    yield ""
    yield "Per case in milliseconds, but the setting (initial tensions to unstressed lengths), which is found once:"
    yield ""
    yield "| mast | bare factorisations | ratio (goal 15) | verdict | loads | setting, once |"
    yield "|---|---|---|---|---|---|"
    for name, f in found.items():
        yield (
            f"| {name} | {f.factorisation_ms:.3f} | {f.ratio:.1f} {_goal(f.ratio <= RATIO_GOAL)} | {f.verdict_ms:.2f}"
            f" | {f.loads_ms:.3f} | {f.setting_ms:.0f} |"
        )


def _profile(found: dict[str, Figures]) -> Iterator[str]:
    yield ""
    yield "## Where the time of a search goes"
    yield ""
    yield "| part | " + " | ".join(found) + " |"
    yield "|---|" + "---|" * len(found)
    for part in next(iter(found.values())).parts:
        yield f"| {part} | " + " | ".join(f"{100 * f.parts[part]:.0f} %" for f in found.values()) + " |"


def _growth(repeats: int) -> Iterator[str]:
    yield ""
    yield "## Growth with cases and nodes"
    yield ""
    yield "45 m lattice, all cases in one batch (the program itself sends them in chunks):"
    yield ""
    yield "| cases | whole, ms | per case, ms |"
    yield "|---|---|---|"
    for cases, whole in growth_with_cases(masts.lattice_45m_toml(), CASE_COUNTS, repeats):
        yield f"| {cases} | {whole:.1f} | {whole / cases:.2f} |"
    yield ""
    yield f"18 m tube, {masts.DIRECTIONS} cases, finer and finer meshes:"
    yield ""
    yield "| nodes | per case, ms | rounds |"
    yield "|---|---|---|"
    for nodes, each, rounds in growth_with_nodes(masts.slender_18m_toml(), FINER, repeats):
        yield f"| {nodes} | {each:.2f} | {rounds:.1f} |"


def _side_by_side(ours: Figures, repeats: int) -> Iterator[str]:
    yield ""
    yield "## Side by side with a general finite-element library"
    yield ""
    timed = outside.timed_ways(max(3, repeats // 3))
    if timed is None:
        yield "The outside library (openseespy) is not installed here; nothing to compare with."
        return
    version, ways = timed
    yield f"The 18 m mast, the same {masts.DIRECTIONS} directions, in openseespy {version}, searches alone timed (see"
    yield "`tests/benchmark/outside.py`). Errors are of guy tensions against its own extrapolated answer, relative to the greatest."
    yield ""
    yield "| beams per metre | cables as | started from | Newton steps | error | ms per case |"
    yield "|---|---|---|---|---|---|"
    for w in ways:
        cables = f"{w.bars} bars each" if w.bars else "catenary elements"
        start = "still air" if w.from_still_air else "the direction before"
        yield f"| {w.per_metre} | {cables} | {start} | {w.steps:.1f} | {100 * w.error:.4f} % | {w.milliseconds:.2f} |"
    yield ""
    yield "At the same accuracy, both from still air:"
    yield ""
    yield f"| accuracy | ours, ms per case | openseespy, ms per case | ours is faster (goal {OUTSIDE_GOAL:.0f} times) |"
    yield "|---|---|---|---|"
    milliseconds, error = coarse(masts.slender_18m_toml(), COARSE, repeats)
    pairs = (
        (f"0.1 % (ours: {COARSE} elements a span, {100 * error:.3f} %)", milliseconds, outside.ACCURACY),
        (f"of our default mesh ({100 * ours.mesh_of_greatest:.4f} %)", ours.search_ms, 1.2 * ours.mesh_of_greatest),
    )
    for name, ours_ms, accuracy in pairs:
        way = outside.fastest(ways, accuracy)
        ratio = way.milliseconds / ours_ms
        theirs = f"{way.milliseconds:.2f} at {100 * way.error:.4f} %"
        yield f"| {name} | {ours_ms:.2f} | {theirs} | **{ratio:.1f} times** {_goal(ratio >= OUTSIDE_GOAL)} |"
    [(_, alone)] = growth_with_cases(masts.slender_18m_toml(), (1,), repeats)
    yield ""
    yield f"The gain is the batch's and the element's: one case of this mast alone takes ours {alone:.1f} ms, because numpy's cost per call"
    yield "is then not shared. The library's beam has no bowing within an element and its loads are lumped, so it needs more of them."


def _doors(repeats: int) -> Iterator[str]:
    yield ""
    yield "## The program as a user starts it"
    yield ""
    few = max(3, repeats // 3)
    if not (doors.SCENARIOS / SHIPPED).exists():
        yield f"`scenarios/{SHIPPED}` is not there; nothing measured."
        return
    told, solved = doors.help_run(few), doors.solve_run(SHIPPED, few)
    yield "| command | wall, s | processor, s | peak memory, MB | exit | goal |"
    yield "|---|---|---|---|---|---|"
    quick = _goal(told.status == 0 and told.seconds < 0.3)
    yield f"| `guys --help` | {told.seconds:.2f} | {told.busy:.2f} | {told.megabytes:.0f} | {told.status} | 0.3 s {quick} |"
    met = _goal(solved.status in SOLVED and solved.seconds < 3.0 and solved.megabytes < 400.0)
    yield (
        f"| `guys solve` of `{SHIPPED}` with 36 directions x 2 cases, sheet included | {solved.seconds:.2f} | {solved.busy:.2f}"
        f" | {solved.megabytes:.0f} | {solved.status} | 3 s, 400 MB {met} |"
    )


def _studies(repeats: int) -> Iterator[str]:
    yield ""
    yield "## The studies"
    yield ""
    yield "As a user starts them, of scenarios as shipped, with every file they write. `compare`, `search` and `raise` use a"
    yield "process a core, so processor time may be more than wall time; memory is that of the largest process."
    yield ""
    yield "| command | scenario | wall, s | processor, s | peak memory, MB | exit | goal |"
    yield "|---|---|---|---|---|---|---|"
    for command, scenario in doors.STUDIES.items():
        once = doors.study_run(command, max(2, repeats // 4))
        goal = STUDY_GOALS.get(command)
        met = "" if goal is None else f"{goal:g} s {_goal(once.status in SOLVED and once.seconds < goal)}"
        yield f"| `guys {command}` | `{scenario}` | {once.seconds:.2f} | {once.busy:.2f} | {once.megabytes:.0f} | {once.status} | {met} |"


if __name__ == "__main__":
    if any(os.environ.get(name) != value for name, value in ONE_THREAD.items()):
        os.execve(sys.executable, [sys.executable, "-m", "tests.benchmark.bench", *sys.argv[1:]], {**os.environ, **ONE_THREAD})
    main()
