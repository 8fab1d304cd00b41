"""Cables: what the weakest link of each holds over the tension of its greater end, its clips, and its initial tension.

Every link carries the whole tension, so the weakest (`guys.scenario.parts`) is the same in every case.  Where the rope has no strength the
cable is not judged, whatever its parts have; those with a strength of their own are then judged by themselves.

Clips, number at each end and spacing with D the rope's diameter in inches, the number rounded up (TM 5-5420-278-10, p. 0035 00-16, read):

    3 D + 1        6 D + 1 inches
"""

from __future__ import annotations

import math

import numpy as np

from guys.checks.items import Demands, Item, group
from guys.constants import INCH
from guys.rotation import Array
from guys.scenario import parts
from guys.scenario.model import Cable, Scenario
from guys.structure import Structure

USUAL = (0.07, 0.15)
USUAL_SOURCE = "Planning Advisory Notice on ANSI/TIA-222-H, 13.3.2, read"
"""Usual initial tension over the rope's breaking load."""
CLIPS = "clips"
"""Ends whose name holds this are made with wire rope clips."""


def demands(structure: Structure, tension: Array) -> Demands:
    """Strength against tension, one item a cable; tension : (case, cable) [N] of the greater end.

    Beside them the weakest of the parts with a strength of their own, of each cable whose rope has none.
    """
    scenario = structure.scenario
    default = "cable" in scenario.allowables.defaulted
    links = [links_of(scenario, cable) for cable in scenario.cable]
    items = [_whole(cable, some, default) for cable, some in zip(scenario.cable, links, strict=True)]
    alone = [(k, least) for k, some in enumerate(links) if some[0].holds is None and (least := parts.weakest(some)) is not None]
    items += [
        Item(
            f"cable {scenario.cable[k].name}, {link.name}", "tension", "N", "its breaking load over tension; the rope is not judged",
            source=link.source, default=default, allowable="cable",
        )
        for k, link in alone
    ]  # fmt: skip
    holds = [*structure.cables.strength, *(link.holds for _, link in alone)]
    columns = np.concatenate([tension, tension[:, [k for k, _ in alone]]], axis=1)
    mode = np.array([0 if item.modes else -1 for item in items], dtype=np.int64)
    return group(items, columns, np.array(holds, dtype=float), scenario.allowables.cable, mode)


def links_of(scenario: Scenario, cable: Cable) -> tuple[parts.Link, ...]:
    """The links of a cable."""
    return parts.chain(scenario.rope[cable.rope].strength, cable.ends, scenario.part)


def _whole(cable: Cable, links: tuple[parts.Link, ...], default: bool) -> Item:
    least = parts.weakest(links)
    if links[0].holds is None or least is None:
        apart = f"; {least.name} is judged by itself" if least is not None else ""
        shares = [link.name for link in links if link.share is not None]
        shared = f", so {', '.join(shares)} cannot be judged" if shares else ""
        lacking = f"its rope has no strength{shared}{apart}"
        return Item(f"cable {cable.name}", "tension", "N", "", lacking, default=default, allowable="cable")
    why = "least breaking load over tension" if not cable.ends else "what its weakest link holds over tension"
    modes = (least.words,) if cable.ends else ()
    return Item(f"cable {cable.name}", "tension", "N", why, source=least.source, default=default, modes=modes, allowable="cable")


def clips(diameter: float) -> tuple[int, float]:
    """Number of clips at each end of a rope of that diameter [m], and their spacing [m]."""
    inches = diameter / float(INCH)
    return math.ceil(3 * inches + 1 - 1e-9), (6 * inches + 1) * float(INCH)


def notes(scenario: Scenario) -> tuple[str, ...]:
    """Clips at the ends made with them, once for each rope."""
    ropes = dict.fromkeys(cable.rope for cable in scenario.cable if any(CLIPS in end for end in cable.ends))
    return tuple(_clip_words(name, scenario.rope[name].diameter) for name in ropes)


def _clip_words(rope: str, diameter: float) -> str:
    number, spacing = clips(diameter)
    rule = "3 D + 1 clips, 6 D + 1 in apart (TM 5-5420-278-10)"
    return f"rope {rope}: {number} clips at each end, {spacing * 1e3:.0f} mm ({spacing / float(INCH):.1f} in) apart; {rule}"


def usual_words() -> str:
    """The usual band of initial tensions, with its source."""
    least, most = (100 * share for share in USUAL)
    return f"{least:.0f} to {most:.0f} % ({USUAL_SOURCE})"


def initial(scenario: Scenario, setting: Array) -> Array:
    """(cable,) initial tension over the rope's breaking load, NaN where none is given; setting : (cable,) still-air tension [N]."""
    strength = [scenario.rope[cable.rope].strength for cable in scenario.cable]
    return np.asarray(setting / np.array([math.nan if s is None else s for s in strength], dtype=float))
