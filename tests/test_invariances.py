"""What must not matter: the orientation of the site, its mirror image, the place, the units, the mesh, and any order."""

from __future__ import annotations

import math
from collections.abc import Callable
from copy import deepcopy
from dataclasses import dataclass

import numpy as np
import pytest
import scenarios_made as made

from guys import recovery
from guys.loads import CaseLine, lines_of

SAME = 1e-8
"""Relative: each side is solved to 1e-11 of its reference force, and initial tensions to 1e-10."""
LAST_BITS = 1e-12
"""Relative: the same case alone or in company takes the same steps, and only the order of sums in numpy differs."""
SOFTENED = 1e-10
"""The same where a soft motion (a least eigenvalue a tenth of the mast's) makes more of the rounding the solver leaves, 1e-11."""
HALVED = 1e-3
"""Of the greatest tension: what halving the mesh may change."""


def lopsided(**tables: object) -> made.Document:
    """A mast with nothing symmetric about it: leaning, lugs, a flat face tilted back, an offset box with a fixed load, uneven anchors."""
    document = made.mast(20.0, 155.0, 301.0, **tables)
    mast = document["spar"][0]
    mast |= {"lean": 3.0, "toward": 65.0, "base": "hinged", "hinge_axis": 170.0}
    mast["fitting"] += [
        made.fitting("face", at=15.0, mass=8.0, area=0.6, drag=1.4, shape="flat", face=40.0, face_tilt=12.0),
        made.fitting("box", at=6.0, mass=20.0, offset=made.vector(0.4, -0.2, 0.1), load=made.vector(30.0, 50.0, -60.0)),
    ]
    for k, (anchor, give) in enumerate(zip(document["anchor"], (2e6, None, 5e5), strict=True)):
        anchor |= {"radius": 10.0 + k, "level": 0.5 * k} | ({} if give is None else {"give": give})
    for k, guy in enumerate(document["cable"]):
        del guy["tension"]
        guy["from"]["arm"] = 0.1
        at, anchor = guy["from"]["at"], document["anchor"][k % 3]
        lean, turn = math.radians(3.0), math.radians(65.0 - anchor["bearing"])
        level = math.hypot(anchor["radius"] - at * math.sin(lean) * math.cos(turn), at * math.sin(lean) * math.sin(turn)) - 0.1
        guy["length"] = 0.9985 * math.hypot(level, at * math.cos(lean) - anchor["level"])
    return document


DOCUMENTS: dict[str, Callable[[], made.Document]] = {
    "lopsided": lopsided,
    "lopsided straight": lambda: lopsided(straight=True),
    "mast": lambda: made.mast(20.0, 155.0),
    "boom": lambda: made.boom(wind=made.wind(75.0, 200.0)),
    "rigid boom": lambda: made.boom("pinned", rigid=(True, True), wind=made.wind(75.0)),
    "pylon": made.pylon,
}


@dataclass(frozen=True)
class Numbers:
    """Of every listed case, by name: cables (case, 2 tensions), vectors (case, 3) on spars, anchors and bases, moments, heads' moves."""

    code: list[int]
    tension: dict[str, np.ndarray]
    on_spar: dict[str, np.ndarray]
    pull: dict[str, np.ndarray]
    foot: dict[str, np.ndarray]
    moment: dict[str, np.ndarray]
    head: dict[str, np.ndarray]


def numbers(document: made.Document, lines: list[CaseLine] | None = None) -> Numbers:
    solved = made.cases(document, lines)
    f = recovery.forces(solved.problem, solved.state, solved.found)
    s = solved.structure
    cables, anchors, spars = ([x.name for x in group] for group in (s.scenario.cable, s.scenario.anchor, s.scenario.spar))
    _, head = solved.problem.reach(s.head, solved.state)
    moves = head - s.head.arm

    def by(names: list[str], array: np.ndarray) -> dict[str, np.ndarray]:
        return {name: array[:, k] for k, name in enumerate(names)}

    tension = np.stack([f.tension_anchor, f.tension_top], axis=-1)
    return Numbers(
        solved.judged.code.tolist(), by(cables, tension), by(cables, f.on_spar), by(anchors, f.pull), by(spars, f.foot_force),
        by(spars, f.foot_moment), by(spars, moves),
    )  # fmt: skip


