"""Handbook A16 and C3. Equivalent steel area of aircraft-type cable by its stretch factor: EA over 29,000,000 psi, that of solid steel."""

from __future__ import annotations

from collections.abc import Iterator

from guys import units
from guys.catalogue.rope import elastic
from guys.constants import INCH
from tests.published.compare import Allowance, Row, published

AREAS = {
    "3/16": {"1x7": "0.01834", "1x19": "0.01737", "7x7": "0.01133", "7x19": "0.00866"},
    "1/4": {"1x7": "0.03261", "1x19": "0.03088", "7x7": "0.02014", "7x19": "0.01539"},
    "5/16": {"1x7": "0.05095", "1x19": "0.04824", "7x7": "0.03147", "7x19": "0.02405"},
}
"""[in2]; 1x19 of 5/16 in is printed .04624, its own printed diameter .2478 in gives .0482."""


THREE_FIGURES = Allowance(0.0005, "stretch factors have three figures", share=True)


@published("HB A16", "READ(2nd)")
def test_equivalent_area() -> Iterator[Row]:
    """Three diameters of 1x7, 1x19, 7x7 and 7x19.

    Source: a research note on guy cables that quotes a rope maker's stretch factors 6.61, 6.98, 10.7 and 14.0 e-6, read. One misprint, see
    the table.
    """
    for size, areas in AREAS.items():
        diameter = units.parse(f"{size} in", "length")
        for construction, area in areas.items():
            stiffness = elastic()[construction].of(diameter, 0.0).used
            ours = stiffness / units.parse("29000000 psi", "pressure") / float(INCH) ** 2
            yield Row(f"{size} in {construction}", "in2", area, ours, THREE_FIGURES)
