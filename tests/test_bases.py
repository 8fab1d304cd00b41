"""What stands on the ground: pressure under a plate by hand, in the kern and outside; sliding of a guyed mast by statics; a hinge's pin."""

from __future__ import annotations

import math

import numpy as np
import pytest
import scenarios_made as made
from hypothesis import given
from hypothesis import strategies as st

from guys.checks import bases
from guys.errors import ScenarioError
from guys.exchange.result import as_dict
from guys.results import Finding, Solution
from guys.scenario import parse_scenario
from guys.scenario.plate import Plate

G = 9.80665
PLATE = Plate(length=0.6, width=0.4, bearing=150e3)
N = 12e3


def stand(east: float, north: float, plate: Plate = PLATE, toward: float = 0.0, push: float = N) -> tuple[float, str]:
    """Pressure and words of a push on the ground at a place east and north of the middle."""
    force = np.array([[0.0, 0.0, -push]])
    pressure, how = bases.stand(plate, toward, force[:, 2], np.cross([[east, north, 0.0]], force))
    return float(pressure[0]), bases.CONTACT[int(how[0])]


def test_kern_cases_by_hand() -> None:
    """Length 0.6 m north, width 0.4 m east; sixths 0.1 m and 0.0667 m."""
    assert stand(0.0, 0.0) == (pytest.approx(N / 0.24), "whole plate in contact")
    assert stand(0.0, 0.1) == (pytest.approx(N / (0.4 * 0.4)), "whole plate in contact")
    assert stand(0.0, 0.101) == (pytest.approx(N / (0.4 * 0.398)), "one edge of the plate lifts")
    assert stand(-0.1, 0.15) == (pytest.approx(N / (0.3 * 0.2)), "one edge of the plate lifts")
    assert stand(0.2, 0.0) == (math.inf, "the push is off the plate")
    assert stand(0.0, 0.0, push=-1.0) == (0.0, "lifted off the ground")


def test_length_runs_along_its_bearing() -> None:
    along = PLATE.model_copy(update={"along": math.radians(90)})
    assert stand(0.1, 0.0, along) == stand(0.0, 0.1)
    assert stand(0.1, 0.0, toward=math.radians(90))[0] == pytest.approx(stand(0.0, 0.1)[0])
    assert stand(0.1, 0.0, PLATE.model_copy(update={"along": 0.0}), toward=math.radians(90)) == stand(0.1, 0.0)


@given(st.floats(0, 0.19), st.floats(0, 0.29), st.floats(1.0001, 2.0), st.floats(0.01, 0.2))
def test_pressure_rises_with_push_and_eccentricity_and_falls_with_size(east: float, north: float, more: float, wider: float) -> None:
    p, _ = stand(east, north)
    assert stand(east, north, push=more * N)[0] > p or math.isinf(p)
    assert stand(min(east * more, 0.199), north)[0] >= p * (1 - 1e-12)
    assert stand(east, north, PLATE.model_copy(update={"width": 0.4 + wider}))[0] < p


@given(st.floats(-0.19, 0.19), st.floats(-0.29, 0.29))
def test_even_pressure_on_the_effective_area_balances_the_push(east: float, north: float) -> None:
    """The part that bears is centred under the push and inside the plate; p times it is N."""
    pressure, _ = stand(east, north)
    wide, long = 0.4 - 2 * abs(east), 0.6 - 2 * abs(north)
    assert pressure * wide * long == pytest.approx(N)
    assert abs(east) + wide / 2 <= 0.2 + 1e-12
    assert abs(north) + long / 2 <= 0.3 + 1e-12


def finding(s: Solution, thing: str, quantity: str) -> Finding:
    return next(f for f in s.findings if (f.thing, f.quantity) == (thing, quantity))


def column(plate: made.Document, base: str = "fixed") -> made.Document:
    """A rigid column of 3 m, 100 kg at its head and a level pull of 30 N north."""
    load = made.fitting(at=3.0, mass=100.0, load=made.vector(0.0, 30.0, 0.0))
    return made.document([made.spar(base=base, rigid=True, section=[made.weightless(3.0)], plate=plate, fitting=[load])], still=True)


def test_a_fixed_column_bears_on_part_of_its_plate() -> None:
    """e = 30 N x 3 m / (100 kg g) = 92 mm north."""
    f = finding(made.solved(column({"length": 0.5, "width": 0.5, "bearing": 20e3})), "base of mast", "bearing")
    e = 90.0 / (100.0 * G)
    assert f.demand == pytest.approx(100.0 * G / (0.5 * (0.5 - 2 * e)), rel=1e-9)
    assert f.factor == pytest.approx(20e3 / f.demand)
    assert (f.governs, f.required, f.default, f.verdict) == ("one edge of the plate lifts", 1.0, True, "within")
    off = finding(made.solved(column({"length": 0.18, "width": 0.5, "bearing": 20e3})), "base of mast", "bearing")
    assert (off.factor, off.verdict, off.governs) == (0.0, "past", "the push is off the plate")


