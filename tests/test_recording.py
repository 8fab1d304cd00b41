"""What is solved for the record beside the run: variants, sums, the free body and the loads at one height, each by another way."""

from __future__ import annotations

import math
from functools import cache

import numpy as np
import pytest
import scenarios_made as made
from scipy.optimize import brentq

from guys.constants import STANDARD_GRAVITY
from guys.loads.worked import worked
from guys.studies.recording import Recorded, record

CLOSES = 1e-9
"""Of the reference force, and times the height for moments: what a run's own balance is held to."""
G = float(STANDARD_GRAVITY)


@cache
def _recorded(text: str) -> Recorded:
    from guys.scenario import parse_scenario

    return record(parse_scenario(text))


def recorded(document: made.Document) -> Recorded:
    return _recorded(made.text(document))


ICE = {"thickness": 0.015, "density": 900.0}
WINDS = {
    "mast": made.mast(20.0, 200.0),
    "with ice": made.stayed(
        made.spar(length=10.0), 0.0, 120.0, 240.0, tension=2000.0, wind=made.wind(40.0), ice=ICE,
        case=[{"name": "iced", "ice": 1.0, "wind": 0.5, "dead": 1.2}],
    ),
    "rigid boom": made.boom(rigid=(True, True)),
}


@pytest.mark.parametrize("name", WINDS)
def test_free_body_closes_and_its_loads_are_those_summed(name: str) -> None:
    """Two sums of different parts: forces of the rows one by one, and the node loads of the solver's own arrays."""
    found = recorded(WINDS[name])
    body = found.free_body
    assert body is not None
    height = float(np.abs(body.at).max())
    assert np.abs(body.net_force).max() < CLOSES * body.reference
    assert np.abs(body.net_moment).max() < CLOSES * body.reference * height
    k = next(k for k, case in enumerate(found.solution.case) if case == body.case and _same(found.solution.wind_from[k], body.wind_from))
    loads = body.force[np.array(body.given)].sum(axis=0)
    assert loads == pytest.approx(found.loads[k], abs=CLOSES * body.reference)
    assert np.abs(found.loads - found.reactions).max() < CLOSES * body.reference


def test_gusts_patch_by_patch_close_under_the_mean_wind_and_are_not_summed() -> None:
    """Peaks belong to no one equilibrium: their sums are not told; the mean wind's free body closes, with 1 / (1 + 7 I_v) of the wind."""
    document = made.ring_mast(3, 40.0)
    plain, patched = recorded(document).free_body, recorded({**document, "gust": {"method": "patches", "turbulence": 0.15}})
    body = patched.free_body
    assert plain is not None
    assert body is not None
    assert np.abs(body.net_force).max() < CLOSES * body.reference
    assert np.abs(body.net_moment).max() < CLOSES * body.reference * np.abs(body.at).max()
    assert np.isnan(patched.loads[1:]).all()
    assert np.isfinite(patched.loads[0]).all()
    mean, peak = (b.force[b.what.index("wind of mast")] for b in (body, plain))
    assert mean == pytest.approx(peak / (1 + 7 * 0.15), rel=1e-9)


def _same(a: float, b: float) -> bool:
    return a == b or (math.isnan(a) and math.isnan(b))


def test_weights_of_the_free_body_by_hand() -> None:
    """The 10 m tube of 89 x 3.2 mm, 7850 kg/m3, in iced case at 1.2 dead: pi (D - w) w rho L g, and 15 mm of ice all round at 900."""
    body = recorded(WINDS["with ice"]).free_body
    assert body is not None
    steel = math.pi * (0.089 - 0.0032) * 0.0032 * 7850.0 * 10.0
    ice = math.pi * (0.089 + 0.015) * 0.015 * 900.0 * 10.0
    [row] = [k for k, what in enumerate(body.what) if what == "weight with ice of mast"]
    assert body.force[row] == pytest.approx([0.0, 0.0, -G * (1.2 * steel + ice)], rel=1e-12, abs=1e-9)
    assert body.at[row, 2] == pytest.approx(5.0, abs=0.02)  # its middle, less how far the mast is pressed and bent


def test_worked_loads_are_those_the_run_took() -> None:
    """On the spar against the free body's wind, uniform with height; on the cable likewise: nothing of the two is shared but q C b."""
    found = recorded(WINDS["mast"])
    assert found.worked is not None
    assert found.free_body is not None
    wind = {what: force for what, force in zip(found.free_body.what, found.free_body.force, strict=True) if what.startswith("wind of")}
    spar, cable = found.worked.spar, found.worked.cable
    assert cable is not None
    assert spar.wind == pytest.approx(0.5 * 1.25 * 25.0**2 * 1.2 * 0.089 * spar.hold, rel=1e-12)
    assert 18.0 * spar.wind == pytest.approx(np.linalg.norm(wind["wind of mast"]), rel=1e-4)  # the mast is bent: h differs along it
    assert cable.wind == pytest.approx(np.linalg.norm(wind[f"wind of cable {cable.cable}"]), rel=1e-12)


