"""The benchmark's own arithmetic, on a small case: it must keep running as the solver changes.  No time is asserted."""

from __future__ import annotations

from guys import cli
from guys.scenario import parse_scenario
from tests.benchmark import doors, masts, measure

DIRECTIONS = 4
WHOLE = 1.0
"""The shares of a search, the rest included, make up the whole by construction; none but the rest may be negative."""


def test_figures_of_a_small_batch():
    found = measure.figures(masts.slender_18m_toml(), repeats=1, directions=DIRECTIONS)
    assert found.cases == DIRECTIONS
    assert found.cables == 6
    assert found.out_of_balance < 1e-9, "the bound every stable case must reach"
    assert 0 < found.mesh_of_greatest < 1e-3, "guy tensions within 0.1 % of a mesh twice as fine"
    assert found.factorisation_ms > 0
    assert abs(sum(found.parts.values()) - WHOLE) < 1e-12
    assert all(share > 0 for part, share in found.parts.items() if part != "the rest"), "a part that is never entered has lost its function"


def test_growth_has_a_row_for_every_count():
    assert [cases for cases, _ in measure.growth_with_cases(masts.slender_18m_toml(), (1, 2), 1)] == [1, 2]
    nodes = [nodes for nodes, _, _ in measure.growth_with_nodes(masts.slender_18m_toml(), (1, 2), 1)]
    assert nodes[1] > nodes[0]


def test_every_mast_of_the_benchmark_is_a_scenario():
    for text, guys in ((masts.slender_18m_toml(), 6), (masts.lattice_45m_toml(), 9), (masts.lattice_150m_toml(), 18)):
        scenario = parse_scenario(text)
        assert len(scenario.cable) == guys
        assert scenario.wind is not None
        assert len(scenario.wind.directions) == masts.DIRECTIONS


def test_shipped_scenario_gets_36_directions_and_two_cases():
    for path in sorted(doors.SCENARIOS.glob("*.toml")):
        text = path.read_text(encoding="utf-8")
        if "[wind]" not in text:
            continue
        scenario = parse_scenario(doors.with_36_directions_and_two_cases(text), str(path))
        assert scenario.wind is not None
        assert len(scenario.wind.directions) == 36, path.name
        assert [case.wind for case in scenario.case] == [1.0, 0.5], path.name


def test_studies_timed_are_commands_of_shipped_scenarios():
    assert set(doors.STUDIES) <= set(cli.commands.commands)
    assert all((doors.SCENARIOS / name).exists() for name in doors.STUDIES.values())
