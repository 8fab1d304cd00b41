"""Scenario texts the published cases share, and the load at which a straight spar of a scenario loses stability."""

from __future__ import annotations

from collections.abc import Callable

import numpy as np
from numpy.typing import NDArray
from scipy.optimize import brentq

from guys import mesh, parse_scenario, solve, solver, stability
from guys.constants import STANDARD_GRAVITY
from guys.equilibrium import Problem, State
from guys.loads import as_drawn, assemble, setting_line
from guys.results import Solution
from guys.structure import build
from tests.published.compare import Allowance

Array = NDArray[np.float64]
PRESSURE = 1000.0
"""[Pa] of the wind below: 1.25 kg/m3 at 40 m/s."""
KILO_PASCAL = '[wind]\nspeed = "40 m/s"\naveraging = "3 s"\nheight = "10 m"\nprofile = "uniform"\nair_density = "1.25 kg/m3"\n'
"""A wind of one kilopascal, so that an area in m2 with a drag of one takes as many kilonewtons; directions to be added."""
FINE = -(-12 // mesh.ELEMENTS)
"""How much finer than by itself a scenario is divided below: at least twelve elements to a span, within 6e-5 of any critical load below."""
TWELVE = Allowance(6e-5, "twelve elements to a span", share=True)
STILL = '[[case]]\nname = "still"\nwind = 0.0\n'
TAUT = 1e-5
"""Strain of the stays below, unless they are to move by more."""
STRAIGHT = '[analysis]\ncable = "straight"\n'


def spar(
    length: str, base: str = "pinned", *, name: str = "mast", rigid: bool = True, section: str = 'mass = "0 kg/m"', more: str = ""
) -> str:
    """A spar of one section at the origin, upright unless `more` says otherwise."""
    foot = "" if "foot" in more else 'foot = { east = "0 m", north = "0 m", level = "0 m" }\n'
    stiff = "rigid = true\n" if rigid else ""
    return f'[[spar]]\nname = "{name}"\n{foot}base = "{base}"\n{stiff}{more}\n[[spar.section]]\nlength = "{length}"\n{section}\n'


def load(at: str, *, name: str = "load", east: str = "0 N", north: str = "0 N", up: str = "0 N") -> str:
    """A fixed force on the spar above it in the text."""
    return f'[[spar.fitting]]\nname = "{name}"\nat = "{at}"\nload = {{ east = "{east}", north = "{north}", up = "{up}" }}\n'


def anchor(name: str, east: str, north: str, level: str = "0 m") -> str:
    return f'[[anchor]]\nname = "{name}"\neast = "{east}"\nnorth = "{north}"\nlevel = "{level}"\n'


def anchor_ring(bearings: dict[str, float], radius: str, level: str = "0 m") -> str:
    """Anchors at bearings [deg]."""
    return "".join(f'[[anchor]]\nname = "{n}"\nbearing = "{b} deg"\nradius = "{radius}"\nlevel = "{level}"\n' for n, b in bearings.items())


def guy(name: str, at: str, to: str, how: str, rope: str = "line", of: str = "mast") -> str:
    """A cable from a spar to an anchor; how: its tension, length or tight line."""
    return f'[[cable]]\nname = "{name}"\nfrom = {{ spar = "{of}", at = "{at}" }}\nto = {{ anchor = "{to}" }}\nrope = "{rope}"\n{how}\n'


def rope(stiffness: str, *, name: str = "line", diameter: str = "10 mm", mass: str = "0.1 kg/m", drag: float = 0.0, more: str = "") -> str:
    return f'[rope.{name}]\ndiameter = "{diameter}"\nmass = "{mass}"\nstiffness = "{stiffness}"\ndrag = {drag}\n{more}\n'


def solved(*tables: str, finer: int = 1) -> Solution:
    """The solution of a scenario of these tables."""
    return solve(parse_scenario(whole(*tables)), finer=finer)


def whole(*tables: str) -> str:
    return "\n".join(['format = 1\ntitle = "Published case"', *tables])


def per_length(weight: float) -> str:
    """The mass whose weight is so many N/m."""
    return f'mass = "{weight / STANDARD_GRAVITY!r} kg/m"'


def unbuckled(text: str, finer: int = 1) -> tuple[Problem, State]:
    """The problem of a scenario's still-air case, cables given by length, and the state reached from the drawing without pushing it off a
    straight branch."""
    scenario = parse_scenario(text)
    structure = build(scenario, finer)
    length = np.array([c.length for c in scenario.cable], dtype=float)
    problem = Problem(structure, assemble(structure, [setting_line(scenario)], as_drawn(structure, length)), length)
    return problem, solver.solve(problem, problem.drawn()).state


def critical(text_of: Callable[[float], str], low: float, high: float, finer: int = FINE) -> float:
    """The load between two at which the least eigenvalue of a scenario's still-air tangent vanishes."""
    near = 1e-10 * max(abs(low), abs(high))
    return float(brentq(lambda p: stability.modes(*unbuckled(text_of(p), finer), 1).value[0], low, high, rtol=1e-10, xtol=near))


def cross_stays(
    level: str, stiffness: float, reach: float = 10.0, *, taut: float = TAUT, middle: float = 0.0, of: str = "mast", at: str = ""
) -> str:
    """Four straight level stays that hold a spar at a level [m] sideways with so many N/m and leave it free to sink.

    Along a stay EA/L0 = (EA + T)/c with T its tension and c its length, across it T/c: together (2 EA + 4 T)/c.  T, `taut` of EA, is more
    than the stays slacken by, and little enough not to carry what the mast sinks onto them.
    middle : [m] east of the origin where the spar is there;  of, at : the spar and the place along it, the mast's at that height without
    """
    EA = stiffness * reach / (2 + 4 * taut)
    ends = {"n": (middle, reach), "e": (middle + reach, 0.0), "s": (middle, -reach), "w": (middle - reach, 0.0)}
    unstressed = f'length = "{reach / (1 + taut)!r} m"'
    stays = "".join(guy(n, at or level, n, unstressed, "stay", of) for n in ends)
    anchors = "".join(anchor(n, f"{east!r} m", f"{north!r} m", level) for n, (east, north) in ends.items())
    return anchors + stays + rope(f"{EA!r} N", name="stay", mass="0 kg/m") + STRAIGHT
