"""What a site is made of, in metres from its origin: x east, y north, levels above the origin's level."""

from __future__ import annotations

from dataclasses import dataclass
from typing import TYPE_CHECKING, Literal

from guys.site.grid import Grid
from guys.site.ground import Ground

if TYPE_CHECKING:
    from shapely.geometry.base import BaseGeometry

Kind = Literal["keep-out", "building", "road", "path", "crowd", "service", "line", "mast"]
KINDS: tuple[Kind, ...] = ("keep-out", "building", "road", "path", "crowd", "service", "line", "mast")


@dataclass(frozen=True)
class Obstacle:
    """Something on the ground or over it.

    shape : in plan;  clearance [m] : no anchor nearer than this in plan;  headroom [m] : no cable lower than this over it
    height [m] : top of a building or a mast, or of an overhead line, above the ground;  distance [m] : no cable or spar nearer than this in
    space;  None : not given
    """

    name: str
    kind: Kind
    shape: BaseGeometry
    clearance: float | None = None
    headroom: float | None = None
    height: float | None = None
    distance: float | None = None


@dataclass(frozen=True)
class Site:
    """The site of a scenario.

    grid : None without a coordinate system;  boundary : what anchors must stay inside, by `setback` [m]
    declination [rad] : magnetic bearing = grid bearing - declination;  files : name and SHA-256 of every file read
    notes : what was passed over in reading them
    """

    grid: Grid | None = None
    boundary: BaseGeometry | None = None
    obstacles: tuple[Obstacle, ...] = ()
    ground: Ground | None = None
    setback: float = 0.0
    declination: float | None = None
    files: tuple[tuple[str, str], ...] = ()
    notes: tuple[str, ...] = ()
