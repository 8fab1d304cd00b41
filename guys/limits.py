"""What the limit study found: the object that its table, files and figure read.

Speeds are in the scenario's own terms [m/s]: its averaging time and height.  Bearings [rad] say where the wind comes from.
"""

from __future__ import annotations

from dataclasses import dataclass
from math import inf, isnan, nan

from guys.scenario import Scenario

LOST = "equilibrium"
"""What governs where stability is lost before anything passes its allowable."""
NOTHING = "nothing"


@dataclass(frozen=True)
class Limit:
    """How much wind one case takes from one bearing.

    speed : at which the first thing passes its allowable, or equilibrium is lost; 0 where that is so in still air; NaN: none was found
    governs : what that is; why : in words;  use : what the thing that governs uses of its allowable when solved again at `speed`
    lost : greatest speed at which a stable equilibrium was found, NaN where none is lost up to the greatest;  falls : how, in words
    branches_at : speed at which the path turns off its straight branch and goes on, NaN where it does not
    drops : speed at which every cable first drops, NaN where it does not before equilibrium is lost
    failed : the solver failed on the way: neither speed is known beyond `lost`
    """

    case: str
    wind_factor: float
    wind_from: float
    speed: float
    governs: str
    why: str
    use: float
    lost: float
    falls: str
    branches_at: float
    drops: tuple[float, ...]
    failed: bool = False

    @property
    def known(self) -> float:
        """The speed, infinite where there is no limit."""
        return inf if isnan(self.speed) else self.speed


@dataclass(frozen=True)
class Limits:
    """circle : every case and bearing solved for, by case and rising bearing;  listed : places in it of the bearings of the file

    worst : the lowest limit of every case over the circle;  most : greatest speed looked at [m/s];  not_judged : what has no capacity
    """

    scenario: Scenario
    version: str
    circle: tuple[Limit, ...]
    listed: tuple[int, ...]
    worst: tuple[Limit, ...]
    most: float
    not_judged: tuple[str, ...]
    cautions: tuple[str, ...]

    @property
    def acting(self) -> Limit | None:
        """The lowest limit of the service cases whose wind factor is 1: action levels are shares of it."""
        plain = [limit for limit in self.worst if limit.wind_factor == 1.0 and self.scenario.kind_of(limit.case) == "service"]
        return min(plain, key=lambda limit: limit.known) if plain else None

    @property
    def actions(self) -> tuple[tuple[float, float], ...]:
        """Share and speed [m/s] of every action level."""
        least = self.acting
        if least is None or isnan(least.speed):
            return ()
        return tuple((share, share * least.speed) for share in sorted(self.scenario.limit.actions))

    @property
    def first_drops(self) -> tuple[tuple[str, str, float, float], ...]:
        """Of every case and cable the lowest wind at which it drops: case, cable, speed, bearing; NaN where it does not."""
        out = []
        for case in dict.fromkeys(limit.case for limit in self.circle):
            rows = [limit for limit in (*self.circle, *self.worst) if limit.case == case]
            for k, cable in enumerate(self.scenario.cable):
                at = min(rows, key=lambda limit, k=k: inf if isnan(limit.drops[k]) else limit.drops[k])  # type: ignore[misc]
                out.append((case, cable.name, at.drops[k], at.wind_from if not isnan(at.drops[k]) else nan))
        return tuple(out)

    @property
    def notes(self) -> tuple[str, ...]:
        """What has to be said of the numbers."""
        said = ["where equilibrium is lost everything is taken as elastic and unbroken on the way: nothing yields, slips or parts"]
        for limit in self.worst:
            if limit.speed == 0.0:
                said.append(f'case "{limit.case}" takes no wind: {limit.why}')
            if limit.wind_factor != 1.0:
                said.append(f'case "{limit.case}": its wind factor {limit.wind_factor:g} is kept; no action level is taken from it')
            elif (kind := self.scenario.kind_of(limit.case)) != "service":
                said.append(f'case "{limit.case}" is a combination ({kind}); no action level is taken from it')
        branched = dict.fromkeys(limit.case for limit in self.circle if not isnan(limit.branches_at))
        said += [f'case "{case}": the path turns off its straight branch in some winds, stands and is followed on' for case in branched]
        if self.scenario.limit.actions and not self.actions:
            said.append("no action levels: no service case with wind = 1 has a limiting wind")
        return (*said, *self.scenario.notes)

    @property
    def failed(self) -> bool:
        """Whether the solver failed anywhere."""
        return any(limit.failed for limit in (*self.circle, *self.worst))
