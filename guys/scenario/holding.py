"""The tables [holdfast.NAME]: what holds an anchor, one model a kind.

File and meaning agree, so the models serve both; rules that look at several keys or at published tables are in `held`.  The keys of a
model, but for `kind`, `rod_strength` and `source`, are the arguments of its kind's function in `guys.holdfasts`.
"""

from __future__ import annotations

import math
from collections.abc import Mapping
from typing import Annotated, Any, Literal, get_args

from pydantic import BeforeValidator, Discriminator, Field, Tag

from guys.scenario import quantity as q
from guys.scenario.table import Model

Kind = Literal["block", "deadman", "picket", "screw", "rock", "tested"]
Pattern = Literal["1", "1-1", "2-1", "1-1-1", "3-2-1"]


class _Common(Model):
    """Keys of every kind."""

    low: Annotated[float, Field(strict=True, gt=0.0, le=1.0)] | None = None
    """Low end of what it may hold, as a share of the best value: what is judged.  Left out: 1, of a screw in sand the lesser theory."""
    high: Annotated[float, Field(strict=True, ge=1.0, allow_inf_nan=False)] | None = None
    """High end, as a share of the best value; left out: 1."""
    rod_strength: q.PositiveForce | None = None
    """Least breaking load of the rod, eye or strap that the cables pull on; left out: not judged."""
    source: q.Line | None = None
    """Where its numbers come from, printed beside it."""


class Block(_Common):
    """A weight lying on the ground."""

    kind: Literal["block"]
    """block"""
    mass: Annotated[float, q.Quantity("mass", "positive")]
    """Mass."""
    friction: Annotated[float, Field(strict=True, gt=0.0, le=1.0)]
    """Coefficient between block and ground, at most 1."""
    length: q.PositiveLength | None = None
    """Length of its base; left out: tipping along it is not judged."""
    width: q.PositiveLength | None = None
    """Width of its base; left out: tipping along it is not judged."""
    height: q.PositiveLength | None = None
    """Height."""
    eye_height: q.LengthFromZero | None = None
    """Height of the eye above the ground; left out: at its top."""
    slope: Annotated[float, q.Quantity("angle", "not negative")] = 0.0
    """Slope of the ground, taken to fall the way it is pulled."""
    bearing: q.Stress | None = None
    """Allowable pressure on the ground; left out: not judged."""


class Deadman(_Common):
    """A log or timber buried across the pull."""

    kind: Literal["deadman"]
    """deadman"""
    length: q.PositiveLength
    """Length across the pull."""
    height: q.PositiveLength
    """Height of the face that bears on the ground; of a log its thickness."""
    depth: q.PositiveLength
    """Depth of the middle of its face."""
    soil: Literal["loam", "clay", "sand", "hardpan"] | None = None
    """loam, clay, sand or hardpan; needed."""
    wet: q.Flag = False
    """true: ground of high moisture."""
    form: Literal["timber", "log"] = "timber"
    """timber (squared) or log (round): how long it may be for its thickness."""


class Picket(_Common):
    """Stakes driven one behind another, lashed head to foot."""

    kind: Literal["picket"]
    """picket"""
    pattern: Pattern
    """Pickets in each row, the front row first."""
    soil: Literal["loam", "gravel", "sand"] | None = None
    """loam, gravel (mixed with clay) or sand (river clay and sand); needed."""
    wet: q.Flag = False
    """true: saturated ground."""
    spacing: q.PositiveLength | None = None
    """Distance between rows; the published figures are for 3 to 6 ft."""
    driven: q.PositiveLength | None = None
    """Depth driven; the published figures are for 3 to 4 ft."""
    steepest: q.PositiveAngle = math.radians(45.0)
    """Steepest pull the figures are taken for; left out: 45 deg, common practice."""


class Ground(Model):
    """The ground around a screw: of sand friction_angle and unit_weight, of clay cohesion, or the torque reached."""

    friction_angle: q.PositiveAngle | None = None
    """Angle of friction of sand."""
    unit_weight: Annotated[float, q.Quantity("weight per volume", "positive")] | None = None
    """Weight per volume of sand; `wet` takes the water's off."""
    cohesion: q.Stress | None = None
    """Undrained cohesion of clay."""
    torque: Annotated[float, q.Quantity("moment", "positive")] | None = None
    """Torque at the end of turning it in."""


class Shaft(Model):
    """The shaft of a screw: square or round."""

    square: q.PositiveLength | None = None
    """Side of a square shaft."""
    round: q.PositiveLength | None = None
    """Diameter of a round shaft."""


