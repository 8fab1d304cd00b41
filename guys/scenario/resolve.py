"""From the tables of a faultless file to the `Scenario`: references looked up, shorthands spelled out, defaults filled in."""

from __future__ import annotations

import math
from collections.abc import Collection, Iterable, Iterator, Mapping
from functools import cache

from guys import tables
from guys.catalogue import ropes as stock
from guys.catalogue.rope import StockRope
from guys.scenario import drawn, standard_wind
from guys.scenario.anchor_entry import AnchorEntry
from guys.scenario.document import AllowablesEntry, CableEntry, CaseEntry, GuyLevel, RopeEntry
from guys.scenario.model import (
    Allowables,
    Anchor,
    AnchorPoint,
    Cable,
    Case,
    Fitting,
    Material,
    Rope,
    Setting,
    Spar,
    SparPoint,
    Wind,
)
from guys.scenario.wind_entry import WindEntry

DEFAULT_CASE = "design"


@cache
def built_in_materials() -> Mapping[str, Material]:
    """The materials of ``guys/data/materials.csv``."""
    found = {}
    for row in tables.rows("materials"):
        density, modulus, shear = float(row["density"]), float(row["modulus"]), float(row["shear_modulus"])
        found[row["name"]] = Material(
            density=density,
            modulus=modulus,
            shear_modulus=shear,
            yield_=tables.number(row["yield"]),
            expansion=tables.number(row["expansion"]),
        )
    return found


def spar(entry: Spar) -> Spar:
    """The spar with the axis of its hinge and the areas of its fittings filled in."""
    axis = entry.toward + math.pi / 2 if entry.base == "hinged" and entry.hinge_axis is None else entry.hinge_axis
    return entry.model_copy(update={"hinge_axis": axis, "fitting": tuple(fitting(each) for each in entry.fitting)})


def fitting(entry: Fitting) -> Fitting:
    """The fitting, its area worked out from width, height and solidity where so given."""
    if entry.area is not None or entry.width is None or entry.height is None:
        return entry
    return entry.model_copy(update={"area": entry.width * entry.height * (entry.solidity or 1.0)})


def anchor(entry: AnchorEntry, foot: drawn.Point) -> Anchor:
    """The anchor at its place, `foot` being that of the first spar."""
    east, north, level = drawn.anchor_place(entry, foot)
    return Anchor(name=entry.name, east=east, north=north, level=level, give=entry.give, holdfast=entry.holdfast)


def guys_of(index: int, entry: GuyLevel, at_text: str) -> Iterator[Cable]:
    """The cables of the guy level of that index; `at_text` is its height as written."""
    level = entry.name or " ".join(at_text.split())
    for name in entry.to:
        yield Cable(
            name=f"{level} {name}",
            from_=SparPoint(spar=entry.spar, at=entry.at, arm=entry.arm),
            to=AnchorPoint(anchor=name),
            rope=entry.rope,
            tension=entry.tension,
            length=entry.length,
            tight=bool(entry.tight),
            ends=tuple(entry.ends),
            level=level,
            key=("guy_level", index),
        )


def cable(index: int, entry: CableEntry) -> Cable:
    """The single cable of that index."""
    return Cable(
        name=entry.name,
        from_=entry.from_,
        to=entry.to,
        rope=entry.rope,
        tension=entry.tension,
        length=entry.length,
        tight=bool(entry.tight),
        ends=tuple(entry.ends),
        key=("cable", index),
    )


def rope(entry: RopeEntry) -> Rope:
    """The rope, its stiffness worked out from modulus and metal area where so given."""
    stiffness = entry.stiffness if entry.stiffness is not None else (entry.modulus or 0.0) * (entry.metal_area or 0.0)
    given = entry.model_dump(include={"diameter", "mass", "strength", "expansion", "drag", "surface"})
    return Rope(stiffness=stiffness, **given)


def stock_ropes(used: Iterable[str], own: Collection[str]) -> dict[str, Rope]:
    """The catalogue ropes among those used, where the file has none of that name."""
    wanted = dict.fromkeys(name for name in used if name not in own)
    return {name: _stocked(found) for name in wanted if (found := stock.find(name)) is not None}


def _stocked(found: StockRope) -> Rope:
    return Rope(
        diameter=found.diameter,
        mass=found.mass,
        stiffness=found.stiffness.used,
        strength=found.strength,
        expansion=found.expansion,
        source=found.source,
    )


def directions(entry: float | list[float]) -> tuple[float, ...]:
    """Bearings in [0, 2 pi)."""
    if isinstance(entry, list):
        return tuple(bearing % math.tau % math.tau for bearing in entry)
    count = round(math.tau / entry)
    return tuple(math.tau * step / count for step in range(count))


def wind(entry: WindEntry) -> Wind:
    """The wind with its profile, air density and factors worked out."""
    return standard_wind.resolved(entry, directions(entry.directions))


def cases(entries: list[CaseEntry], setting: Setting) -> tuple[Case, ...]:
    """The load cases."""
    return tuple(
        Case(
            name=entry.name,
            dead=entry.dead,
            wind=entry.wind,
            ice=entry.ice,
            temperature=setting.temperature if entry.temperature is None else entry.temperature,
            without=tuple(entry.without),
            bare=tuple(entry.bare),
            kind=entry.kind,
        )
        for entry in entries
    )


def allowables(entry: AllowablesEntry) -> Allowables:
    """The allowables, with the names of those left out."""
    given = entry.model_fields_set
    factored = entry.factored.model_dump(exclude_none=True)
    defaulted = frozenset(set(AllowablesEntry.model_fields) - given - {"factored"})
    return Allowables(**entry.model_dump(exclude={"factored"}), factored=factored, defaulted=defaulted)
