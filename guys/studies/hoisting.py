"""What is judged of a raising, and what must not pass in silence.

One item for each part of the tackle: demand and capacity as in `guys.checks.demands`, over every stage in still air and in every wind.
Factors required are those of the file, `allowables.cable` for the lines, and 1 against capacities, which are working loads.  Cautions are
common practice.
"""

from __future__ import annotations

import math
from collections.abc import Iterator, Sequence
from typing import Any

import numpy as np

from guys import tilting, units
from guys.checks import allowables
from guys.checks.demands import Demands, Item, beside, group
from guys.checks.extremes import first_greatest
from guys.loads import CaseLine
from guys.results import Finding
from guys.rotation import Array
from guys.studies.raising import Raised

CAUTIONS = (
    "An estimate, to be confirmed by a competent, licensed person under the local code.",
    "Nobody under the spar, in its fall to either side, or in line with a taut line; one person leads and is heard.",
    "Stop before the load changes side; go on only with the holding line in hand and its crew ready. It never goes slack after that.",
    "Side guys are watched at every stage. All guys fast before a line of the tackle is let go.",
    "Look up for lines; ask about services before driving anything. Lowering is raising backwards: the same forces, the same care.",
)
NOT_CHECKED = (
    "what holds winch, holding line and backstay to the ground",
    "weight of the tackle's lines, and wind on them and on the gin pole",
    "bending and buckling of the gin pole, its seat and what keeps it square to the spar",
    "jerks, a stuck sheave, a slipping grip: forces are those of slow, steady hauling",
    "shackles, blocks, lugs and knots",
)
SHOWN = 1e-3
"""Share of the greatest tension of the tackle below which a force is none: what next to weightless lines and rounding leave."""
LOOSENS = 1e-3
"""Change of a side guy's chord, of its height, above which it must be eased or taken in: a wire's stretch at a tenth of its strength."""
BENDS = 0.05
"""Share by which the spar's own bending may change the hoist line's tension before it is told."""


def findings(raised: Raised) -> tuple[Finding, ...]:
    """Everything judged over all stages and winds, the nearest to its allowable first."""
    lines = [CaseLine(angle_words(a), w, 1.0, float(not math.isnan(w)), 0.0, 0.0) for a in raised.angle for w in raised.wind_from]
    return allowables.findings(_demands(raised), lines)


def angle_words(angle: float) -> str:
    """An angle of the spar."""
    return f"{math.degrees(angle):.4g}°"


def _demands(raised: Raised) -> Demands:
    lift, raising = raised.lift, raised.lift.raising
    allowed, pole = lift.scenario.allowables, raising.gin_pole
    usual = "cable" in allowed.defaulted
    hoist, holding = lift.strength
    groups = [
        _line("hoist line", np.fmax(raised.hoist, raised.winch), hoist, allowed.cable, "raise.rope", usual),
        _line("lifting line", raised.lift_line, hoist, allowed.cable, "raise.rope", usual),
        _line("holding line", raised.holding, holding, allowed.cable, "raise.holding.rope", usual),
        _part("winch", "pull", raised.winch, raising.winch.capacity, "raise.winch.capacity"),
        _part("gin pole", "thrust", raised.gin_pole, pole.capacity, "raise.gin_pole.capacity"),
        _part("lift point", "pull", raised.lift_line, raising.lift_capacity, "raise.lift_capacity"),
        _part("hinge", "force", np.linalg.norm(raised.on_hinge, axis=-1), raising.hinge_capacity, "raise.hinge_capacity"),
    ]
    if pole.backstay is not None:
        groups.append(_part("backstay", "tension", raised.backstay, pole.backstay.capacity, "raise.gin_pole.backstay.capacity"))
    groups.append(raised.judged)
    return beside(groups)


def _line(thing: str, tension: Array, strength: float, required: float, key: str, usual: bool) -> Demands:
    item = Item(thing, "tension", "N", "least breaking load over tension", f"no strength given: {key}", default=usual)
    return group([item], tension.reshape(-1, 1), strength, required)


def _part(thing: str, quantity: str, load: Array, capacity: float | None, key: str) -> Demands:
    item = Item(thing, quantity, "N", "capacity over load", f"no capacity given: {key}")
    return group([item], np.maximum(load, 0.0).reshape(-1, 1), math.nan if capacity is None else capacity, 1.0)


# ---------------------------------------------------------------- words