def _ground(value: Any) -> Any:
    """A name of a ground is not enough for a screw, and rock takes none."""
    if isinstance(value, str):
        hint = 'a screw does not go into rock; use kind = "rock"' if "rock" in value.lower() else "a name says too little of the ground"
        raise q.fault(
            f"{q.shown(value)}: {hint}; or give {{ friction_angle, unit_weight }} of sand, {{ cohesion }} of clay, or {{ torque }}"
        )
    return value


class Screw(_Common):
    """Plates on a shaft turned into the ground."""

    kind: Literal["screw"]
    """screw"""
    helix: Annotated[list[q.PositiveLength], Field(min_length=1, max_length=20)]
    """Diameters of its plates, the lowest first."""
    depth: q.PositiveLength
    """Depth of the lowest plate, straight down."""
    soil: Annotated[Ground | None, BeforeValidator(_ground)] = None
    """{ friction_angle, unit_weight }, { cohesion } or { torque }; needed, unless `torque` stands beside it."""
    torque: Annotated[float, q.Quantity("moment", "positive")] | None = None
    """Torque at the end of turning it in, in place of soil."""
    spacing: q.PositiveLength | None = None
    """Between plates along the shaft; left out: three diameters of the lower one."""
    shaft: Shaft | None = None
    """{ square = "38 mm" } or { round = "73 mm" }; needed with torque, otherwise taken off the plates' area."""
    wet: q.Flag = False
    """true: water up to the surface."""
    rod: q.Angle | None = None
    """Angle of the shaft above the horizontal; left out: in line with the pull."""


class Rock(_Common):
    """A bar grouted into rock or concrete."""

    kind: Literal["rock"]
    """rock"""
    bar: q.PositiveLength
    """Diameter of the bar."""
    bond_length: q.PositiveLength
    """Length bonded."""
    bond_stress: q.Stress
    """Bond stress between grout and bar at failure."""
    hole: q.PositiveLength | None = None
    """Diameter of the hole."""
    rock_bond_stress: q.Stress | None = None
    """Bond stress between grout and rock at failure; with hole."""
    yield_: Annotated[q.Stress | None, Field(alias="yield")] = None
    """Yield stress of the bar; left out: the bar is not judged."""
    area: q.PositiveArea | None = None
    """Area of the bar's thread; left out: of its full circle."""
    free_length: q.LengthFromZero = 0.0
    """Length of the bar in the rock above the bond."""
    unit_weight: Annotated[float, q.Quantity("weight per volume", "positive")] | None = None
    """Weight per volume of the rock, for the cone lifted."""
    tensile_stress: q.Stress | None = None
    """Tension the rock or concrete bears over the cone's base circle."""
    cone: q.PositiveAngle = math.radians(30.0)
    """Half the opening of the cone; left out: 30 deg."""
    rod: q.Angle | None = None
    """Angle of the bar above the horizontal; left out: in line with the pull."""


class Tested(_Common):
    """Anything that was pulled and held."""

    kind: Literal["tested"]
    """tested"""
    pull: q.PositiveForce
    """What the test showed, at the pull's own angle."""
    test_angle: q.Angle | None = None
    """Angle of the test above the horizontal; left out: that of every pull."""
    factor: Annotated[float, Field(strict=True, ge=1.0, allow_inf_nan=False)] = 1.0
    """The pull is divided by this for what the test does not show."""


MODELS: Mapping[str, type[_Common]] = {
    "block": Block,
    "deadman": Deadman,
    "picket": Picket,
    "screw": Screw,
    "rock": Rock,
    "tested": Tested,
}


def _tell(value: Any) -> str | None:
    kind = value.get("kind") if isinstance(value, Mapping) else getattr(value, "kind", None)
    return f"<{kind}>" if kind in get_args(Kind) else None


Holdfast = Annotated[
    Annotated[Block, Tag("<block>")]
    | Annotated[Deadman, Tag("<deadman>")]
    | Annotated[Picket, Tag("<picket>")]
    | Annotated[Screw, Tag("<screw>")]
    | Annotated[Rock, Tag("<rock>")]
    | Annotated[Tested, Tag("<tested>")],
    Discriminator(
        _tell,
        custom_error_type="guys",
        custom_error_message="{text}",
        custom_error_context={"text": "no kind, or an unknown one; write kind as one of " + ", ".join(f'"{kind}"' for kind in MODELS)},
    ),
]
