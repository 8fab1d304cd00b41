"""From a scenario to nodes, points and supports: where everything is, and what holds it."""

from __future__ import annotations

import math

import numpy as np
import pytest
import scenarios_made as made

from guys import structure
from guys.loads import as_drawn
from guys.loads.cases import where

DRAWN = 1e-12
"""[m] and [-]: rounding of coordinates of some tens of metres."""


def built(document: made.Document, finer: int = 1) -> structure.Structure:
    return structure.build(made.scenario(document), finer)


def drawn(s: structure.Structure, points: structure.Points) -> np.ndarray:
    return where(s, as_drawn(s, np.ones(len(s.cables.EA))), points)


@pytest.mark.parametrize(("lean", "toward"), [(0.0, 0.0), (0.0, 140.0), (35.0, 90.0), (80.0, 215.0)])
def test_local_axes_are_as_the_module_says(lean: float, toward: float) -> None:
    """t up and toward the bearing, x level at the bearing plus 90 degrees, right-handed."""
    spar = made.scenario(made.document([made.spar(lean=lean, toward=toward, base="fixed")], still=True)).spar[0]
    x, y, t = structure.axis_of(spar)
    a, b = math.radians(lean), math.radians(toward)
    assert t == pytest.approx([math.sin(a) * math.sin(b), math.sin(a) * math.cos(b), math.cos(a)], abs=DRAWN)
    assert x == pytest.approx([math.sin(b + math.pi / 2), math.cos(b + math.pi / 2), 0.0], abs=DRAWN)
    assert np.cross(x, y) == pytest.approx(t, abs=DRAWN)


def test_ends_of_cables_are_where_the_file_puts_them() -> None:
    """Lug of 0.2 m toward an anchor at bearing 90; the other end is the anchor itself."""
    s = built(
        made.document([made.spar()], made.anchors(10.0, 90.0, level=-1.5), [made.cable("g", 12.0, "A", arm=0.2, length=16.0)], still=True)
    )
    assert drawn(s, s.cables.a)[0] == pytest.approx([10.0, 0.0, -1.5], abs=DRAWN)
    assert drawn(s, s.cables.b)[0] == pytest.approx([0.2, 0.0, 12.0], abs=DRAWN)


@pytest.mark.parametrize("rigid", [False, True])
def test_heels_stand_on_their_carriers(rigid: bool) -> None:
    s = built(made.boom(rigid=(rigid, rigid)))
    lean = math.radians(55.0)
    head = np.array([8.0 * math.sin(lean), 0.0, 1.5 + 8.0 * math.cos(lean)])
    assert s.position[s.foot[1]] == pytest.approx([0.0, 0.0, 1.5], abs=DRAWN)
    assert drawn(s, s.head)[1] == pytest.approx(head, abs=DRAWN)
    topping = next(k for k, c in enumerate(s.scenario.cable) if c.name == "topping stay")
    assert drawn(s, s.cables.a)[topping] == pytest.approx(head, abs=DRAWN)
    ride = s.rides
    assert (ride.node, ride.welded) == ((int(s.foot[1]),), (False,))
    assert s.position[ride.carrier[0]] + s.ride_arm[0] == pytest.approx([0.0, 0.0, 1.5], abs=DRAWN)


def test_heel_of_a_heel_is_placed_and_comes_first_in_the_folds() -> None:
    third = made.spar("jib", foot={"spar": "boom", "at": 8.0}, section=[made.tube(3.0)], base="fixed")
    document = made.boom()
    s = built({**document, "spar": [third, *reversed(document["spar"])], "anchor": _by_place(document["anchor"])})
    lean = math.radians(55.0)
    assert s.position[s.foot[0]] == pytest.approx([8.0 * math.sin(lean), 0.0, 1.5 + 8.0 * math.cos(lean)], abs=DRAWN)
    assert s.rides.node == (int(s.foot[0]), int(s.foot[1]))
    assert s.rides.welded == (True, False)


