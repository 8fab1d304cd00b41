"""What to install at an anchor, in a crew's words: the holdfast with the dimensions it is made to."""

from __future__ import annotations

from math import nan

from guys.drawing.rounding import Tongue, angle, capacity, length, mass, moment, thickness
from guys.holdfasts.deadman import trench
from guys.scenario.holding import Block, Deadman, Holdfast, Picket, Rock, Screw, Tested


def install_words(holdfast: Holdfast, tongue: Tongue, pull: float = nan) -> str:
    """One line, such as "block of 2000 kg"; pull : angle of the greatest pull above the horizontal [rad], NaN where there is none."""
    if isinstance(holdfast, Block):
        return f"block of {tongue.say(mass, holdfast.mass)}{_sides(holdfast, tongue)}"
    if isinstance(holdfast, Deadman):
        face = f"{tongue.say(length, holdfast.length)} long, {tongue.say(length, holdfast.height)} high"
        return f"{holdfast.form}, {face}, its middle {tongue.say(length, holdfast.depth)} deep{_behind(holdfast, tongue, pull)}"
    if isinstance(holdfast, Picket):
        return f"{holdfast.pattern} pickets" if "-" in holdfast.pattern else "one picket"
    if isinstance(holdfast, Screw):
        return _screw(holdfast, tongue)
    if isinstance(holdfast, Rock):
        return f"bar of {tongue.say(thickness, holdfast.bar)}, {tongue.say(length, holdfast.bond_length)} bonded{_lean(holdfast.rod)}"
    assert isinstance(holdfast, Tested)
    return f"as tested with {tongue.say(capacity, holdfast.pull)}"


def _behind(deadman: Deadman, tongue: Tongue, pull: float) -> str:
    return f", {tongue.say(length, trench(deadman.depth, pull)[0])} behind the anchor" if pull > 0.0 else ""


def _sides(block: Block, tongue: Tongue) -> str:
    sides = [tongue.say(length, side) for side in (block.length, block.width, block.height) if side is not None]
    return f", {' by '.join(sides)}" if len(sides) == 3 else ""


def _screw(screw: Screw, tongue: Tongue) -> str:
    plates = " and ".join(dict.fromkeys(tongue.say(thickness, d) for d in screw.helix))
    torque = screw.torque if screw.soil is None else screw.soil.torque
    turned = "" if torque is None else f", turned in to {tongue.say(moment, torque)}"
    count = f"{len(screw.helix)} plates of " if len(screw.helix) > 1 else "plate of "
    return f"screw, {count}{plates}, lowest {tongue.say(length, screw.depth)} deep{turned}{_lean(screw.rod)}"


def _lean(rod: float | None) -> str:
    return ", in line with the pull" if rod is None else f", at {angle(rod)} from the ground"
