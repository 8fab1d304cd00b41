"""The coordinate grid of a site: any projected coordinate system, through PROJ.

A scenario's metres are true metres on the ground, as a tape lays them, with grid north upward.  A grid draws them longer or shorter: by the
point scale factor k of the projection at the origin, and by R / (R + h) for the level h of the site above the sea, R = 6 371 km.  So

    E = E0 + K east      N = N0 + K north      K = k R / (R + h), in the grid's own unit

Convergence g is the bearing of grid north from true north: true bearing = grid bearing + g.  Latitude and longitude are WGS 84, as
satellite receivers and GeoJSON (RFC 7946) give them; where the grid's datum is another one, `accuracy` is what PROJ states for the step.

A change of datum forgets the height on the way, so the step back from degrees misses by a millimetre or two; `to_degrees` makes that good.

Both k and g are measured: `STEP` along each axis of the grid, as a geodesic on the grid's own ellipsoid.  So a grid is found out whose
axes are stretched, askew, or do not count to the east and to the north.

Source of the two factors: common practice of land surveying (combined scale factor).
"""

from __future__ import annotations

import math
from dataclasses import dataclass
from functools import cache
from typing import Any

import numpy as np
from numpy.typing import NDArray

Array = NDArray[np.float64]
EARTH_RADIUS = 6_371_000.0
"""[m] mean radius, for the level's part of the scale."""
CONFORMAL = 1e-4
"""Difference of scale along both axes above which a grid is refused: bearings on it are not bearings on the ground."""
ASKEW = "bearings on it are not those on the ground; give another system, such as UTM"
"""What is wrong with a grid that does not keep angles."""
STEP = 50.0
"""[m] to either side over which scale and convergence are measured; both err by its square over that of the earth's radius, 1e-10."""
STRAY = 3.0
"""[deg] an origin may lie outside the area its system is for: half a zone of six degrees, as sites across a zone's edge need."""


class GridError(ValueError):
    """A coordinate system or place that cannot be used; the text says why."""


@cache
def _system(name: str) -> Any:
    """The horizontal projected system of that name; raises GridError."""
    from pyproj import CRS
    from pyproj.exceptions import CRSError

    try:
        system = CRS.from_user_input(name)
    except CRSError:
        raise GridError(f'"{name}" is not a coordinate system known to PROJ; write one such as "EPSG:32631"') from None
    if system.is_compound:
        system = system.sub_crs_list[0]
    if not system.is_projected:
        raise GridError(f'"{name}" ({system.name}) is not a projected system: it has degrees, not metres or feet')
    if any(axis.direction == "west" for axis in system.axis_info):
        counts = " and ".join(axis.direction for axis in system.axis_info[:2])
        cure = "give one that counts to the east and north, such as UTM, and files in degrees"
        raise GridError(f'"{name}" ({system.name}) counts to the {counts}, and would turn the site round; {cure}')
    return system


@cache
def _to_grid(name: str) -> Any:
    from pyproj import Transformer

    return Transformer.from_crs("EPSG:4326", _system(name), always_xy=True)


def unit(name: str) -> float:
    """Metres in the grid's unit (metre, foot, US survey foot)."""
    return float(_system(name).axis_info[0].unit_conversion_factor)


def project(name: str, latitude: Array | float, longitude: Array | float) -> tuple[Array, Array]:
    """Grid east and north [grid unit] of places [deg]; raises GridError outside the grid's reach."""
    from pyproj.exceptions import ProjError

    try:
        east, north = _to_grid(name).transform(np.asarray(longitude, float), np.asarray(latitude, float), errcheck=True)
    except ProjError:
        raise GridError(f'{name} does not reach there; latitude comes first in "lat, lon", longitude first in GeoJSON') from None
    return np.asarray(east, float), np.asarray(north, float)