def _by_place(anchors: list[made.Document]) -> list[made.Document]:
    """Anchors by east and north: bearings are taken from the first spar's foot."""
    out = []
    for a in anchors:
        bearing = math.radians(a["bearing"])
        out.append({"name": a["name"], "east": a["radius"] * math.sin(bearing), "north": a["radius"] * math.cos(bearing)})
    return out


@pytest.mark.parametrize(
    ("base", "free"),
    [("pinned", {3, 4}), ("ball", {3, 4, 5}), ("hinged", {3}), ("fixed", set()), ("sprung", {3, 4})],
)
def test_bases_leave_free_what_their_names_say(base: str, free: set[int]) -> None:
    keys = {"base_stiffness": 5e4} if base == "sprung" else {}
    s = built(made.stayed(made.spar(base=base, **keys), 10.0, 130.0, 250.0))
    assert {int(k) for k in np.flatnonzero(~s.held[s.foot[0]])} == free
    assert list(s.joints.kind) == (["tilt"] if base == "sprung" else [])


def test_hinge_axis_is_square_to_the_lean_unless_given() -> None:
    for keys, bearing in (({}, 120.0), ({"hinge_axis": 75.0}, 75.0)):
        s = built(made.stayed(made.spar(base="hinged", lean=10.0, toward=30.0, **keys), 170.0, 250.0))
        a = math.radians(bearing)
        assert abs(s.frames.axes[0, 0] @ [math.sin(a), math.cos(a), 0.0]) == pytest.approx(1.0, abs=DRAWN)


def test_anchors_that_give_are_free_and_others_held() -> None:
    document = made.mast()
    document["anchor"][1]["give"] = 2e6
    s = built(document)
    assert s.give.tolist() == [math.inf, 2e6, math.inf]
    assert s.held[s.anchor, :3].tolist() == [[True] * 3, [False] * 3, [True] * 3]
    assert s.held[s.anchor, 3:].all()


def test_weight_is_the_sum_by_hand() -> None:
    s = built(made.mast())
    tube = math.pi * (0.089 - 0.0032) * 0.0032 * 7850 * 18.0
    guys = 0.15 * 6 * 18.0  # each as if as long as the mast
    assert s.weight == pytest.approx(9.80665 * (tube + 12.0 + guys), rel=1e-12)


def test_pieces_cover_the_spar_with_their_own_sections() -> None:
    sections = [made.tube(6.0), made.tube(7.0, 0.06, 0.003), made.tube(5.0, 0.04, 0.002)]
    for rigid in (False, True):
        p = built(made.document([made.spar(section=sections, rigid=rigid, base="fixed")], still=True)).pieces
        assert p.station[0, 0] == 0.0
        assert p.station[-1, 1] == pytest.approx(18.0, abs=DRAWN)
        assert np.abs(p.station[1:, 0] - p.station[:-1, 1]).max() < DRAWN
        width = np.where(p.station.mean(axis=1) < 6.0, 0.089, np.where(p.station.mean(axis=1) < 13.0, 0.06, 0.04))
        assert np.abs(p.width - width).max() < DRAWN


def test_elements_bend_about_the_axis_their_stiffness_is_given_for() -> None:
    """EI_x resists bending about x, so displacement along y: with the axes (y, z) of the element taken as (x, y) it is its EI_y."""
    section = {**made.bar(4.0), "EI_x": 2e5, "EI_y": 5e5}
    del section["EI"]
    s = built(made.document([made.spar(section=[section], base="fixed")], still=True))
    rods = s.elements.rods
    assert np.all(rods.EI_y == 2e5)
    assert np.all(rods.EI_z == 5e5)
    assert np.abs(rods.y - s.axes[0, 0]).max() < DRAWN


def test_finer_meshes_have_more_elements_of_the_same_spar() -> None:
    coarse, fine = built(made.mast()), built(made.mast(), finer=3)
    assert len(fine.elements.i) == 3 * len(coarse.elements.i)
    assert fine.elements.rods.h.sum() == pytest.approx(coarse.elements.rods.h.sum())
