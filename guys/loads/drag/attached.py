"""Force coefficients of fittings: the user's own, or one chosen from the shape, and where on a sign the force acts.

    flat     a sign (EN panel, or ASCE 7 solid sign with h to its top above the lowest foot on the ground), or with a solidity of at most
             0.7 an open frame; on the solid area, which for a sign with openings is that share of its outline
    round    an upright round body with free ends: by Reynolds number and roughness, times the end effect of its slenderness

A sign's wind acts on its two edges, shared so that their resultant stands where the case puts it: in the middle, or aside.  Aside in
strips it is the resultant of ASCE 7, case C.
"""

from __future__ import annotations

import numpy as np

from guys.loads.drag import angular, chosen, round, signs
from guys.rotation import Array
from guys.scenario import Fitting, Scenario
from guys.scenario.model import Wind
from guys.scenario.shapes import Rules, roughness

LEFT, RIGHT = "to the left", "to the right"
STRIPS = "in strips from the "
ASIDE: tuple[str, ...] = (LEFT, RIGHT)
IN_STRIPS: tuple[str, ...] = (f"{STRIPS}left", f"{STRIPS}right")
"""Where a case may put the forces on signs, for one who looks at their faces; "" is the middle."""


def asides(scenario: Scenario) -> tuple[str, ...]:
    """Where the forces on signs stand in the cases of a scenario: in the middle, and where it has signs also aside."""
    faces = [f for spar in scenario.spar for f in spar.fitting if f.sign]
    if not faces or scenario.wind is None:
        return ("",)
    long = scenario.wind.rules == "asce7" and any(_ratio(f) >= signs.STRIPS_FROM for f in faces)
    return ("", *ASIDE, *(IN_STRIPS if long else ()))


def _ratio(sign: Fitting) -> float:
    return (sign.width or 0.0) / (sign.height or np.inf)


def push(sign: Fitting, rules: Rules, top: float, aside: str) -> signs.Push:
    """Coefficient on the solid area of a sign, its upper edge `top` [m] above the ground, and how far to the left the force stands."""
    width, height = sign.width or 0.0, sign.height or 0.0
    solid = sign.solidity or 1.0
    to_left = 0.0 if not aside else 1.0 if aside.endswith("left") else -1.0
    if rules == "en":
        return signs.Push(signs.EN_PANEL / solid, signs.EN_SIDE * to_left)
    openings = signs.perforated(solid) / solid
    if aside.startswith(STRIPS) and _ratio(sign) >= signs.STRIPS_FROM:
        found = signs.asce7_strips(width, height, top)
        return signs.Push(found.coefficient * openings, found.offset * to_left)
    return signs.Push(signs.asce7(width, height, top) * openings, signs.ASCE_SIDE * to_left)


def coefficient(fitting: Fitting, scenario: Scenario, wind: Wind, q: Array, iced: chosen.Flags) -> Array:
    """Coefficient (case,) on the area of a fitting that is no sign, in pressures q (case,)."""
    if fitting.drag is not None:
        return np.full_like(q, fitting.drag)
    if fitting.open_frame and fitting.solidity is not None:
        return angular.open_frame(fitting.solidity, fitting.bar, q)
    if fitting.shape == "round" and fitting.width is not None and fitting.height is not None:
        bare = chosen.round_bar(wind, np.full_like(q, fitting.width), q, np.full_like(q, roughness(fitting.surface)))
        ends = round.end_effect(round.slenderness(fitting.height, fitting.width, True))
        return np.asarray(ends * np.where(iced, chosen.iced_round(scenario), bare))
    return np.zeros_like(q)