def compare(one: Numbers, other: Numbers, turn: np.ndarray, allowed: float = SAME) -> None:
    """`other` is `one` with vectors turned or mirrored by the matrix; moments turn the other way in a mirror."""
    assert one.code == other.code
    scale = max(float(t.max()) for t in one.tension.values()) if one.tension else 1.0
    moves = max(float(np.abs(m).max()) for m in one.head.values())
    for name, tension in one.tension.items():
        assert np.abs(other.tension[name] - tension).max() < allowed * scale, name
        assert np.abs(other.on_spar[name] - one.on_spar[name] @ turn.T).max() < allowed * scale, name
    for name, pull in one.pull.items():
        assert np.abs(other.pull[name] - pull @ turn.T).max() < allowed * scale, name
    for name, foot in one.foot.items():
        assert np.abs(other.foot[name] - foot @ turn.T).max() < 10 * allowed * scale, name
        axial = np.linalg.det(turn) * turn
        assert np.abs(other.moment[name] - one.moment[name] @ axial.T).max() < 100 * allowed * scale, name
        assert np.abs(other.head[name] - one.head[name] @ turn.T).max() < 10 * allowed * max(moves, 0.1), name


@pytest.mark.parametrize("angle", [37.3, 180.0, 271.0])
@pytest.mark.parametrize("name", DOCUMENTS)
def test_site_and_wind_turned_together_turn_the_results(name: str, angle: float) -> None:
    c, s = math.cos(math.radians(angle)), math.sin(math.radians(angle))
    clockwise = np.array([[c, s, 0.0], [-s, c, 0.0], [0.0, 0.0, 1.0]])
    document = DOCUMENTS[name]()
    compare(numbers(document), numbers(made.turned(document, angle)), clockwise)


@pytest.mark.parametrize("name", DOCUMENTS)
def test_a_mirror_image_has_mirrored_results(name: str) -> None:
    document = DOCUMENTS[name]()
    compare(numbers(document), numbers(made.mirrored(document)), np.diag([-1.0, 1.0, 1.0]))


@pytest.mark.parametrize("name", DOCUMENTS)
def test_feet_and_pounds_give_the_same_newtons(name: str) -> None:
    """The same structure written in US units: converted exactly, but for the last digit of each written number."""
    document = DOCUMENTS[name]()
    metric, customary = made.solved(document), made.solved(document, us=True)
    assert customary.scenario.sha256 != metric.scenario.sha256
    assert customary.state == metric.state
    scale = metric.reference_force.max()
    for got, want in (
        (customary.cables.tension_anchor, metric.cables.tension_anchor),
        (customary.anchors.pull, metric.anchors.pull),
        (customary.bases.force, metric.bases.force),
    ):
        assert np.abs(got - want).max() < SAME * scale
    assert np.abs(customary.spars[0].displacement - metric.spars[0].displacement).max() < 1e-7


def test_the_place_of_the_site_does_not_matter() -> None:
    """Moved 300 m east, 120 m south and 50 m up (the wind's heights count from the foot)."""
    document = lopsided(wind=made.wind(20.0, 155.0, profile={"power": 0.14}))
    moved = deepcopy(document)
    moved["spar"][0]["foot"] = {"east": 300.0, "north": -120.0, "level": 50.0}
    for anchor in moved["anchor"]:
        anchor["level"] += 50.0
    compare(numbers(document), numbers(moved), np.eye(3), allowed=1e-7)


