"""What spars are judged by: sums by hand on columns, what is not judged, the same however the site is turned."""

from __future__ import annotations

import math

import numpy as np
import pytest
import scenarios_made as made

from guys.errors import ScenarioError
from guys.results import Finding, Solution
from guys.scenario import parse_scenario

G = 9.80665
D, W = 0.089, 0.0032
AREA = math.pi * (D - W) * W
SECOND = math.pi / 64 * (D**4 - (D - 2 * W) ** 4)
SHEAR = 4 / 3 / AREA * ((D / 2) ** 2 + D / 2 * (D / 2 - W) + (D / 2 - W) ** 2) / ((D / 2) ** 2 + (D / 2 - W) ** 2)


def finding(s: Solution, thing: str, quantity: str = "stress") -> Finding:
    return next(f for f in s.findings if (f.thing, f.quantity) == (thing, quantity))


def column(rigid: bool = True, **section: object) -> made.Document:
    """A fixed column of 3 m without wind on it: 100 kg and a level pull of 300 N north at its head, 0.2 m east of its axis."""
    load = made.fitting(at=3.0, mass=100.0, load=made.vector(0.0, 300.0, 0.0), offset=made.vector(0.2, 0.0, 0.0))
    of = {**made.tube(3.0, drag=0.0), **section}
    return made.document([made.spar(base="fixed", rigid=rigid, section=[of], fitting=[load])], still=True)


def test_stress_of_a_column_by_hand() -> None:
    """Rigid, so no deflection adds: at the foot N = (m g + 100 g), M of 300 N x 3 m and of 100 g x 0.2 m, T = 300 N x 0.2 m, V = 300 N."""
    f = finding(made.solved(column()), "spar mast")
    axial = 100.0 * G + 7850.0 * AREA * 3.0 * G
    bending = math.hypot(300.0 * 3.0, 100.0 * G * 0.2)
    normal = axial / AREA + bending * D / 2 / SECOND
    shear = 300.0 * 0.2 * D / (4 * SECOND) + 300.0 * SHEAR
    assert f.demand == pytest.approx(math.sqrt(normal**2 + 3 * shear**2), rel=1e-9)
    assert (f.capacity, f.required, f.default, f.verdict) == (235e6, 1.67, True, "within")
    assert f.governs == "0 m (0 ft) from the foot"
    assert "from memory" in f.source
    assert f.factor == pytest.approx(235e6 / f.demand)


def test_what_bends_bears_more() -> None:
    """Deflection adds the weight's arm: by 3 to 5 % here, F l^3/3EI = 35 mm of 3 m under a weight thrice the pull."""
    bent, rigid = (finding(made.solved(column(rigid=r)), "spar mast").demand for r in (False, True))
    assert 1.01 < bent / rigid < 1.08


def test_capacities_given_are_used_in_place_of_the_tube() -> None:
    f = finding(made.solved(column(capacity_axial=50e3, capacity_bending=4e3)), "spar mast", "use of its capacities")
    axial = 100.0 * G + 7850.0 * AREA * 3.0 * G
    assert f.demand == pytest.approx(axial / 50e3 + math.hypot(900.0, 100.0 * G * 0.2) / 4e3, rel=1e-9)
    assert f.factor == pytest.approx(1 / f.demand)
    assert "shear and torsion not judged" in f.why
    sheared = made.solved(column(capacity_axial=50e6, capacity_bending=4e6, capacity_shear=400.0, capacity_torsion=600.0))
    assert finding(sheared, "spar mast", "use of its capacities").demand == pytest.approx(300 / 400 + 60 / 600, rel=1e-9)


@pytest.mark.parametrize(("material", "why"), [("timber", "no yield stress"), ("gfrp", "no yield stress")])
def test_what_breaks_without_yielding_is_not_judged(material: str, why: str) -> None:
    f = finding(made.solved(column(material=material)), "spar mast")
    assert (f.verdict, math.isnan(f.factor)) == ("not judged", True)
    assert why in f.why
    timber = column(material=material, capacity_axial=20e3, capacity_bending=2e3)
    assert finding(made.solved(timber), "spar mast", "use of its capacities").verdict == "within"


def test_a_thin_tube_is_not_judged_and_warned_about() -> None:
    """Diameter over wall 178: above 90."""
    s = made.solved(column(tube={"diameter": 0.089, "wall": 0.0005}))
    f = finding(s, "spar mast")
    assert f.verdict == "not judged"
    assert "178, above 90, buckles before it yields" in f.why
    assert any("mast, section 1 (178 times its wall)" in w for w in s.warnings)
    assert not any("wall" in w for w in made.solved(column()).warnings)


def test_sections_given_outright_are_not_judged() -> None:
    s = made.solved(made.document([made.spar(base="fixed", section=[made.bar(3.0, 5.0)])], still=True))
    assert finding(s, "spar mast").verdict == "not judged"
    assert "capacity_axial" in finding(s, "spar mast").why


