"""Winds of scenario texts, through the reader, and their pressure at a height."""

from __future__ import annotations

from functools import cache

import numpy as np

from guys import parse_scenario
from guys.loads.pressure import pressure
from guys.scenario import Scenario
from guys.scenario.model import Wind
from tests.published.masts import spar, whole

REFERENCE = {"speed": '"25 m/s"', "averaging": '"3 s"', "height": '"10 m"', "directions": '["0 deg"]'}


@cache
def _scenario(keys: tuple[tuple[str, str], ...]) -> Scenario:
    lines = "".join(f"{key} = {value}\n" for key, value in {**REFERENCE, **dict(keys)}.items())
    section = 'mass = "1 kg/m"\nwidth = "100 mm"\ndrag = 1.0'
    return parse_scenario(whole(spar("30 m", "fixed", section=section), f"[wind]\n{lines}"))


def scenario(**keys: str) -> Scenario:
    """A fixed mast in the wind of these keys, values as TOML writes them."""
    return _scenario(tuple(keys.items()))


def wind(**keys: str) -> Wind:
    found = scenario(**keys).wind
    assert found is not None
    return found


def q(blows: Wind, z: float) -> float:
    """[Pa]"""
    return float(pressure(blows, np.array([z]))[0])
