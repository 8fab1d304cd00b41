"""What can be listed, kind by kind: columns with their units and rows in SI.

A kind is a function that gives a `Listing`, named in `KINDS`; how it is printed is the door's business.  Every listing ends with how its
values came here, empty where there are none, and their source.
"""

from __future__ import annotations

from collections.abc import Callable, Mapping, Sequence
from dataclasses import dataclass

from guys import tables, units
from guys.catalogue import parts, ropes, tubes
from guys.catalogue.known import FROM_MEMORY, READ
from guys.scenario import holding
from guys.scenario.table import descriptions

Cell = str | float | None


@dataclass(frozen=True)
class Column:
    """head : its words; key : its name in JSON, with the SI unit; units : the SI and the US unit shown, None of text and ratios."""

    head: str
    key: str
    units: tuple[str, str] | None = None


@dataclass(frozen=True)
class Listing:
    """note : what must be said of the whole; rows in SI, one cell a column; each also has its `known` and `source`."""

    title: str
    note: str
    columns: tuple[Column, ...]
    rows: tuple[tuple[Cell, ...], ...]
    known: tuple[str, ...]
    source: tuple[str, ...]

    def holding(self, words: Sequence[str]) -> Listing:
        """The rows in whose text every word is found."""
        kept = [k for k in range(len(self.rows)) if all(word.lower() in self._text(k) for word in words)]

        def of(values: tuple[str, ...]) -> tuple[str, ...]:
            return tuple(values[k] for k in kept)

        return Listing(self.title, self.note, self.columns, tuple(self.rows[k] for k in kept), of(self.known), of(self.source))

    def _text(self, k: int) -> str:
        words = [cell for cell in self.rows[k] if isinstance(cell, str)]
        return " ".join((*words, self.known[k], self.source[k])).lower()


_FORCE, _STIFFNESS = ("kN", "lbf"), ("kN", "kip")
_NAME = Column("name", "name")


def _ropes() -> Listing:
    found = ropes.listed()
    columns = (
        _NAME,
        Column("what", "kind"),
        Column("diameter", "diameter_m", ("mm", "in")),
        Column("mass", "mass_kg_m", ("kg/m", "lb/ft")),
        Column("strength", "strength_N", _FORCE),
        Column("up to", "strength_high_N", _FORCE),
        Column("EA from", "stiffness_low_N", _STIFFNESS),
        Column("EA used", "stiffness_N", _STIFFNESS),
        Column("EA up to", "stiffness_high_N", _STIFFNESS),
        Column("expansion", "expansion_1_K", ("1/K", "1/degF")),
    )
    rows = tuple(
        (
            rope.name, rope.kind, rope.diameter, rope.mass, rope.strength,
            rope.strength_high if rope.strength_high > rope.strength else None,
            rope.stiffness.low, rope.stiffness.used, rope.stiffness.high, rope.expansion,
        )
        for rope in found
    )  # fmt: skip
    note = (
        "steel- and fibre ropes are made in any diameter, metric or in inches, steel- of grade 1570, 1770 (if none is named) or 1960:\n"
        "steel-7x7-1960-9mm, polyester-11mm. The strength is judged at its low end. A [rope.NAME] of the file beats a catalogue name."
    )
    return Listing("Ropes", note, columns, rows, tuple(rope.known for rope in found), tuple(rope.source for rope in found))


def _parts() -> Listing:
    found = tuple(parts.parts().values())
    columns = (
        _NAME,
        Column("what", "kind"),
        Column("share of the rope's strength", "efficiency"),
        Column("up to", "efficiency_high"),
        Column("strength", "strength_N", _FORCE),
    )
    rows = tuple((part.name, part.kind, part.efficiency, part.efficiency_high, part.strength) for part in found)
    note = "Of a range the low end counts. Strengths are least breaking loads, not working loads."
    return Listing("Parts in a cable's load path", note, columns, rows, tuple(p.known for p in found), tuple(p.source for p in found))


def _tubes() -> Listing:
    found = tubes.listed()
    columns = (
        _NAME,
        Column("diameter", "diameter_m", ("mm", "in")),
        Column("wall", "wall_m", ("mm", "in")),
        Column("area", "area_m2", ("mm2", "in2")),
        Column("I", "second_moment_m4", ("cm4", "in4")),
        Column("mass in steel", "mass_steel_kg_m", ("kg/m", "lb/ft")),
        Column("in aluminium", "mass_aluminium_kg_m", ("kg/m", "lb/ft")),
        Column("to copy", "copy"),
    )
    density = {row["name"]: float(row["density"]) for row in tables.rows("materials")}
    rows = tuple(
        (
            tube.name, tube.diameter, tube.wall, tube.area, tube.second_moment, density["steel"] * tube.area,
            density["aluminium"] * tube.area, f'tube = {{ diameter = "{tube.diameter_text}", wall = "{tube.wall_text}" }}',
        )
        for tube in found
    )  # fmt: skip
    note = "A scenario takes diameter and wall: copy the last column."
    return Listing("Round tubes", note, columns, rows, tuple(t.known for t in found), tuple(t.source for t in found))


