"""Plumb: the initial tensions nearest those asked for that leave every spar as drawn, and how far the asked ones pull it.

On sloping ground, or with guys of unequal angle, equal tensions pull a mast out of plumb.  The search is that of `setting.plumb` (see
`guys.setting`); here its answer stands beside the still-air state of the tensions as asked for.
"""

from __future__ import annotations

from contextlib import suppress
from dataclasses import dataclass

import numpy as np

from guys import recovery
from guys.errors import Fault, ScenarioError
from guys.rotation import Array
from guys.scenario import Scenario
from guys.setting import Setting, find
from guys.structure import build


@dataclass(frozen=True)
class Plumb:
    """Tensions as asked for and for plumb.

    name : (cable,) those given by tension;  asked, plumb : (cable,) [N] at the `to` end;  spar : (spar,) names
    lean, plumb_lean : (spar,) [rad] foot to head off the drawn axis; NaN in lean where no still-air state meets the tensions as asked
    """

    scenario: Scenario
    name: tuple[str, ...]
    asked: Array
    plumb: Array
    spar: tuple[str, ...]
    lean: Array
    plumb_lean: Array

    @property
    def change(self) -> Array:
        """(cable,) share by which a tension departs from the one asked for."""
        return np.asarray(self.plumb / self.asked - 1.0)


def plumb(scenario: Scenario) -> Plumb:
    """The plumb tensions of a scenario; raises ScenarioError where no cable is given by tension, or no such state is found."""
    rows = [k for k, cable in enumerate(scenario.cable) if cable.tension is not None]
    if not rows:
        raise ScenarioError([Fault(scenario.path, None, None, "", "no cable is given by tension: there is nothing to adjust")])
    upright = find(build(_with(scenario, True)))
    tension, plumb_lean = _still(upright)
    lean = np.full_like(plumb_lean, np.nan)
    with suppress(ScenarioError):
        asked = find(build(_with(scenario, False)))
        if asked.stands:
            _, lean = _still(asked)
    names = tuple(scenario.cable[k].name for k in rows)
    targets = np.array([scenario.cable[k].tension for k in rows], dtype=float)
    return Plumb(scenario, names, targets, tension[rows], tuple(s.name for s in scenario.spar), lean, plumb_lean)


def _with(scenario: Scenario, upright: bool) -> Scenario:
    return scenario.model_copy(update={"setting": scenario.setting.model_copy(update={"plumb": upright})})


def _still(setting: Setting) -> tuple[Array, Array]:
    """Tensions (cable,) at the `to` ends and leans (spar,) of a still-air state."""
    state = setting.state
    forces = recovery.forces(setting.problem, state, setting.problem.evaluate(state))
    return forces.tension_anchor[0], forces.head_lean[0]
