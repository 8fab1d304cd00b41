"""The scenario file as it is written: one model per table, before references are looked up and shorthands spelled out.

What a table means once read is in `model`; where file and meaning agree (spars, sections, fittings, ice) the very same class
serves both.
"""

from __future__ import annotations

from typing import Annotated

from pydantic import Field

from guys import constants
from guys.scenario import quantity as q
from guys.scenario.anchor_entry import AnchorEntry, LayoutEntry
from guys.scenario.combination_entry import CombinationsEntry, FactoredEntry
from guys.scenario.field import FieldWork
from guys.scenario.gust import Gust
from guys.scenario.holding import Holdfast
from guys.scenario.ice import Ice
from guys.scenario.limit import Limit
from guys.scenario.lost import Lost
from guys.scenario.model import Analysis, CaseKind, End, Material, Setting, Spar, SparPoint
from guys.scenario.parts import Part
from guys.scenario.ranges import Ranges
from guys.scenario.shapes import Surface
from guys.scenario.site_table import SiteEntry
from guys.scenario.stage import Stage
from guys.scenario.table import Model
from guys.scenario.wind_entry import WindEntry


class CableEntry(Model):
    """Any single cable: guy, stay, forestay, backstay, topping stay.  One of tension, length, tight."""

    name: q.Name
    """Name, unique among cables."""
    from_: Annotated[SparPoint, Field(alias="from")]
    """The point of a spar it leaves."""
    to: End
    """The anchor or point of a spar it runs to."""
    rope: q.Name
    """A rope of the catalogue (guys list ropes), or a [rope.NAME] of the file."""
    tension: q.PositiveForce | None = None
    """Initial tension at the `to` end, still air, at setting.temperature."""
    length: q.PositiveLength | None = None
    """Unstressed length at setting.temperature."""
    tight: q.Flag | None = None
    """true: just free of slack in the dead-load position."""
    ends: list[q.Name] = []
    """Parts in the load path: names of the catalogue, or of a [part.NAME] of the file."""


class GuyLevel(Model):
    """One guy to each named anchor from one height.  One of tension, length, tight."""

    name: q.Name | None = None
    """Cables are named after it: "low N"; left out: after the height, "9 m N"."""
    spar: q.Name
    """The spar they leave."""
    at: q.LengthFromZero
    """Distance along the spar from its foot."""
    arm: q.LengthFromZero = 0.0
    """Lug: level distance from the axis toward the anchor."""
    rope: q.Name
    """A rope of the catalogue (guys list ropes), or a [rope.NAME] of the file."""
    to: Annotated[list[q.Name], Field(min_length=1)]
    """The anchors."""
    tension: q.PositiveForce | None = None
    """Initial tension at the anchor end, still air, at setting.temperature."""
    length: q.PositiveLength | None = None
    """Unstressed length at setting.temperature."""
    tight: q.Flag | None = None
    """true: just free of slack in the dead-load position."""
    ends: list[q.Name] = []
    """Parts in the load path: names of the catalogue, or of a [part.NAME] of the file."""


class RopeEntry(Model):
    """A rope.  Its stiffness EA is given, or follows from modulus and metal_area."""

    diameter: q.PositiveLength
    """Outside diameter."""
    mass: q.LinearMass
    """Mass per length."""
    stiffness: q.PositiveForce | None = None
    """Axial stiffness EA."""
    modulus: q.Stress | None = None
    """Modulus on the metal area."""
    metal_area: q.PositiveArea | None = None
    """Metal area."""
    strength: q.PositiveForce | None = None
    """Least breaking load; left out: not judged."""
    expansion: q.Expansion | None = None
    """Thermal expansion."""
    drag: q.Factor | None = None
    """Force coefficient on the diameter; left out: chosen from the shape."""
    surface: Surface | None = None
    """Surface of a smooth, round rope; left out: stranded, 1.2 at every wind speed."""


class CaseEntry(Model):
    """A load case."""

    name: q.Name
    """Name, unique among cases; "setting" is taken."""
    dead: q.Factor = 1.0
    """Factor on weights and fixed loads."""
    wind: q.Factor = 1.0
    """Factor on wind pressure."""
    ice: q.Factor = 0.0
    """Factor on the weight of ice."""
    temperature: q.Temperature | None = None
    """Temperature; left out: setting.temperature."""
    without: list[q.Name] = []
    """Cables taken away."""
    bare: list[q.Name] = []
    """Cables without ice in this case."""
    kind: CaseKind = "service"
    """service: loads once, what a crew installs and lowers by; allowable: of an allowable-stress design; factored: of a strength design."""


class AllowablesEntry(Model):
    """Least factors asked for."""

    cable: q.Ratio = 2.0
    """Least strength / tension."""
    anchor: q.Ratio = 1.5
    """Least holding / pull."""
    sliding: q.Ratio = 1.5
    """Least factor against sliding of a base."""
    lean: q.PositiveAngle = float(constants.DEGREE)
    """Greatest head lean in service."""
    spar: q.Ratio = 1.67
    """Least strength / what acts of a spar's section; the default is the factor on yield of AISC 360, allowable strength (from memory)."""
    bearing: q.Ratio = 1.0
    """Least bearing / pressure under a base plate; the default takes `bearing` as an allowable pressure."""
    factored: FactoredEntry = FactoredEntry()
    """Least factors in factored cases."""


class ScenarioFile(Model):
    """A structure of guyed masts, booms and pylons, its cables and anchors, the weather and what is asked."""

    format: Annotated[int, Field(strict=True, ge=1, le=1)] = 1
    """Version of this format."""
    title: q.Line
    """Title."""
    note: q.Text | None = None
    """Free text, printed on the sheet."""
    site: SiteEntry | None = None
    """Coordinate system, boundary, obstacles, ground."""
    spar: Annotated[list[Spar], Field(min_length=1)]
    """Masts, booms and pylons."""
    anchor: list[AnchorEntry] = []
    """Points on the ground."""
    layout: list[LayoutEntry] = []
    """Alternatives: anchors that differ."""
    guy_level: list[GuyLevel] = []
    """Guys to several anchors from one height."""
    cable: list[CableEntry] = []
    """Single cables."""
    rope: dict[q.Name, RopeEntry] = {}
    """Ropes by name."""
    material: dict[q.Name, Material] = {}
    """Materials by name."""
    part: dict[q.Name, Part] = {}
    """Parts in the load path of cables, by name."""
    holdfast: dict[q.Name, Holdfast] = {}
    """What holds anchors, by name."""
    setting: Setting = Setting()
    """The state in which the cables are tensioned."""
    wind: WindEntry | None = None
    """The reference wind; may be left out when no case has wind."""
    gust: Gust = Gust()
    """How the gusts of the wind come; left out: the peak on everything at once."""
    ice: Ice | None = None
    """Ice; may be left out when no case has ice."""
    case: list[CaseEntry] = []
    """Load cases; left out: one named "design" with dead 1, wind 1, ice 0, unless there are combinations."""
    combinations: CombinationsEntry | None = None
    """Named sets of load cases."""
    allowables: AllowablesEntry = AllowablesEntry()
    """Least factors asked for."""
    analysis: Analysis = Analysis()
    """How things are modelled."""
    lost: Lost = Lost()
    """For `guys lost`."""
    ranges: Ranges = Ranges()
    """For `guys matters`."""
    limit: Limit = Limit()
    """What the limit study is asked."""
    field: FieldWork = FieldWork()
    """For `guys field`."""
    stage: list[Stage] = []
    """States on the way up, in the order they are built."""
