"""C2.  A cantilever rolled up by an end moment: Sze, Liu & Lo, Finite Elem. Anal. Des. 40 (2004) 1551-1569."""

from __future__ import annotations

from collections.abc import Iterator
from dataclasses import replace
from functools import cache

import numpy as np
from numpy.typing import NDArray

from tests.published import rods
from tests.published.compare import Allowance, Row, published, second_order

LENGTH = 12.0
MESHES = (20, 40, 80)
TABLE = (
    ("0.196", "1.870"), ("0.774", "3.648"), ("1.699", "5.248"), ("2.918", "6.598"), ("4.361", "7.639"),
    ("5.945", "8.333"), ("7.585", "8.664"), ("9.194", "8.637"), ("10.688", "8.281"), ("12.000", "7.639"),
    ("13.073", "6.775"), ("13.871", "5.758"), ("14.377", "4.665"), ("14.595", "3.571"), ("14.546", "2.546"),
    ("14.270", "1.650"), ("13.818", "0.926"), ("13.247", "0.405"), ("12.621", "0.098"), ("12.000", "0.000"),
)  # fmt: skip
"""u along and w across, for M L/(2 pi EI) = 0.05, 0.10 ... 1.00."""
LEFT = Allowance(5e-4, "what two extrapolations leave of the mesh error")


@cache
def tips(elements: int) -> NDArray[np.float64]:
    """(row, 2) u and w of the tip."""
    rod = rods.straight(LENGTH, elements, rods.Section(1e6, 1.0, 1.0, 1.0))
    moment = rod.moment.copy()
    moment[-1, 2] = 2 * np.pi / LENGTH
    rod = replace(rod, held=rod.held | np.array(rods.IN_PLANE_XY), moment=moment)
    return np.array([(-s.u[-1, 0], s.u[-1, 1]) for s in rods.along(rod, np.arange(1, len(TABLE) + 1) / len(TABLE))])


@published("C2", "READ(2nd)")
def test_roll_up() -> Iterator[Row]:
    """Cantilever of length 12 rolled up into a circle by an end moment, in twenty steps.

    Source: Sze, Liu & Lo (2004), roll-up table, read in a later transcription; all 40 numbers agree with u = L (1 - sin t/t), w = L (1 -
    cos t)/t. Ours is extrapolated from 20, 40 and 80 elements. Allowed: half a unit of the last digit and as much again, what is left of
    the mesh error.
    """
    limits = [[rods.refined([tips(m)[k, n] for m in MESHES]).limit for n in (0, 1)] for k in range(len(TABLE))]
    for k, (printed, ours) in enumerate(zip(TABLE, limits, strict=True)):
        share = (k + 1) / len(TABLE)
        yield Row(f"M L/(2π EI) = {share:.2f}: u of the tip", "m", printed[0], ours[0], LEFT)
        yield Row(f"M L/(2π EI) = {share:.2f}: w of the tip", "m", printed[1], ours[1], LEFT)


@published("C2 mesh", "EXACT")
def test_order_of_convergence() -> Iterator[Row]:
    """The same at half a circle and at the whole: order of convergence, and the error of the half circle on 80 elements.

    Source: the closed form.  Allowed: 0.1 of the order; on 80 elements the square of what one element turns (pi/80 rad), of the length.
    """
    fine = Allowance(LENGTH * (np.pi / 80) ** 2, "80 elements, each turned by 0.04 rad")
    half, circle = len(TABLE) // 2 - 1, len(TABLE) - 1
    yield second_order("u at half a circle", rods.refined([tips(m)[half, 0] for m in MESHES]).order)
    yield second_order("w at half a circle", rods.refined([tips(m)[half, 1] for m in MESHES]).order)
    yield second_order("u at the whole circle", rods.refined([tips(m)[circle, 0] for m in MESHES]).order)
    yield Row("u at half a circle on 80 elements", "m", "12.0000", tips(80)[half, 0], fine)
    yield Row("w at half a circle on 80 elements", "m", "7.6394", tips(80)[half, 1], fine)
