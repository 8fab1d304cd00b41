"""Parts of the load path: every row says where it is from and can be used; terminations rank as the trade ranks them."""

from __future__ import annotations

import pytest

from guys import units
from guys.catalogue.known import FROM_MEMORY, MARKS, of_memory
from guys.catalogue.parts import parts

SHORT_TON = 2000.0
"""[lbf] of a short ton, which RR-C-271 rates shackles in."""


@pytest.mark.parametrize("part", parts().values(), ids=lambda part: part.name)
def test_each_part_takes_a_share_or_has_a_strength_and_says_whence(part) -> None:
    assert (part.efficiency is None) != (part.strength is None)
    assert part.efficiency is None or 0.0 < part.efficiency <= (part.efficiency_high or 1.0) <= 1.0
    assert part.known.split(";")[0] in MARKS
    assert (of_memory(part.known) is not None) == part.known.endswith(FROM_MEMORY)
    assert (FROM_MEMORY in part.source) == (of_memory(part.known) is not None)
    assert part.name == part.name.lower()
    assert not set(part.name) - set("abcdefghijklmnopqrstuvwxyz0123456789/-")


def test_terminations_in_the_order_of_the_trade() -> None:
    share = {name: part.efficiency for name, part in parts().items()}
    order = ["knot", "bowline", "figure-eight", "thimble-clips", "swaged-ferrule", "poured-socket"]
    assert [share[name] for name in order] == sorted({share[name] for name in order})
    assert share["wedge-socket"] < share["swaged-ferrule"]


@pytest.mark.parametrize("kind", ["shackle", "turnbuckle"])
def test_strength_grows_with_size_about_as_its_square(kind: str) -> None:
    found = [(units.parse(p.name.split("-")[1].replace("in", " in"), "length"), p.strength) for p in parts().values() if p.kind == kind]
    assert found == sorted(found)
    stress = [strength / size**2 for size, strength in found]
    assert max(stress) < 1.5 * min(stress), "forged in one grade: stress on the square of the size spreads by less than half"


def test_shackles_by_five_times_their_rating_in_short_tons() -> None:
    """RR-C-271, from memory: 1/2 in 2 short tons, 3/4 in 4 3/4, strength five times the rating."""
    assert parts()["shackle-1/2in"].strength == pytest.approx(5 * 2 * SHORT_TON * 4.4482216152605)
    assert parts()["shackle-3/4in"].strength == pytest.approx(5 * 4.75 * SHORT_TON * 4.4482216152605)