def test_worked_ice_and_factors() -> None:
    """Width 89 + 2 x 15 mm, half the pressure, round with ice: a coefficient given holds; mass 1.2 steel + ice."""
    found = recorded(WINDS["with ice"]).worked
    assert found is not None
    assert found.factor == 0.5
    assert found.spar.width == pytest.approx(0.119, rel=1e-12)
    assert found.spar.wind == pytest.approx(0.5 * found.spar.q * 1.2 * 0.119 * found.spar.hold, rel=1e-12)
    steel, ice = math.pi * (0.089 - 0.0032) * 0.0032 * 7850.0, math.pi * (0.089 + 0.015) * 0.015 * 900.0
    assert found.spar.weight == pytest.approx(G * (1.2 * steel + ice), rel=1e-12)


def test_worked_at_any_height_follows_a_power() -> None:
    document = made.mast(0.0) | {"wind": made.wind(0.0, profile={"power": 0.2})}
    at = made.setting(document)
    from guys.loads import Placed, lines_of

    placed = Placed(at.state.u[0], at.state.psi[0], at.length)
    structure = at.problem.structure
    line = lines_of(structure.scenario)[0]
    low, high = (worked(structure, placed, line, 0, z, None).spar for z in (4.0, 16.0))
    assert high.q / low.q == pytest.approx((high.z / low.z) ** 0.4, rel=1e-12)
    assert low.z == pytest.approx(4.0, abs=1e-3)


# ---------------------------------------------------------------- variants


def test_straight_weightless_guys_in_still_air_follow_their_initial_tension() -> None:
    found = recorded(made.ring_mast(3, case=[{"name": "still", "wind": 0.0}]))
    first, less, more = found.variants[:3]
    assert less.tension / first.tension == pytest.approx(0.9, rel=1e-9)
    assert more.tension / first.tension == pytest.approx(1.1, rel=1e-9)


def test_first_variant_is_the_run_and_finer_is_its_mesh_check() -> None:
    document = WINDS["mast"]
    found, finer = recorded(document), made.solved(document, finer=2)
    first, mesh = found.variants[0], found.variants[3]
    for v, run in ((first, found.solution), (mesh, finer)):
        assert v.tension == pytest.approx([c.tension.value for c in run.worst_cables], rel=1e-12)
        assert v.pull == pytest.approx([a.resultant.value for a in run.worst_anchors], rel=1e-12)
        assert v.down == pytest.approx([f.down.value for f in run.worst_feet], rel=1e-12)
        assert v.standing == len(run.case)
    assert not np.array_equal(first.tension, mesh.tension)


def test_loads_updated_once_by_hand() -> None:
    """A rigid, weightless pole of 10 m on a spring k, wind F = q C b L on it upright.

    As set: k a = F L / 2 cos a.  Updated on the pole at a: F cos(a)^2 square to it as it stands there, and dead from then on, so
    k b = F cos(a)^2 L / 2 cos(b - a).
    """
    k, speed = 60e3, 40.0
    pole = made.spar(base="sprung", base_stiffness=k, rigid=True, section=[{"length": 10.0, "mass": 0.0, "width": 0.4, "drag": 1.0}])
    found = recorded(made.document([pole], wind=made.wind(0.0, speed=speed)))
    force = 0.5 * 1.25 * speed**2 * 0.4 * 10.0
    a = brentq(lambda x: k * x - force * 5.0 * math.cos(x), 0.0, 1.0, xtol=1e-14)
    b = brentq(lambda x: k * x - force * math.cos(a) ** 2 * 5.0 * math.cos(x - a), 0.0, 1.0, xtol=1e-14)
    assert a > math.radians(10.0)
    first, updated = found.variants[0], found.variants[4]
    assert first.lean[0] == pytest.approx(a, rel=1e-8)
    assert updated.lean[0] == pytest.approx(b, rel=1e-8)
    assert updated.turning[0] == pytest.approx(k * b, rel=1e-8)
    assert found.variants[1].lacking == "no cable is given by tension"


def test_tensions_that_cannot_be_are_told() -> None:
    """A guy whose own weight gives it 4.92 N at the least is set to 5.2 N: a tenth less cannot be, a tenth more can."""
    found = recorded(made.stayed(made.spar(length=10.0, base="fixed"), 0.0, 120.0, 240.0, tension=5.2))
    less, more = found.variants[1:3]
    assert "cannot be met" in less.lacking
    assert np.isnan(less.tension).all()
    assert more.lacking == ""
    assert more.standing == 2
