"""The scenario as the rest of the program sees it: complete, resolved and in SI.

Attribute names are the keys of the scenario file.  Lengths [m], forces [N], masses [kg], temperatures [K], angles [rad]; x east,
y north, z up; bearings clockwise from grid north, wind bearings say where the wind comes from.  Everything is frozen;
`model_copy(update=...)` gives a changed copy.  What the file leaves out and the format gives a default for is filled in; None means
"not given".
"""

from __future__ import annotations

import math
from collections.abc import Mapping
from typing import Annotated, Any, Literal

from pydantic import Discriminator, Field, InstanceOf, Tag

from guys import constants
from guys.scenario import quantity as q
from guys.scenario.field import FieldWork
from guys.scenario.gust import Gust
from guys.scenario.holding import Holdfast
from guys.scenario.ice import Ice
from guys.scenario.lattice import Lattice
from guys.scenario.limit import Limit
from guys.scenario.lost import Lost
from guys.scenario.parts import Part
from guys.scenario.plate import Plate
from guys.scenario.raising import Raising
from guys.scenario.ranges import Ranges
from guys.scenario.search import Search
from guys.scenario.shapes import FittingShape, Rules, SectionShape, Surface
from guys.scenario.stage import Stage
from guys.scenario.table import GroundFoot as GroundFoot
from guys.scenario.table import Model
from guys.site import Site

MOST_OPEN = 0.7
"""Solidity up to which a face is an open frame; a fuller one is a sign with openings (ASCE 7 figures 29.3-1 and 29.4-2, read)."""
Base = Literal["pinned", "ball", "hinged", "fixed", "sprung"]


class Vector(Model):
    """A place or an offset east, north and up."""

    east: q.Length = 0.0
    """Toward the east."""
    north: q.Length = 0.0
    """Toward the north."""
    up: q.Length = 0.0
    """Upward."""


class ForceVector(Model):
    """A force east, north and up."""

    east: q.Force = 0.0
    """Toward the east."""
    north: q.Force = 0.0
    """Toward the north."""
    up: q.Force = 0.0
    """Upward; a weight is negative."""


class HeelFoot(Model):
    """A heel carried by another spar."""

    spar: q.Name
    """The spar that carries it."""
    at: q.LengthFromZero
    """Distance along that spar from its foot."""


def _key_tells(key: str, with_key: str, without: str) -> Discriminator:
    """A union told apart by one key; tags start with '<' so that they never look like a key of the file."""

    def tell(value: Any) -> str:
        present = key in value if isinstance(value, Mapping) else hasattr(value, key)
        return with_key if present else without

    return Discriminator(tell)


Foot = Annotated[Annotated[HeelFoot, Tag("<heel>")] | Annotated[GroundFoot, Tag("<ground>")], _key_tells("spar", "<heel>", "<ground>")]


class Tube(Model):
    """A round tube."""

    diameter: q.PositiveLength
    """Outside diameter."""
    wall: q.PositiveLength
    """Wall thickness."""


class Section(Model):
    """A straight stretch of a spar with one cross-section: a tube or lattice of a material, or its properties given outright."""

    length: q.PositiveLength
    """Length along the spar."""
    tube: Tube | None = None
    """A round tube; with `material` it gives mass, stiffness and width."""
    lattice: Lattice | None = None
    """A lattice of legs and lacing; with `material` it gives mass, stiffness and width."""
    material: q.Name | None = None
    """steel, aluminium, timber, gfrp, or a [material.NAME] of the file."""
    mass: q.LinearMass | None = None
    """Mass per length."""
    EA: q.PositiveForce | None = None
    """Axial stiffness."""
    EI: q.BendingStiffness | None = None
    """Bending stiffness, the same about every axis."""
    EI_x: q.BendingStiffness | None = None
    """Bending stiffness about the spar's first local axis."""
    EI_y: q.BendingStiffness | None = None
    """Bending stiffness about the spar's second local axis."""
    GJ: q.BendingStiffness | None = None
    """Torsional stiffness."""
    GA: q.PositiveForce | None = None
    """Shear stiffness; left out: no shear flexibility."""
    width: q.PositiveLength | None = None
    """Width the wind meets; of a lattice the projected solid area per length."""
    drag: q.Factor | None = None
    """Force coefficient on the width; left out: chosen from the shape."""
    shape: SectionShape | None = None
    """What a width given outright is that of: round, rectangle, hexagon, octagon, or sharp (angles, channels, I-sections)."""
    depth: q.PositiveLength | None = None
    """Depth of a rectangle behind `width`."""
    corner: q.LengthFromZero = 0.0
    """Corner radius of a rectangle."""
    face: q.Angle | None = None
    """Bearing of the normal to the face `width` of a rectangle; left out: the spar's `toward`."""
    surface: Surface | None = None
    """Surface of a round section, such as "galvanised steel" (the default), or its roughness."""
    iced_mass: q.LinearMass | None = None
    """Mass per length with the ice on it."""
    iced_width: q.PositiveLength | None = None
    """Width with the ice on it."""
    capacity_axial: q.PositiveForce | None = None
    """Axial force it bears, given outright; judged in place of the tube's stress, with capacity_bending."""
    capacity_bending: q.PositiveMoment | None = None
    """Bending moment it bears about any axis, given outright."""
    capacity_shear: q.PositiveForce | None = None
    """Shear it bears; left out: not judged."""
    capacity_torsion: q.PositiveMoment | None = None
    """Torsion it bears; left out: not judged."""