@dataclass(frozen=True)
class Grid:
    """A grid laid through the origin of a site.

    crs, name : as the user wrote it, and its official name;  east, north : of the origin [grid unit];  unit [m];  level [m] of the origin
    above the sea;  latitude, longitude [deg] of the origin;  point_scale : k;  convergence [rad];  accuracy [m], NaN unknown
    """

    crs: str
    name: str
    east: float
    north: float
    unit: float
    level: float
    latitude: float
    longitude: float
    point_scale: float
    convergence: float
    accuracy: float

    @property
    def scale(self) -> float:
        """Grid units to a metre on the ground."""
        return self.combined / self.unit

    @property
    def combined(self) -> float:
        """Combined scale factor: grid metres to a metre on the ground."""
        return self.point_scale * EARTH_RADIUS / (EARTH_RADIUS + self.level)

    def to_grid(self, east: Array | float, north: Array | float) -> tuple[Array, Array]:
        """Grid coordinates [grid unit] of places [m] from the origin."""
        return self.east + self.scale * np.asarray(east, float), self.north + self.scale * np.asarray(north, float)

    def from_grid(self, east: Array | float, north: Array | float) -> tuple[Array, Array]:
        """Metres from the origin of grid coordinates [grid unit]."""
        return (np.asarray(east, float) - self.east) / self.scale, (np.asarray(north, float) - self.north) / self.scale

    def to_degrees(self, east: Array | float, north: Array | float) -> tuple[Array, Array]:
        """Latitude and longitude [deg] of places [m] from the origin."""
        wanted = np.array(self.to_grid(east, north))
        longitude, latitude = _to_grid(self.crs).transform(*wanted, direction="INVERSE")
        missed = wanted - np.array(_to_grid(self.crs).transform(longitude, latitude))
        longitude, latitude = _to_grid(self.crs).transform(*(wanted + missed), direction="INVERSE")
        return np.asarray(latitude, float), np.asarray(longitude, float)

    def from_degrees(self, latitude: Array | float, longitude: Array | float) -> tuple[Array, Array]:
        """Metres from the origin of latitudes and longitudes [deg]; raises GridError outside the grid's reach."""
        return self.from_grid(*project(self.crs, latitude, longitude))


def grid_at_degrees(crs: str, latitude: float, longitude: float, level: float) -> Grid:
    """The grid through a place given by latitude and longitude [deg]; raises GridError."""
    east, north = project(crs, latitude, longitude)
    return grid_at(crs, float(east), float(north), level)


def _in_reach(crs: str, latitude: float, longitude: float) -> None:
    """Raises GridError for a place far outside the area the system is for."""
    area = _system(crs).area_of_use
    if area is None or _stray(area, latitude, longitude) <= STRAY:
        return
    swapped = "; are lat and lon swapped?" if _stray(area, longitude, latitude) <= STRAY else ""
    within = f"latitude {area.south:g} to {area.north:g}, longitude {area.west:g} to {area.east:g}"
    raise GridError(f"latitude {latitude:.6g}, longitude {longitude:.6g} is far outside the area {crs} is for, {within}{swapped}")


def _stray(area: Any, latitude: float, longitude: float) -> float:
    """How far a place is outside an area of use [deg]."""
    width = (area.east - area.west) % 360 or 360.0
    past = (longitude - area.west) % 360
    return float(max(area.south - latitude, latitude - area.north, 0.0 if past <= width else min(past - width, 360 - past)))


def _measured(system: Any, east: float, north: float, metres: float) -> tuple[float, float, float]:
    """Scale along the north axis and along the east axis, and convergence [rad]; raises GridError where the axes are askew."""
    from pyproj import Transformer

    ellipsoid = system.get_geod()
    back = Transformer.from_crs(system, system.geodetic_crs, always_xy=True)
    scales, bearings = [], []
    for toward in ((0.0, STEP / metres), (STEP / metres, 0.0)):
        longitudes, latitudes = back.transform([east - toward[0], east + toward[0]], [north - toward[1], north + toward[1]])
        out, back_in, length = ellipsoid.inv(longitudes[0], latitudes[0], longitudes[1], latitudes[1])
        scales.append(2 * STEP / length)
        bearings.append(math.radians(out + 0.5 * math.remainder(back_in + 180 - out, 360)))  # halfway, that is at the place
    if abs(math.remainder(bearings[1] - bearings[0] - math.pi / 2, math.tau)) > CONFORMAL:
        raise GridError(f"the axes of {system.name} are not square to each other, east to the right of north, here: {ASKEW}")
    return scales[0], scales[1], bearings[0]


def grid_at(crs: str, east: float, north: float, level: float) -> Grid:
    """The grid through a place given in the grid itself [grid unit]; raises GridError."""
    system = _system(crs)
    to_grid = _to_grid(crs)
    longitude, latitude = to_grid.transform(east, north, direction="INVERSE")
    if not (math.isfinite(longitude) and math.isfinite(latitude)):
        raise GridError(f"{east:.10g}, {north:.10g} is not a place on {crs}")
    _in_reach(crs, latitude, longitude)
    k, other, convergence = _measured(system, east, north, unit(crs))
    if abs(k - other) > CONFORMAL * k:
        raise GridError(f"{crs} stretches its north axis by {k:.5f} and its east axis by {other:.5f} here: {ASKEW}")
    return Grid(
        crs=crs, name=str(system.name), east=east, north=north, unit=unit(crs), level=level, latitude=float(latitude),
        longitude=float(longitude), point_scale=math.sqrt(k * other), convergence=convergence,
        accuracy=math.nan if to_grid.accuracy is None or to_grid.accuracy < 0 else float(to_grid.accuracy),
    )  # fmt: skip