def test_without_bearing_the_pressure_is_told_and_not_judged() -> None:
    f = finding(made.solved(column({"length": 0.5, "width": 0.5})), "base of mast", "bearing")
    assert (f.verdict, math.isnan(f.factor)) == ("not judged", True)
    assert f.demand > 0
    assert "none is presumed" in f.why


def test_a_pinned_mast_bears_evenly_and_slides_by_statics() -> None:
    """Straight, weightless guys: what the anchors do not take of weight and wind is left for the foot."""
    document = made.mast(30.0, 140.0, straight=True)
    document["spar"][0] |= {"plate": {"length": 0.3, "width": 0.3, "bearing": 200e3}, "friction": 0.4}
    s = made.solved(document)
    f, slide = finding(s, "base of mast", "bearing"), finding(s, "base of mast", "sideways/down")
    assert f.demand == pytest.approx(s.worst_feet[0].down.peak / 0.09, rel=1e-9)
    assert f.governs == "whole plate in contact"
    dead = 12.0 + 7850 * math.pi * (0.089 - 0.0032) * 0.0032 * 18.0
    down = dead * G + s.anchors.pull[:, :, 2].sum(axis=1)
    assert -s.bases.force[:, 0, 2] == pytest.approx(down, rel=1e-9)
    blown = 0.5 * 1.25 * 25.0**2 * (1.2 * 0.089 * 18.0 + 1.3 * 0.5)
    wind = [np.zeros(2)] + [-blown * np.array([math.sin(b), math.cos(b)]) for b in np.radians([30.0, 140.0])]
    level = np.array(wind) - s.anchors.pull[:, :, :2].sum(axis=1)
    assert s.bases.force[:, 0, :2] == pytest.approx(level, abs=1e-8 * blown)
    listed = np.hypot(*level.T) / down
    assert slide.demand >= listed.max()
    assert slide.factor == pytest.approx(0.4 / slide.demand)


def test_turned_and_mirrored_plates_bear_the_same() -> None:
    document = column({"length": 0.5, "width": 0.4, "bearing": 20e3, "along": 20.0})
    document["spar"][0]["fitting"][0]["load"] = made.vector(10.0, 20.0, 0.0)
    sites = (document, made.turned(document, 71.0), made.mirrored(document))
    found = [finding(made.solved(site), "base of mast", "bearing").demand for site in sites]
    assert found == pytest.approx([found[0]] * 3, rel=1e-9)


def test_the_pin_of_a_hinge_takes_the_resultant() -> None:
    """The pylon's hinge: down and sideways of one case together, in the result beside the bearing, which it has not."""
    s = made.solved(made.pylon(100.0))
    force = np.linalg.norm(s.bases.force[:, 0], axis=1)
    assert s.worst_feet[0].whole.value == pytest.approx(force.max())
    base = as_dict(s)["worst"]["bases"][0]
    assert base["resultant"]["resultant_N"] == pytest.approx(force.max())
    assert base["bearing"] is None


def test_worst_of_a_spar_in_the_result() -> None:
    s = made.solved(made.mast(30.0, 140.0))
    spar = as_dict(s)["worst"]["spars"][0]
    moved = np.linalg.norm(s.spars[0].displacement[:, -1], axis=-1)
    assert spar["head_displacement_m"] == pytest.approx(moved.max())
    assert spar["lean"]["quantity"] == "lean"
    assert [f["quantity"] for f in spar["sections"]] == ["stress"]


@pytest.mark.parametrize(
    "plate", [{"length": 0.0, "width": 0.4}, {"length": 0.4, "width": -0.1}, {"length": 0.4, "width": 0.4, "bearing": 0.0}]
)
def test_a_plate_of_no_size_is_a_fault(plate: made.Document) -> None:
    with pytest.raises(ScenarioError) as caught:
        parse_scenario(made.text(column(plate)))
    assert len(caught.value.faults) == 1
    assert "is not more than zero" in caught.value.faults[0].message
    assert caught.value.faults[0].key.startswith("spar[0].plate.")


def test_a_heel_has_no_plate() -> None:
    document = made.boom()
    document["spar"][1]["plate"] = {"length": 0.4, "width": 0.4}
    with pytest.raises(ScenarioError) as caught:
        parse_scenario(made.text(document))
    assert "a heel has no plate on the ground" in caught.value.faults[0].message


def test_a_pressure_above_bedrock_is_warned_about() -> None:
    """IBC 2012 table 1806.2 (read): 12,000 psf, 575 kPa, the greatest it presumes."""
    made_of = {"length": 0.4, "width": 0.4}
    assert any("plate, bearing" in w for w in made.scenario(column({**made_of, "bearing": 600e3})).warnings)
    assert not any("bearing" in w for w in made.scenario(column({**made_of, "bearing": 570e3})).warnings)