class Fitting(Model):
    """Anything a spar carries: antenna, sign face, lamp, payload."""

    name: q.Name
    """Name, unique among all fittings."""
    at: q.LengthFromZero
    """Distance along the spar from its foot."""
    mass: q.Mass = 0.0
    """Mass."""
    area: q.Area | None = None
    """Area the wind meets."""
    drag: q.Factor | None = None
    """Force coefficient on the area; left out: chosen from the shape."""
    shape: FittingShape = "any"
    """any: the same area from all bearings; flat: a face with a normal; round: an upright round body."""
    width: q.PositiveLength | None = None
    """Width of a flat face, or diameter of a round body."""
    height: q.PositiveLength | None = None
    """Height of a flat face, or length of a round body."""
    solidity: q.Share | None = None
    """Solid share of a flat face with openings; left out: 1."""
    bar: q.PositiveLength | None = None
    """Diameter of the round members of a face that is an open frame; left out: they are flat-sided."""
    surface: Surface | None = None
    """Surface of a round body, such as "galvanised steel" (the default), or its roughness."""
    face: q.Angle | None = None
    """Bearing of the face's normal, for flat."""
    face_tilt: q.Angle = 0.0
    """How far a flat face leans back."""
    offset: Vector = Vector()
    """Place of its centre from the spar's axis."""
    load: ForceVector = ForceVector()
    """A fixed force; joins the dead load."""
    iced_mass: q.Mass | None = None
    """Mass with the ice on it."""
    iced_area: q.Area | None = None
    """Area with the ice on it."""

    @property
    def open_frame(self) -> bool:
        """Whether it is a frame the wind blows through, not a sign."""
        return self.shape == "flat" and self.solidity is not None and self.solidity <= MOST_OPEN

    @property
    def sign(self) -> bool:
        """Whether it is a sign whose force, chosen from its shape, may stand to either side of its middle."""
        return self.shape == "flat" and self.drag is None and self.width is not None and not self.open_frame


class Spar(Model):
    """A mast, a boom or a pylon: a straight chain of sections from its foot."""

    name: q.Name
    """Name, unique among spars."""
    foot: Foot
    """Where it stands: a place on the ground, or a point of another spar."""
    lean: q.Angle = 0.0
    """Angle from the vertical."""
    toward: q.Angle = 0.0
    """Bearing it leans toward."""
    base: Base = "pinned"
    """pinned: tilts but does not spin; ball: tilts and spins; hinged: turns about one level axis; fixed; sprung: see base_stiffness."""
    base_stiffness: q.TurningSpring | None = None
    """Moment per angle of a sprung base."""
    hinge_axis: q.Angle | None = None
    """Bearing of the axis of a hinged base; left out: square to `toward`."""
    rigid: q.Flag = False
    """true: does not bend; sections then need no stiffness."""
    friction: q.Factor | None = None
    """Coefficient between base plate and ground, for the sliding check."""
    plate: Plate | None = None
    """Plate under its base, for the pressure on the ground."""
    section: Annotated[tuple[Section, ...], Field(min_length=1)]
    """Sections from the foot up."""
    fitting: tuple[Fitting, ...] = ()
    """What it carries."""

    @property
    def length(self) -> float:
        """Sum of the sections [m]."""
        return math.fsum(section.length for section in self.section)