def warnings(raised: Raised) -> tuple[str, ...]:
    """What must be known before anyone hauls, the gravest first."""
    parts = (_not_held, _changes_side, _gin_pole, _backstay, _hinge_lifted, _no_lever, _side_guys, _left_out, _bends)
    return tuple(dict.fromkeys([line for part in parts for line in part(raised)] + list(raised.lift.scenario.warnings)))


def crossing(angle: Array, value: Array) -> float:
    """The first angle [rad] at which a value (stage,) falls below zero, between stages in proportion; NaN: never."""
    for k in range(len(angle)):
        if value[k] < 0:
            if k == 0 or not value[k - 1] >= 0:
                return float(angle[k])
            share = value[k - 1] / (value[k - 1] - value[k])
            return float(angle[k - 1] + share * (angle[k] - angle[k - 1]))
    return math.nan


def lifted_off(raised: Raised) -> float:
    """Angle [rad] from which the gin pole is pulled and no longer pushed in still air, while the line that lifts carries; NaN: never."""
    slack = raised.hoist[:, 0] < SHOWN * largest(raised)
    return crossing(raised.angle, np.where(slack, np.nan, raised.gin_pole[:, 0]))


def largest(raised: Raised) -> float:
    """The greatest tension in the tackle [N]."""
    every = np.concatenate([raised.hoist.ravel(), raised.lift_line.ravel(), raised.holding.ravel()])
    return float(np.nanmax(every, initial=0.0))


def over_in_wind(raised: Raised) -> float:
    """The first angle [rad] at which the load changes side in some wind; NaN: never, or no wind."""
    if len(raised.wind_from) == 1:
        return math.nan
    return crossing(raised.angle, -raised.moment[:, 1:].max(axis=1))


def _newtons(value: float) -> str:
    return units.both(value, "force")


def _place(raised: Raised, stage: int, case: int) -> str:
    wind = raised.wind_from[case]
    return angle_words(raised.angle[stage]) + ("" if math.isnan(wind) else f", wind from {math.degrees(wind):.4g}°")


def _stages(raised: Raised, which: Any) -> str:
    """The stages (stage,) as ranges of angles."""
    places = np.flatnonzero(which)
    runs = np.split(places, np.flatnonzero(np.diff(places) > 1) + 1)
    ends = [(angle_words(raised.angle[r[0]]), angle_words(raised.angle[r[-1]])) for r in runs if len(r)]
    return ", ".join(a if a == b else f"{a} to {b}" for a, b in ends)


def _not_held(raised: Raised) -> Iterator[str]:
    bad = ~raised.stands
    for stage in np.flatnonzero(bad.any(axis=1))[:4]:
        case = int(np.argmax(bad[stage]))
        yield f"{_place(raised, stage, case)}: nothing holds the spar: {raised.reason[stage][case] or raised.state[stage][case]}"
    if bad.any(axis=1).sum() > 4:
        yield f"nothing holds the spar in some case at {_stages(raised, bad.any(axis=1))}"


def _changes_side(raised: Raised) -> Iterator[str]:
    lift = raised.lift
    still, wind = raised.over, over_in_wind(raised)
    last = float(raised.angle[-1])
    goes_over = not math.isnan(still) and still < last
    greatest = float(np.nanmax(raised.holding, initial=0.0))
    if goes_over:
        moment = float(np.nanmax(raised.moment[:, 0]))
        yield (
            f"the load changes side at {angle_words(still)} in still air: beyond it the spar goes over by itself, "
            f"with up to {units.both(moment, 'moment')} about the hinge, and the holding line must hold it"
        )
    if not math.isnan(wind):
        yield f"in wind the holding line is needed from {angle_words(wind)} already; its greatest tension is {_newtons(greatest)}"
    if lift.assumed and (goes_over or not math.isnan(wind)):
        where = f"bearing {math.degrees(lift.holding.bearing) % 360:.4g}°, radius {units.both(lift.holding.radius, 'length')}"
        yield f"no holding line is given: one from the lift point to {where} is assumed; give raise.holding"


def _gin_pole(raised: Raised) -> Iterator[str]:
    at = lifted_off(raised)
    if not math.isnan(at):
        greatest = -float(np.nanmin(np.where(raised.hoist > SHOWN * largest(raised), raised.gin_pole, np.nan)))
        if raised.lift.rig.turning:
            yield f"the gin pole is pulled off its seat from {angle_words(at)}, by up to {_newtons(greatest)}: its foot must be held fast"
        else:
            yield f"the gin pole is lifted off from {angle_words(at)}: take it away before, or hold its foot against {_newtons(greatest)}"


