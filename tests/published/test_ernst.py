"""A7.  Equivalent modulus of a sagging cable: Ernst, Der Bauingenieur (1965), and EN 1993-1-11."""

from __future__ import annotations

from collections.abc import Iterator

import numpy as np
from scipy.optimize import brentq

from guys import cable
from tests.published.compare import Allowance, Row, published

CHORD, SLOPE, MODULUS, WEIGHT, AREA = 150.0, np.pi / 4, 165e9, 78.5e3, 1e-3
ALONG = np.array([np.cos(SLOPE), 0, np.sin(SLOPE)])
TABLE = ((50, "0.11526", "0.11593", 0.0063), (100, "0.51183", "0.51197", 4e-4), (200, "0.89372", "0.89353", 3e-4),
         (400, "0.98539", "0.98532", 1e-4), (800, "0.99816", "0.99814", 3e-5))  # fmt: skip
"""Stress [MPa]; exact and Ernst's share of EA/L0; share by which Ernst's parabola is off."""


def _hung(length: float) -> cable.Hanging:
    load = np.array([[0.0, 0, -WEIGHT * AREA * length]])
    return cable.hang(CHORD * ALONG[None], np.array([length]), np.array([MODULUS * AREA]), load)


def _share(stress: float) -> float:
    """Chord stiffness over EA/L0 of the cable whose tension at mid-length has that component along its chord."""
    taut = CHORD / (1 + stress / MODULUS)
    length = brentq(lambda x: _hung(x).tension[0] @ ALONG - stress * AREA, 0.9 * taut, 1.2 * taut, xtol=1e-12 * CHORD)
    return float(ALONG @ _hung(length).stiffness[0] @ ALONG * length / (MODULUS * AREA))


@published("A7", "MEMORY")
def test_equivalent_modulus() -> Iterator[Row]:
    """Stiffness of a cable along its chord, 150 m at 45 degrees, as a share of EA/L0, at five stresses.

    Source: E/(1 + (g l)^2 E/(12 s^3)), Ernst (1965) and EN 1993-1-11, formula from memory; the exact values worked out from the catenary
    by scalar equations. Allowed: half a unit of the last digit; against Ernst, what his parabola is off by: 0.6 % at 50 MPa, falling to
    0.003 % at 800 MPa.
    """
    for stress, exact, ernst, parabola in TABLE:
        ours = _share(stress * 1e6)
        yield Row(f"exact catenary at {stress} MPa", "-", exact, ours, mark="WORKED OUT")
        yield Row(f"Ernst at {stress} MPa", "-", ernst, ours, Allowance(parabola, "a parabola of constant tension", share=True))
        level = CHORD * np.cos(SLOPE)
        formula = 1 / (1 + (WEIGHT * level) ** 2 * MODULUS / (12 * (stress * 1e6) ** 3))
        yield Row(f"Ernst's formula itself at {stress} MPa", "-", ernst, formula)