class Anchor(Model):
    """A point on the ground that cables run to."""

    name: str
    east: float
    north: float
    level: float
    give: float | None = None
    """The anchor moves by the sum of its pulls divided by this [N/m]; None: it does not move."""
    holdfast: str | None = None
    """The holdfast that holds it."""


class SparPoint(Model):
    """A point of a spar that a cable is made fast to."""

    spar: q.Name
    """The spar."""
    at: q.LengthFromZero
    """Distance along the spar from its foot."""
    arm: q.LengthFromZero = 0.0
    """Lug: level distance from the axis toward the cable's other end."""


class AnchorPoint(Model):
    """An anchor as the end of a cable."""

    anchor: q.Name
    """The anchor."""


End = Annotated[Annotated[AnchorPoint, Tag("<anchor>")] | Annotated[SparPoint, Tag("<point>")], _key_tells("anchor", "<anchor>", "<point>")]


class Cable(Model):
    """A guy or stay.  Exactly one of `tension`, `length`, `tight` is given."""

    name: str
    from_: Annotated[SparPoint, Field(alias="from")]
    to: End
    rope: str
    tension: float | None = None
    """Initial tension at the `to` end in still air at the setting temperature [N]."""
    length: float | None = None
    """Unstressed length at the setting temperature [m]."""
    tight: bool = False
    """Just free of slack in the dead-load position."""
    ends: tuple[str, ...] = ()
    """Parts in its load path."""
    level: str | None = None
    """The guy level it came from, None for a single cable."""
    key: tuple[str | int, ...] = ()
    """Where it stands in the file, such as ("guy_level", 0)."""


class Rope(Model):
    """A rope: diameter [m], mass [kg/m], stiffness EA [N], strength [N], expansion [1/K], drag.

    source : of a catalogue rope; None where the file gives the rope
    """

    diameter: float
    mass: float
    stiffness: float
    strength: float | None = None
    expansion: float | None = None
    drag: float | None = None
    source: str | None = None
    surface: str | None = None


class Material(Model):
    """A material of spars."""

    density: q.Density
    """Density."""
    modulus: q.Stress
    """Young's modulus."""
    shear_modulus: q.Stress
    """Shear modulus."""
    yield_: Annotated[q.Stress | None, Field(alias="yield")] = None
    """Yield stress."""
    expansion: q.Expansion | None = None
    """Thermal expansion."""


class Setting(Model):
    """The state in which the cables are tensioned."""

    temperature: q.Temperature = float(constants.ZERO_CELSIUS) + 15.0
    """Temperature at which tensions and lengths are given; left out: 15 degC."""
    plumb: q.Flag = False
    """true: tensions are targets; those nearest them that leave every spar as drawn are found."""


class Profile(Model):
    """Wind over height, z above the foot; how the fields give the pressure is told in `guys.loads.pressure`.

    exponent : p of the speed;  reference : height [m] it counts from, None: that of the wind;  low, high : heights [m] below and above
    which nothing changes;  roughness z0 [m], terrain k_r, orography c_o : of the logarithmic profile;  crest : K1 K2 and gamma / Lh [1/m]
    of a hill, None: level ground;  turbulence : intensity at 10 m, None: of the logarithmic profile, or not known;  words : for the reader
    """

    kind: Literal["uniform", "power", "asce7", "en1991"] = "uniform"
    exponent: float = 0.0
    reference: float | None = None
    low: float = 0.0
    high: float = math.inf
    roughness: float = 1.0
    terrain: float = 0.0
    orography: float = 1.0
    crest: tuple[float, float] | None = None
    turbulence: float | None = None
    words: str = "uniform with height"