def _backstay(raised: Raised) -> Iterator[str]:
    which = raised.pushes.any(axis=1)
    if which.any():
        greatest = float(np.nanmax(np.where(raised.pushes, raised.level, np.nan)))
        yield (
            f"the gin pole's backstay would have to push at {_stages(raised, which)}: its head is drawn the other way, by up to "
            f"{_newtons(greatest)}, and needs a stay toward the spar"
        )
    pole = raised.lift.raising.gin_pole
    pulled = np.where(raised.pushes, np.nan, raised.level)
    if pole.kind == "standing" and pole.backstay is None and np.nanmax(pulled, initial=0.0) > SHOWN * largest(raised):
        yield f"no backstay is given: the gin pole's head must be held level against {_newtons(float(np.nanmax(pulled)))}"


def _hinge_lifted(raised: Raised) -> Iterator[str]:
    up = raised.on_hinge[..., 2]
    if np.nanmax(up, initial=0.0) > SHOWN * largest(raised):
        stage, case = np.unravel_index(first_greatest(up), up.shape)
        yield f"the hinge is pulled upward by {_newtons(float(up[stage, case]))} at {_place(raised, int(stage), int(case))}: hold it down"


def _no_lever(raised: Raised) -> Iterator[str]:
    lever = tilting.lever(raised.lift.rig, raised.lift.rig.lifts)
    needed = np.isnan(raised.rigid)
    if needed.any():
        yield (
            f"the line has no lever about the hinge at {_stages(raised, needed.any(axis=1))}, where the load still asks for it: "
            "guys must hold the spar there"
        )
    elif (lever <= 0).any() and not raised.lift.guys:
        yield f"the line has no lever about the hinge at {_stages(raised, lever <= 0)}"


def _side_guys(raised: Raised) -> Iterator[str]:
    lift = raised.lift
    anchors = {a.name: a for a in lift.scenario.anchor}
    for k, guy in enumerate(lift.guys):
        change = raised.guy_change[:, k]
        low, high = float(change.min()), float(change.max())
        if high - low > LOOSENS * guy.from_.at:
            anchor = anchors[guy.to.anchor]  # type: ignore[union-attr]
            place = np.array([anchor.east, anchor.north, anchor.level]) - lift.rig.hinge
            off = float(np.linalg.norm(place - (place @ lift.rig.axis) * lift.rig.axis))
            if guy.length is not None:
                how = "made fast at its length it tightens or goes slack on the way"
            else:
                how = f"tended to its {'tension' if guy.tension is not None else 'tightness'} it must be let out or taken in by that"
            yield (
                f'side guy "{guy.name}": its anchor is {units.both(off, "length")} off the line of the hinge\'s axis, so that its length '
                f"changes from {units.both(low, 'length')} to {units.both(high, 'length')} against that of the spar as drawn; {how}"
            )
        elif raised.slack[..., k].any():
            yield f'side guy "{guy.name}" drops at {_stages(raised, raised.slack[..., k].any(axis=1))}'


def _left_out(raised: Raised) -> Iterator[str]:
    scenario, spar = raised.lift.scenario, raised.lift.spar
    others = [s.name for s in scenario.spar if s.name != spar.name]
    if others:
        yield f"not on the spar while it is raised: {_listed(others)}"
    if scenario.wind is None:
        yield "still air alone: the file has no [wind]"


def _listed(names: Sequence[str]) -> str:
    return ", ".join(f'"{name}"' for name in names)


def _bends(raised: Raised) -> Iterator[str]:
    """How far the answer is from rigid statics, where the line that lifts carries more than a tenth of its greatest pull."""
    carried = raised.hoist if raised.lift.rig.turning else raised.lift_line
    weighty = carried[:, 0] > 0.1 * np.nanmax(carried[:, 0], initial=0.0)
    difference = np.where(weighty, np.abs(carried[:, 0] - raised.rigid[:, 0]), 0.0) / np.where(weighty, carried[:, 0], 1.0)
    if np.nanmax(difference, initial=0.0) > BENDS:
        at = int(np.nanargmax(difference))
        yield f"the spar bends enough to change the line that lifts by {100 * difference[at]:.0f} % at {angle_words(raised.angle[at])}"