def test_sections_are_judged_each_at_its_own_worst_station() -> None:
    document = column(rigid=False)
    document["spar"][0]["section"] = [made.tube(2.0, drag=0.0), made.tube(1.0, 0.06, 0.002, drag=0.0)]
    s = made.solved(document)
    low, high = (finding(s, f"spar mast, section {n}") for n in (1, 2))
    assert (low.governs, high.governs) == ("0 m (0 ft) from the foot", "2 m (6.562 ft) from the foot")
    area = math.pi * 0.058 * 0.002
    second = math.pi / 64 * (0.06**4 - 0.056**4)
    normal = (100.0 * G + 7850.0 * area * G) / area + math.hypot(300.0, 100.0 * G * 0.2) * 0.03 / second
    assert 1.0 < high.demand / normal < 1.15


def test_turned_and_mirrored_masts_bear_the_same() -> None:
    document = made.mast(30.0, 200.0)
    sites = (document, made.turned(document, 71.0), made.mirrored(document))
    found = [finding(made.solved(site), "spar mast") for site in sites]
    SWEEP = 2e-4
    """Peaks are refined to a degree: cos 1 degree off the peak, on other bearings of the turned circle."""
    assert [f.demand for f in found] == pytest.approx([found[0].demand] * 3, rel=SWEEP)
    assert found[0].governs == found[1].governs == found[2].governs


def test_stress_of_a_guyed_mast_is_that_of_its_section_forces() -> None:
    """Of the listed cases no station stands above the finding, and the least listed is a sixth below at the most."""
    s = made.solved(made.mast(*range(0, 360, 10)))
    line = s.spars[0]
    normal = np.abs(line.axial) / AREA + np.linalg.norm(line.bending, axis=-1) * D / 2 / SECOND
    f = finding(s, "spar mast")
    assert np.nanmax(normal) <= f.demand <= 1.02 * np.nanmax(normal)


def lattice(bracing: str, sides: int = 3, legs: str = "33.7 x 2.6 mm", material: str = "steel") -> Solution:
    made_of = {"face": "0.4 m", "legs": legs, "lacing": "10 mm", "panel": "0.5 m", "sides": sides, "bracing": bracing}
    document = column(lattice=made_of, material=material, drag=1.0)
    del document["spar"][0]["section"][0]["tube"]
    return made.solved(document)


@pytest.mark.parametrize(("bracing", "panels", "diagonals"), [("zigzag", 2, 1), ("horizontals", 1, 1), ("cross", 1, 2)])
def test_a_lattice_is_judged_by_its_bars(bracing: str, panels: int, diagonals: int) -> None:
    """The same column, by hand: at the foot N, M of the pull and the weight's arm, V, T; legs 346 mm off the face of the others."""
    s = lattice(bracing)
    pressed, pulled, lacing = (finding(s, "spar mast", q) for q in ("leg compression", "leg tension", "lacing force"))
    thrust = -s.bases.force[0, 0, 2]
    bending = math.hypot(300.0 * 3.0, 100.0 * G * 0.2)
    lever = 0.4 * math.sin(math.radians(60))
    assert pressed.demand == pytest.approx(bending / lever + thrust / 3, rel=1e-9)
    assert pulled.demand == pytest.approx(bending / lever - thrust / 3, rel=1e-9)
    area, second = math.pi * 0.0311 * 0.0026, math.pi / 64 * (0.0337**4 - 0.0285**4)
    assert pulled.capacity == pytest.approx(area * 235e6)
    slender = math.sqrt(area * 235e6 / (math.pi**2 * 210e9 * second)) * 0.5 * panels
    phi = 0.5 * (1 + 0.49 * (slender - 0.2) + slender**2)
    assert pressed.capacity == pytest.approx(area * 235e6 / (phi + math.sqrt(phi**2 - slender**2)))
    face = 2 / 3 * 300.0 + 60.0 / (3 * 0.4 / (2 * math.sqrt(3)))
    assert lacing.demand == pytest.approx(face * math.hypot(0.4, 0.5) / 0.4 / diagonals, rel=1e-9)
    assert {f.governs for f in (pressed, pulled)} == {"0 m (0 ft) from the foot"}


def test_a_lattice_that_cannot_be_judged_says_so() -> None:
    assert finding(lattice("cross", material="gfrp"), "spar mast").verdict == "not judged"
    thin = finding(lattice("cross", 4, "60 x 0.5 mm"), "spar mast")
    assert (thin.verdict, thin.why) == ("not judged", "the wall of its members buckles before it yields")


def test_capacities_come_together() -> None:
    with pytest.raises(ScenarioError) as caught:
        parse_scenario(made.text(column(capacity_shear=1e3)))
    messages = [str(f) for f in caught.value.faults]
    assert len(messages) == 2
    assert all("missing; it is needed with capacity_shear" in m for m in messages)