def _materials() -> Listing:
    found = tables.rows("materials")
    columns = (
        _NAME,
        Column("density", "density_kg_m3", ("kg/m3", "lb/ft3")),
        Column("E", "modulus_Pa", ("GPa", "ksi")),
        Column("G", "shear_modulus_Pa", ("GPa", "ksi")),
        Column("yield", "yield_Pa", ("MPa", "ksi")),
        Column("expansion", "expansion_1_K", ("1/K", "1/degF")),
    )
    numbers = ("density", "modulus", "shear_modulus", "yield", "expansion")
    rows = tuple((row["name"], *(tables.number(row[name]) for name in numbers)) for row in found)
    note = "A [material.NAME] of the file beats one of the catalogue."
    return Listing("Materials of spars", note, columns, rows, tuple(r["known"] for r in found), tuple(r["source"] for r in found))


_FIGURES = {
    "block": ("friction",),
    "deadman": ("deadman", "holdfast_soils"),
    "picket": ("pickets", "holdfast_soils"),
    "screw": ("breakout", "torque_factors"),
}
"""Tables a kind of holdfast takes its figures from, or helps to choose them; the others are worked out from the user's alone."""


def _holdfasts() -> Listing:
    columns = (_NAME, Column("what", "what"), Column("needs", "needs"), Column("takes too", "takes"))
    rows, known, source = [], [], []
    for kind, model in holding.MODELS.items():
        fields = {field.alias or name: field for name, field in model.model_fields.items() if name not in ("kind", "source")}
        described = descriptions(model)
        needed = [key for key, field in fields.items() if field.is_required() or described.get(key, "").endswith("needed.")]
        what = (model.__doc__ or "").split(".")[0].lower()
        rows.append((kind, what, ", ".join(needed), ", ".join(key for key in fields if key not in needed)))
        figures = [row["source"] for table in _FIGURES.get(kind, ()) for row in tables.rows(table) if row.get("kind", kind) == kind]
        said = [text for text in dict.fromkeys(figures) if not text.startswith("the same")]
        known.append((f"{READ}; some {FROM_MEMORY}" if any(FROM_MEMORY in text for text in figures) else READ) if figures else "")
        source.append("; ".join(said) or "worked out from the dimensions and values given")
    note = 'Written as [holdfast.NAME] with kind = "block" and so on, and named by an anchor: holdfast = "NAME".'
    return Listing("Kinds of holdfast", note, columns, tuple(rows), tuple(known), tuple(source))


def _profiles() -> Listing:
    columns = (
        Column("profile", "name"),
        Column("terrain", "terrain"),
        Column("z0", "z0_m", ("m", "ft")),
        Column("constant below", "zmin_m", ("m", "ft")),
        Column("alpha", "alpha"),
        Column("gradient height", "gradient_height_m", ("m", "ft")),
    )
    plain = [
        ('"uniform"', "the same speed at every height", None, None, None, None),
        ("{ power = 0.14 }", "speed rising as a power of height, the exponent given", None, None, None, None),
    ]
    exposures = {"B": "built-up or wooded", "C": "open", "D": "along open water"}
    asce, european = tables.rows("terrain_asce7"), tables.rows("terrain_en1991")
    rows = [
        *plain,
        *(
            (f'{{ asce7 = "{r["exposure"]}", edition = "{r["edition"]}" }}', exposures[r["exposure"]], None, float(r["zmin"]),
             float(r["alpha"]), float(r["zg"]))
            for r in asce
        ),
        *(
            (f'{{ en1991 = "{r["category"]}"' + ("" if r["annex"] == "recommended" else f', annex = "{r["annex"]}"') + " }", r["terrain"],
             float(r["z0"]), float(r["zmin"]), None, None)
            for r in european
        ),
    ]  # fmt: skip
    source = ["the speed given"] * len(plain) + [r["source"] for r in (*asce, *european)]
    known = [READ + (f"; some {FROM_MEMORY}" if FROM_MEMORY in text else "") for text in source[len(plain) :]]
    note = "Written as profile = ... in [wind]. Speeds are converted to the averaging time a standard expects, and the conversion is told."
    return Listing("Wind profiles", note, columns, tuple(rows), ("", "", *known), tuple(source))


KINDS: Mapping[str, Callable[[], Listing]] = {
    "ropes": _ropes,
    "tubes": _tubes,
    "parts": _parts,
    "materials": _materials,
    "holdfasts": _holdfasts,
    "profiles": _profiles,
}
"""What can be listed, by the word that asks for it."""


def shown(cell: Cell, unit: str | None) -> str:
    """A cell as a table shows it: three figures in the unit of its column; text as it is."""
    if cell is None:
        return ""
    if isinstance(cell, str):
        return cell
    if unit is None:
        return f"{cell:.3g}"
    if unit.endswith("4"):
        return f"{cell / units.to_si(1.0, unit[:-1]) ** 4:.4g}"
    return f"{units.convert(cell, unit):.3g}" if unit.startswith("1/") else units.show(cell, unit, 4).removesuffix(f" {unit}")