class Wind(Model):
    """The reference wind.

    speed [m/s] averaged over `averaging` [s] at `height` [m], as given; air_density [kg/m3]; directions: bearings it comes from [rad], in
    [0, 2 pi); speed_factor, pressure_factor: what conversion and chosen factors make of speed and pressure; notes: each of them in words
    """

    speed: float
    averaging: float
    height: float
    profile: Profile = Profile()
    air_density: float = constants.AIR_DENSITY
    directions: tuple[float, ...]
    coefficients: Rules | None = None
    """Whose force coefficients are chosen from shapes; None: those that go with the profile."""
    speed_factor: float = 1.0
    pressure_factor: float = 1.0
    notes: tuple[str, ...] = ()
    warnings: tuple[str, ...] = ()

    @property
    def rules(self) -> Rules:
        """Whose force coefficients are chosen from shapes."""
        return self.coefficients or ("asce7" if str(self.profile.kind) == "asce7" else "en")


ASIDE = ", sign force "
"""What the names of cases have in common whose sign forces are moved aside."""
CaseKind = Literal["service", "allowable", "factored"]


class Case(Model):
    """A load case: factors on the weights, the wind pressure and the weight of ice; the temperature [K]; cables taken away.

    kind : see `guys.scenario.combinations`; what a crew installs and when it lowers comes from service cases alone
    """

    name: str
    dead: float = 1.0
    wind: float = 1.0
    ice: float = 0.0
    temperature: float
    without: tuple[str, ...] = ()
    bare: tuple[str, ...] = ()
    kind: CaseKind = "service"

    @property
    def service(self) -> bool:
        """Loads once."""
        return self.kind == "service"


class Allowables(Model):
    """Least factors asked for; `defaulted` names those the user did not give; `factored`: of factored cases, where not the same."""

    cable: float = 2.0
    anchor: float = 1.5
    sliding: float = 1.5
    lean: float = math.radians(1.0)
    spar: float = 1.67
    bearing: float = 1.0
    factored: Mapping[str, float] = {}
    defaulted: frozenset[str] = frozenset()

    def required(self, name: str, kind: CaseKind) -> float:
        """The least factor of that name in cases of that kind."""
        common: float = getattr(self, name)
        return self.factored.get(name, common) if kind == "factored" else common


class Analysis(Model):
    """How things are modelled."""

    cable: Literal["catenary", "straight"] = "catenary"
    """catenary: own weight, ice and wind on the cable; straight: weightless, tension only."""


AS_DRAWN = "as drawn"
"""Name of the layout that the anchors of the file make."""


class Scenario(Model):
    """A whole scenario.

    cable : those of guy levels in file order, then the single ones; material : the built-in ones and the file's own
    part : the file's own and those of the catalogue that are used
    """

    format: int = 1
    title: str
    note: str | None = None
    site: InstanceOf[Site] | None = None
    """Boundary, obstacles and ground, with the coordinate grid; None where the file has no [site]."""
    spar: tuple[Spar, ...]
    anchor: tuple[Anchor, ...] = ()
    layout: str = AS_DRAWN
    """Name of the layout that its anchors make."""
    layouts: tuple[Scenario, ...] = ()
    """The same in each other layout of the file."""
    cable: tuple[Cable, ...] = ()
    rope: dict[str, Rope] = {}
    material: dict[str, Material] = {}
    part: dict[str, Part] = {}
    holdfast: dict[str, Holdfast] = {}
    raising: Raising | None = None
    """How a spar is raised, the table `[raise]`."""
    setting: Setting = Setting()
    wind: Wind | None = None
    gust: Gust = Gust()
    ice: Ice | None = None
    case: tuple[Case, ...]
    allowables: Allowables = Allowables()
    analysis: Analysis = Analysis()
    lost: Lost = Lost()
    search: Search | None = None
    ranges: Ranges = Ranges()
    limit: Limit = Limit()
    field: FieldWork = FieldWork()
    stage: tuple[Stage, ...] = ()
    sha256: str
    """Digest of the file's bytes."""
    path: str | None = None
    text: str = ""
    """What was read."""
    warnings: tuple[str, ...] = ()
    """Values that look like a slip."""
    notes: tuple[str, ...] = ()
    """What was converted, chosen or looked up, each with its source."""

    @property
    def is_drawn(self) -> bool:
        """Whether its anchors are those of the file, not of one of its other layouts."""
        return self.layout == AS_DRAWN

    def kind_of(self, case: str) -> CaseKind:
        """The kind of a case, sign forces moved aside or not; still air is a service case."""
        return next((each.kind for each in self.case if each.name == case.partition(ASIDE)[0]), "service")