@pytest.mark.parametrize("name", ["lopsided", "mast", "boom"])
def test_halving_the_mesh_changes_little_and_ever_less(name: str) -> None:
    document = DOCUMENTS[name]()
    coarse, fine, finest = (made.cases(document, finer=n).tension() for n in (1, 2, 4))
    first, second = np.abs(fine - coarse).max(), np.abs(finest - fine).max()
    assert first < HALVED * finest.max()
    assert second < 0.3 * first


@pytest.mark.parametrize(
    ("name", "allowed"), [("mast", LAST_BITS), ("lopsided", SOFTENED), ("lopsided straight", SOFTENED), ("boom", SOFTENED)]
)
def test_a_batch_gives_what_its_cases_give_one_by_one(name: str, allowed: float) -> None:
    document = DOCUMENTS[name]()
    document["wind"] = made.wind(*(float(b) for b in range(0, 360, 24)), speed=30.0)
    lines = lines_of(made.scenario(document))
    together = numbers(document, list(lines))
    scale = max(float(t.max()) for t in together.tension.values())
    for k in range(0, len(lines), 4):
        alone = numbers(document, [lines[k]])
        for cable, tension in alone.tension.items():
            assert np.abs(tension[0] - together.tension[cable][k]).max() < allowed * scale
        for spar, move in alone.head.items():
            assert np.abs(move[0] - together.head[spar][k]).max() < allowed * 18.0


@pytest.mark.parametrize("name", ["lopsided", "lopsided straight", "mast", "boom"])
def test_the_order_of_cables_anchors_and_fittings_does_not_matter(name: str) -> None:
    document = DOCUMENTS[name]()
    shuffled = deepcopy(document)
    shuffled["cable"] = shuffled["cable"][::-1]
    shuffled["anchor"] = shuffled["anchor"][1:] + shuffled["anchor"][:1]
    for spar in shuffled["spar"]:
        if "fitting" in spar:
            spar["fitting"] = spar["fitting"][::-1]
    compare(numbers(document), numbers(shuffled), np.eye(3))


def test_the_order_of_cases_and_directions_does_not_matter() -> None:
    document = {**made.mast(20.0, 155.0), "case": [{"name": "a"}, {"name": "b", "wind": 1.3}]}
    other = {**made.mast(155.0, 20.0), "case": [{"name": "b", "wind": 1.3}, {"name": "a"}]}
    one, two = made.solved(document), made.solved(other)
    rows = [[(s.case[k], round(float(np.degrees(s.wind_from[k])))) for k in range(1, 5)] for s in (one, two)]
    for k, row in enumerate(rows[0], start=1):
        there = rows[1].index(row) + 1
        assert one.cables.tension_anchor[k] == pytest.approx(two.cables.tension_anchor[there], rel=LAST_BITS)
    for a, b in zip(one.worst_cables, two.worst_cables, strict=True):
        assert a.tension.peak == pytest.approx(b.tension.peak, rel=1e-4)


def test_a_cable_too_long_to_pull_changes_nothing() -> None:
    """Weightless and a metre longer than its chord."""
    document = made.mast(20.0, 155.0, straight=True)
    more = deepcopy(document)
    more["cable"].append(made.cable("idle", 13.0, "B", length=math.hypot(11.0, 13.0) + 1.0))
    one, other = numbers(document), numbers(more)
    del other.tension["idle"], other.on_spar["idle"]
    compare(one, other, np.eye(3), allowed=HALVED)


def test_catenaries_become_straight_cables_as_their_weight_goes() -> None:
    """Bare ropes of a ten-thousandth of the mass, without drag: tensions within (w L/T)^2 of the straight ones."""
    light = {"rope": {"rope": made.rope(mass=0.15e-4, drag=0.0)}}
    hanging = made.cases(made.mast(20.0, 155.0, **light)).tension()
    straight = made.cases(made.mast(20.0, 155.0, straight=True, **light)).tension()
    assert np.abs(hanging - straight).max() < 1e-5 * straight.max()
