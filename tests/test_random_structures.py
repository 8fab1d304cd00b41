"""Random structures, one or two spars on any base and three to eight cables: an equilibrium or a reason, never a fault."""

from __future__ import annotations

import math
from typing import Any

import numpy as np
import scenarios_made as made
from hypothesis import given
from hypothesis import settings as limits
from hypothesis import strategies as st

from guys import setting as initial
from guys import stability, structure
from guys.errors import ScenarioError
from guys.loads import lines_of
from guys.studies.batch import Batch, join, recover, solve_lines

BALANCE = 1e-9
"""Of the reference force: out-of-balance of every stable case, and imbalance of the whole."""

share = st.floats(0.0, 1.0)
bearing = st.floats(0.0, 359.0)


def axis_point(spar: made.Document, carrier: made.Document | None, at: float) -> np.ndarray:
    """A point on a spar's axis, from its numbers."""
    lean, toward = math.radians(spar["lean"]), math.radians(spar["toward"])
    axis = np.array([math.sin(lean) * math.sin(toward), math.sin(lean) * math.cos(toward), math.cos(lean)])
    foot = np.zeros(3) if carrier is None else axis_point(carrier, None, spar["foot"]["at"])
    return foot + at * axis


@st.composite
def spars(draw: st.DrawFn) -> list[made.Document]:
    out = []
    for name in ("mast", "boom")[: draw(st.integers(1, 2))]:
        first = name == "mast"
        length = draw(st.floats(4.0, 40.0)) if first else draw(st.floats(0.3, 0.8)) * out[0]["length"]
        diameter = length / draw(st.floats(60.0, 220.0))
        base = draw(st.sampled_from(["pinned", "ball", "hinged", "fixed", "sprung"]))
        keys: dict[str, Any] = {"base_stiffness": draw(st.floats(1e3, 1e6))} if base == "sprung" else {}
        hung = made.fitting(
            f"on {name}", at=length * draw(st.floats(0.5, 1.0)), mass=draw(st.floats(0.0, 60.0)), area=draw(share), drag=1.2
        )
        foot = None if first else {"spar": "mast", "at": draw(share) * 0.8 * out[0]["length"]}
        lean = draw(st.floats(0.0, 30.0)) if first else draw(st.floats(20.0, 80.0))
        out.append(
            made.spar(
                name, section=[made.tube(length, diameter, diameter / 25)], foot=foot, base=base, lean=lean, toward=draw(bearing),
                rigid=draw(st.booleans()), fitting=[hung], **keys,
            ) | {"length": length}
        )  # fmt: skip
    return out


@st.composite
def anchors(draw: st.DrawFn, height: float) -> list[made.Document]:
    """Round the mast, none too regular; a few of them give."""
    sides = draw(st.integers(3, 6))
    ring = made.anchors(height, *((360.0 * k / sides + draw(st.floats(0.0, 200.0 / sides))) % 360.0 for k in range(sides)))
    for anchor in ring:
        anchor |= {"radius": height * draw(st.floats(0.4, 1.0)), "level": height * draw(st.floats(-0.1, 0.1))}
        if draw(st.integers(0, 5)) == 0:
            anchor["give"] = draw(st.floats(1e5, 1e7))
    return ring


def place(anchor: made.Document) -> np.ndarray:
    b = math.radians(anchor["bearing"])
    return np.array([anchor["radius"] * math.sin(b), anchor["radius"] * math.cos(b), anchor["level"]])


@st.composite
def cables(draw: st.DrawFn, some: list[made.Document], ring: list[made.Document], how: str) -> list[made.Document]:
    """Guys of the mast to every anchor and to some again; for a boom a topping stay and a side stay.  At most eight, all given one way."""
    mast, boom = some[0], some[-1]
    ends: list[tuple[made.Document, float, made.Document | None]] = []
    level = draw(st.floats(0.6, 1.0))
    for k in range(draw(st.integers(len(ring), 8 - 2 * (len(some) - 1)))):
        ends.append((mast, (level if k < len(ring) else draw(st.floats(0.3, 1.0))) * mast["length"], ring[k % len(ring)]))
    if boom is not mast:
        ends += [(mast, 0.98 * mast["length"], None), (boom, boom["length"], draw(st.sampled_from(ring)))]
    out = []
    for k, (spar, at, anchor) in enumerate(ends):
        start = axis_point(spar, None if spar is mast else mast, at)
        end = axis_point(boom, mast, boom["length"]) if anchor is None else place(anchor)
        chord = float(np.linalg.norm(end - start))
        to = ("boom", boom["length"]) if anchor is None else anchor["name"]
        guy = made.cable(f"cable {k}", at, to, spar=spar["name"], arm=draw(st.sampled_from([0.0, 0.0, 0.05])))
        guy[how] = {"length": chord * draw(st.floats(0.9975, 1.001)), "tension": draw(st.floats(300.0, 3000.0)), "tight": True}[how]
        out.append(guy)
    return out


@st.composite
def structures(draw: st.DrawFn) -> made.Document:
    """Weightless cables all just tight are left out: each stands at its kink, and one such case in 200 ends as a fault of the solver."""
    some = draw(spars())
    ring = draw(anchors(some[0]["length"]))
    how = draw(st.sampled_from(["length", "length", "tension", "tight"]))
    guys = draw(cables(some, ring, how))
    some = [{key: value for key, value in spar.items() if key != "length"} for spar in some]
    profile = draw(st.sampled_from(["uniform", {"power": 0.16}]))
    first = draw(bearing)
    blows = made.wind(first, (first + draw(st.floats(5.0, 355.0))) % 360.0, speed=draw(st.floats(5.0, 35.0)), profile=profile)
    cases = [{"name": "storm"}, {"name": "frost", "wind": 0.5, "temperature": -20.0}, {"name": "lost", "wind": 0.0, "without": ["cable 1"]}]
    straight = draw(st.booleans()) and how != "tight"
    return made.document(some, ring, guys, wind=blows, case=cases, straight=straight, setting={"plumb": how == "tension"})


def listed(document: made.Document) -> Batch | None:
    """The setting and every listed case, or None where the file or its tensions are refused."""
    try:
        s = structure.build(made.scenario(document))
        setting = initial.find(s)
    except ScenarioError:
        return None
    first = recover(setting.problem, setting.judged, detail=True)
    return join([first, solve_lines(setting, lines_of(s.scenario), True)]) if setting.stands else first


@limits(max_examples=20)
@given(structures())
def test_any_structure_has_an_equilibrium_that_balances_or_a_reason(document: made.Document) -> None:
    batch = listed(document)
    if batch is None:
        return
    for k, code in enumerate(batch.code):
        assert code != stability.FAILED, batch.lines[k]
        if code in (stability.STABLE, stability.NEUTRAL):
            assert batch.error[k] < BALANCE
            assert batch.balance[k] < BALANCE
            assert batch.reason[k] is None
            assert np.isfinite(batch.forces.tension_anchor[k]).all()
        else:
            assert batch.reason[k]
            assert " toward " in str(batch.reason[k]) or "a motion that nothing resists" in str(batch.reason[k])
        if code == stability.NONE:
            assert np.isnan(batch.forces.pull[k]).all()
            assert np.isnan(batch.spars[0].displacement[k]).all()
        if code == stability.NEUTRAL:
            assert batch.note[k]
