"""Ice as the file gives it: a thickness all round, or a class of ISO 12494, and what goes with it.

A glaze class G1..G5 is a thickness; a rime class R1..R5 a mass per length that grows as a vane into the wind, whose length and width depend
on the bar.  What of a class was read and what is from memory stands in `guys/data/ice_classes.csv`.
"""

from __future__ import annotations

from collections.abc import Iterator
from functools import cache
from typing import TYPE_CHECKING, Annotated, Literal

from pydantic import Field

from guys import constants, tables, units
from guys.scenario import quantity as q
from guys.scenario.keys import Finding
from guys.scenario.table import Model

if TYPE_CHECKING:
    from guys.scenario.draft import Draft

IceClass = Literal["G1", "G2", "G3", "G4", "G5", "G6", "R1", "R2", "R3", "R4", "R5", "R6", "R7", "R8", "R9", "R10"]


class Ice(Model):
    """Ice on everything: a thickness, or a class of ISO 12494."""

    thickness: q.PositiveLength | None = None
    """Thickness all round."""
    class_: Annotated[IceClass | None, Field(alias="class")] = None
    """A class of ISO 12494 in place of a thickness: G1 to G5 (glaze), R1 to R5 (rime)."""
    density: q.Density = constants.ICE_DENSITY
    """Density, with `thickness`; left out: 900 kg/m3."""
    height_effect: Literal["none", "iso12494", "asce7"] = "none"
    """How ice grows with height: iso12494 multiplies the mass of rime, asce7 the thickness of glaze; both from memory."""
    vane: Literal["windward", "across"] = "windward"
    """How the wind meets a vane of rime: along it (its width counts), or square to it (bar and vane count)."""
    reduce_wind: q.Flag = False
    """true: in cases with ice the wind pressure is multiplied by the factor of the class, from memory."""
    drag: q.Factor | None = None
    """Force coefficient of round bars and cables with ice on them whose own is chosen from the shape; left out: 1.2."""

    @property
    def rime(self) -> bool:
        """Whether it grows as a vane."""
        return self.class_ is not None and self.class_.startswith("R")

    @property
    def wind_factor(self) -> float:
        """On the wind pressure of cases with ice."""
        return float(classes()[self.class_]["wind"]) if self.reduce_wind and self.class_ is not None else 1.0


@cache
def classes() -> dict[str, dict[str, str]]:
    """The classes whose mass is known, by name."""
    return {row["class"]: row for row in tables.rows("ice_classes")}


def resolved(ice: Ice) -> Ice:
    """The ice with the thickness and density of its class filled in; rime keeps no thickness."""
    if ice.class_ is None:
        return ice
    row = classes()[ice.class_]
    return ice.model_copy(update={"thickness": tables.number(row["thickness"]), "density": float(row["density"])})


def findings(draft: Draft) -> Iterator[Finding]:
    """What does not go together in [ice] and in the cases with ice."""
    ice = draft.ice
    for index, case in enumerate(draft.case):
        if case is not None and case.bare and case.ice == 0.0:
            yield Finding(("case", index, "bare"), "the case has no ice; leave bare out, or give ice a factor")
    if ice is None:
        return
    if (ice.thickness is None) == (ice.class_ is None):
        got = "has thickness and class" if ice.class_ else "has neither thickness nor class"
        yield Finding(("ice",), f'{got}; give one, such as thickness = "10 mm" or class = "G2"', (("ice", "thickness"), ("ice", "class")))
        return
    yield from _class(ice)
    if ice.class_ is not None and "density" in ice.model_fields_set:
        yield Finding(("ice", "density"), f"follows from class {ice.class_}; leave it out, or give thickness and density")
    if ice.class_ is None and ice.reduce_wind:
        yield Finding(("ice", "reduce_wind"), "the factor goes with a class of ISO 12494; give class, or a lesser wind in the case")
    if not ice.rime and "vane" in ice.model_fields_set:
        yield Finding(("ice", "vane"), "only rime grows as a vane; give a class R1 to R5, or leave vane out")
    if ice.height_effect == "iso12494" and not ice.rime:
        yield Finding(("ice", "height_effect"), '"iso12494" is for rime, glaze does not grow with height there; write "asce7" or "none"')
    if ice.height_effect == "asce7" and ice.rime:
        yield Finding(("ice", "height_effect"), '"asce7" is for glaze; write "iso12494" or "none"')


def _class(ice: Ice) -> Iterator[Finding]:
    if ice.class_ in ("G6", "R10"):
        text = f"{ice.class_} stands for extreme ice that only a study of the site can tell; give thickness and density"
        yield Finding(("ice", "class"), text)
    elif ice.class_ is not None and ice.rime and not classes()[ice.class_]["length_10"]:
        yield Finding(("ice", "class"), f"the size of the vanes of {ice.class_} is not known to this version; known: R1 to R5 and G1 to G5")


def cautions(ice: Ice) -> Iterator[str]:
    """What of the ice is from memory or derived, for all to see."""
    if ice.class_ is not None and not ice.rime:
        yield f"ice: the thickness of class {ice.class_} is from memory, not read in ISO 12494"
    if ice.rime:
        other = "square to it" if ice.vane == "windward" else "along it"
        derived = "vanes on bars thicker than 30 mm are derived from the mass, not read"
        yield f"ice: {derived}; the wind is taken {_VANE[ice.vane]}, not {other}"
    if ice.height_effect != "none":
        yield "ice: its growth with height is from memory, and does not reach sections and fittings whose ice is given outright"
    if ice.reduce_wind:
        told = f"the wind pressure of cases with ice is multiplied by {ice.wind_factor:g}, from memory"
        yield f"ice: {told}; do not reduce it in the cases too"


_VANE = {"windward": "along the vane", "across": "square to the vane"}


def words(ice: Ice) -> str:
    """The ice in one line, with what is from memory."""
    if ice.rime and ice.class_ is not None:
        mass = units.both(float(classes()[ice.class_]["mass"]), "mass per length")
        text = f"class {ice.class_} of ISO 12494, rime, {mass}, the wind {_VANE[ice.vane]}"
    else:
        name = f"class {ice.class_} of ISO 12494 (thickness from memory), glaze, " if ice.class_ else ""
        text = f"{name}{units.both(ice.thickness or 0.0, 'length', ('mm', 'in'))}, {units.both(ice.density, 'density')}"
    grows = {
        "iso12494": ", mass times exp(0.01 z/m) (ISO 12494, from memory)",
        "asce7": ", thickness times (z/10 m)^0.10 (ASCE 7, from memory)",
    }
    reduced = f", wind pressure with ice times {ice.wind_factor:g} (ISO 12494, from memory)" if ice.reduce_wind else ""
    return f"{text}{grows.get(ice.height_effect, '')}{reduced}"
