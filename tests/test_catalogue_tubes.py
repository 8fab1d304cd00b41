"""Tubes of the catalogue against weights printed in pipe tables, and what is copied from the list into a scenario."""

from __future__ import annotations

import tomllib

import pytest
from toml_text import MAST, dumps

from guys import parse_scenario, units
from guys.catalogue import tubes
from guys.catalogue.listing import KINDS
from guys.sections import properties

PIPE = {"1in-sch40": 1.68, "2in-sch40": 3.66, "3in-sch40": 7.58, "4in-sch40": 10.80, "6in-sch40": 18.99, "2in-sch80": 5.03}
"""Pipes [lb/ft], ASME B36.10M, from memory."""
METRIC = {"48.3x3.2mm": 3.56, "60.3x2.9mm": 4.11, "88.9x3.2mm": 6.76, "114.3x3.6mm": 9.83}
"""[kg/m], EN 10220, from memory."""
PRINTED = 0.006
"""Tables round to two decimals, and take 7,850 or 7,830 kg/m3."""


@pytest.mark.parametrize(("name", "weight"), [(f"pipe-{n}", units.to_si(w, "lb/ft")) for n, w in PIPE.items()] + list(METRIC.items()))
def test_weight_per_length(name: str, weight: float) -> None:
    tube = next(each for each in tubes.listed() if each.name == name)
    assert 7850.0 * tube.area == pytest.approx(weight, rel=PRINTED)


def test_what_is_copied_is_read_back_as_the_tube_listed() -> None:
    listing = KINDS["tubes"]()
    for tube, row in zip(tubes.listed(), listing.rows, strict=True):
        copied = tomllib.loads(str(row[-1]))
        spar = {**MAST["spar"][0], "section": [{"length": "12 m", **copied, "material": "steel", "drag": 1.2}]}
        section = parse_scenario(dumps({**MAST, "spar": [spar]})).spar[0].section[0]
        assert section.tube is not None
        assert (section.tube.diameter, section.tube.wall) == (tube.diameter, tube.wall)
    scenario = parse_scenario(dumps({**MAST, "spar": [spar]}))
    assert properties(section, scenario.material, None).mass == pytest.approx(7850.0 * tube.area, rel=1e-12)
