"""Demand against capacity, one finding for each thing that can be judged, and "not judged" for what cannot.

cable    strength / greatest tension                          at least allowables.cable
sliding  friction x down / sideways, at every ground foot     at least allowables.sliding
lean     allowed / greatest angle between the drawn axis and the line foot-head, in cases with wind
anchor   holding / pull                                       not judged: needs a holdfast

The demand is the greater of the listed cases and the refined peak over the full circle of winds.  Nothing is called safe: the words are
"within" and "past" the allowable.
"""

from __future__ import annotations

import math
from dataclasses import replace

from guys.results import AnchorWorst, CableWorst, Extreme, Finding, Verdict
from guys.scenario import Scenario
from guys.scenario.model import GroundFoot

NO_LOAD = "no case has an equilibrium, so there is no load to judge"


def findings(
    scenario: Scenario,
    cables: tuple[CableWorst, ...],
    anchors: tuple[AnchorWorst, ...],
    slides: dict[str, Extreme],
    leans: dict[str, Extreme],
) -> tuple[Finding, ...]:
    """All findings, the nearest to its allowable first, what is not judged last.

    slides : greatest sideways/down of every ground spar;  leans : greatest lean of every spar in cases with wind [rad]
    """
    out = [_cable(scenario, c) for c in cables]
    out += [_slide(scenario, spar.name, spar.friction, slides[spar.name]) for spar in scenario.spar if isinstance(spar.foot, GroundFoot)]
    out += [_lean(scenario, name, extreme) for name, extreme in leans.items() if not math.isnan(extreme.peak)]
    out += [_anchor(scenario, a) for a in anchors]
    order = {"past": 0, "within": 1, "not judged": 2}
    return tuple(sorted(out, key=lambda f: (order[f.verdict], _reserve(f))))


def unjudged(found: tuple[Finding, ...]) -> tuple[Finding, ...]:
    """The findings where no case stands: what an equilibrium that does not hold bears says nothing of an allowable."""
    return tuple(f if f.verdict == "not judged" else replace(f, factor=math.nan, verdict="not judged", why="no case stands") for f in found)


def _reserve(finding: Finding) -> float:
    """Factor over the one required, to eight digits, so that what is alike but for rounding stays in the order of the file."""
    return math.inf if math.isnan(finding.factor) else float(f"{finding.factor / finding.required:.8g}")


def _judge(factor: float, required: float) -> Verdict:
    if math.isnan(factor):
        return "not judged"
    return "within" if factor >= required else "past"


def _cable(scenario: Scenario, worst: CableWorst) -> Finding:
    required = scenario.allowables.cable
    t = worst.tension
    why = (
        "its rope has no strength" if math.isnan(worst.strength) else NO_LOAD if math.isnan(t.peak) else "least breaking load over tension"
    )
    return Finding(
        f"cable {worst.name}", "tension", t.peak, worst.strength, "N", required, worst.factor, _judge(worst.factor, required), t.peak_case,
        t.peak_wind_from, why, "cable" in scenario.allowables.defaulted,
    )  # fmt: skip


def _slide(scenario: Scenario, name: str, friction: float | None, slide: Extreme) -> Finding:
    required = scenario.allowables.sliding
    factor = math.nan
    if friction is not None and not math.isnan(slide.peak):
        factor = math.inf if slide.peak == 0 else friction / slide.peak
    why = "no friction given for its base" if friction is None else NO_LOAD if math.isnan(slide.peak) else "friction over sideways/down"
    return Finding(
        f"base of {name}", "sideways/down", slide.peak, math.nan if friction is None else friction, "", required, factor, _judge(factor,
        required),
        slide.peak_case, slide.peak_wind_from, why, "sliding" in scenario.allowables.defaulted,
    )  # fmt: skip


def _lean(scenario: Scenario, name: str, lean: Extreme) -> Finding:
    allowed = scenario.allowables.lean
    factor = math.inf if lean.peak == 0 else allowed / lean.peak
    return Finding(
        f"spar {name}", "lean", lean.peak, allowed, "rad", 1.0, factor, _judge(factor, 1.0), lean.peak_case, lean.peak_wind_from,
        "allowed over found, foot to head against the drawn axis", "lean" in scenario.allowables.defaulted,
    )  # fmt: skip


def _anchor(scenario: Scenario, worst: AnchorWorst) -> Finding:
    pull = worst.resultant
    return Finding(
        f"anchor {worst.name}", "pull", pull.peak, math.nan, "N", scenario.allowables.anchor, math.nan, "not judged", pull.peak_case,
        pull.peak_wind_from, "no holdfast given: what holds it is not checked", "anchor" in scenario.allowables.defaulted,
    )  # fmt: skip
