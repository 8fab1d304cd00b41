"""Strict numbers for every test: one thread, fixed seeds, and no silent invalid operation, division by zero or overflow."""

from __future__ import annotations

import os
from collections.abc import Iterator
from typing import Any

os.environ.setdefault("OPENBLAS_NUM_THREADS", "1")
"""Set before numpy is first imported: more threads only cost time at these sizes, and change the last bits."""

import numpy as np  # noqa: E402
import pytest  # noqa: E402
from hypothesis import HealthCheck, Phase, settings  # noqa: E402
from hypothesis.internal.conjecture import providers  # noqa: E402

SEED = 20_240_611

PHASES = (Phase.explicit, Phase.generate, Phase.target)
"""Without shrinking: of a whole structure it takes minutes and seldom says more than the structure."""

if hasattr(providers, "_get_local_constants"):
    providers._get_local_constants = lambda: providers._local_constants
    """Numbers that stand in the modules loaded so far would else be tried too: then no two orders of tests have the same examples."""

settings.register_profile(
    "fixed", derandomize=True, deadline=None, database=None, phases=PHASES, suppress_health_check=[HealthCheck.too_slow]
)
settings.load_profile("fixed")


@pytest.fixture(autouse=True)
def strict_numbers() -> Iterator[None]:
    """Underflow is allowed: exact zeros are what it gives."""
    with np.errstate(invalid="raise", divide="raise", over="raise"):
        yield


@pytest.fixture
def one_format(monkeypatch: pytest.MonkeyPatch) -> None:
    """Commands save each figure once, as SVG; its bytes stand for the other formats too.  All in one process, unless told otherwise.

    For tests of what a command computes, tells and names: `test_doors.py` and `test_drawing_files.py` save every format.
    """
    from guys.doors import common

    kept: dict[int, tuple[Any, bytes]] = {}

    def saved(figure: Any, kind: str, title: str, version: str) -> bytes:
        if id(figure) not in kept:
            kept[id(figure)] = figure, figure_bytes(figure, "svg", title, version)
        return kept[id(figure)][1]

    figure_bytes = common.figure_bytes
    monkeypatch.setattr(common, "figure_bytes", saved)
    monkeypatch.setattr("os.cpu_count", lambda: 1)


@pytest.fixture
def rng() -> np.random.Generator:
    """The same random numbers in every run of a test, whatever ran before."""
    return np.random.default_rng(SEED)
