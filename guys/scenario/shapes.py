"""Shapes a force coefficient can be chosen from, and surfaces with their roughness."""

from __future__ import annotations

from typing import Annotated, Literal

from pydantic import AfterValidator, Field, WithJsonSchema

from guys import tables, units
from guys.scenario import quantity as q
from guys.scenario.keys import nearest

SectionShape = Literal["round", "rectangle", "hexagon", "octagon", "sharp"]
FittingShape = Literal["any", "flat", "round"]
Rules = Literal["en", "asce7"]
"""Whose force coefficients: EN 1991-1-4 and EN 1993-3-1, or ASCE 7."""
USUAL_SURFACE = "galvanised steel"


def surfaces() -> dict[str, dict[str, str]]:
    """The surfaces of `guys/data/roughness.csv` by name."""
    return {row["surface"]: row for row in tables.rows("roughness")}


def roughness(surface: str | None) -> float:
    """Roughness k [m] of a surface by its name or as written; of the usual one where none is given."""
    named = surfaces().get(surface or USUAL_SURFACE)
    return float(named["roughness"]) if named else units.parse(surface or "", "length")


def surface_words(surface: str | None) -> str:
    """A surface, its roughness and where that comes from."""
    name = surface or USUAL_SURFACE
    known = surfaces().get(name)
    if known is None:
        return f"roughness {name}"
    mark = "from memory" if "memory" in known["source"] else "read"
    return f"{name}, roughness {1000 * float(known['roughness']):g} mm ({mark})"


def _surface(value: str) -> str:
    if value in surfaces():
        return value
    try:
        if units.parse(value, "length") >= 0.0:
            return value
    except units.UnitError:
        pass
    known = nearest(value, surfaces()) or "; known: " + ", ".join(surfaces())
    raise q.fault(f'"{value}" is no surface and no roughness such as "0.2 mm"{known}')


Surface = Annotated[
    str,
    Field(strict=True, max_length=80),
    AfterValidator(_surface),
    WithJsonSchema({"type": "string", "examples": [USUAL_SURFACE, "0.2 mm"]}),
]
