"""The stability reserve: against closed forms, an independent reference, differences of the energy, and solved again at the answer."""

from __future__ import annotations

import csv
import io
import json
import math
from dataclasses import replace
from functools import cache
from pathlib import Path

import numpy as np
import pytest
import scenarios_made as made
from test_documents import code_words, keys_of

from guys import cli, parse_scenario, stability
from guys.drawing.reserve import draw_reserve_page, row_words
from guys.exchange import reserve as exchange
from guys.loads import lines_of
from guys.path import CLOSE, ROOT
from guys.reserves import ALL, CONDITIONALLY, NEUTRAL, NONE, STABLE, WIND, Reserve, Reserves
from guys.rotation import Array
from guys.studies.batch import solve_lines
from guys.studies.reserve import MOST, RAISED, gravest, reserves

INDEPENDENT = 5e-3
"""Of a speed against the independent reference calculation."""
MESH = 2e-4
"""What eight elements leave of a buckling load, and the shortening."""
END = CLOSE + MESH


@cache
def _found(written: str) -> Reserves:
    return reserves(parse_scenario(written))


def reserves_of(document: made.Document) -> Reserves:
    return _found(made.text(document))


def mast(*directions: float) -> made.Document:
    return made.mast(*directions, wind=made.wind(*directions, speed=25.0))


def only(document: made.Document, loads: str) -> Reserve:
    (standing,) = reserves_of(document).every
    found = standing.of(loads)
    assert found is not None
    return found


# ---------------------------------------------------------------- against others


def test_wind_is_lost_at_the_square_of_the_speed_that_tips_it() -> None:
    """16.463786 m/s: independent reference calculation, this project (an exact rod by shooting).  For a uniform profile and a drag that is
    given the force goes with the square of the speed."""
    speed = made.tipping()["wind"]["speed"]
    found = only(made.tipping(), WIND)
    assert found.factor == pytest.approx((16.463786 / speed) ** 2, rel=2 * INDEPENDENT)
    assert found.falls.startswith("pylon falls toward 270°")
    assert reserves_of(made.tipping()).every[0].verdict == CONDITIONALLY


def test_the_speed_of_that_factor_is_where_equilibrium_is_lost() -> None:
    """Solved from the setting at speeds and not factors: stands just below, falls just above."""
    document = made.tipping()
    speed = document["wind"]["speed"] * math.sqrt(only(document, WIND).factor)
    line = lines_of(made.scenario(document))[0]
    lines = [replace(line, speed=share * speed) for share in (1 - CLOSE, 1 + 2 * CLOSE)]
    assert (solve_lines(made.setting(document), lines, detail=False).code <= stability.NEUTRAL).tolist() == [True, False]


def column(load: float, length: float = 6.0, EI: float = 1e5) -> made.Document:
    section = made.bar(length, EI=EI, mass=0.0)
    del section["EI"]
    section |= {"EI_x": EI, "EI_y": 1.5 * EI, "EA": 1e5 * EI}
    hung = [made.fitting(at=length, load=made.vector(0.0, 0.0, -load))]
    return made.document([made.spar("column", length, base="fixed", section=[section], fitting=hung)], still=True)


def test_a_column_branches_at_eulers_load() -> None:
    """pi2 EI/4 L2; beyond it the column stands bent and is followed on.  Own weight, by the same path: tests/test_path.py."""
    found = only(column(load=0.4 * math.pi**2 * 1e5 / (4 * 6.0**2)), ALL)
    assert 0.4 * found.branches_at == pytest.approx(1.0, rel=END)
    assert found.stands_to > found.branches_at


def on_springs(weight: float) -> tuple[made.Document, float]:
    """A rigid mast of 10 m, weights at its head, on level stays at 6 m, and the weight at which they are too soft: k h2/H."""
    high, held, reach, pull, EA = 10.0, 6.0, 400.0, 1000.0, 2e6
    head = made.fitting(at=high, load=made.vector(0.0, 0.0, -weight))
    mast_ = made.spar("mast", rigid=True, section=[made.weightless(high)], fitting=[head])
    ring = made.anchors(reach, 0.0, 90.0, 180.0, 270.0, level=held)
    stays = [made.cable(f"stay {a['name']}", held, a["name"], tension=pull) for a in ring]
    document = made.document([mast_], ring, stays, still=True, straight=True, rope={"rope": made.rope(stiffness=EA)})
    return document, (2 * EA / reach * (1 + pull / EA) + 2 * pull / reach) * held**2 / high


def test_a_rigid_mast_is_lost_at_the_stiffness_its_brace_must_have() -> None:
    """k = P H/h2: the ideal stiffness of a brace (Winter, Trans. ASCE 125, 1960), here two pairs of level stays."""
    document, greatest = on_springs(greatest_share := 9000.0)
    found = only(document, ALL)
    first = found.stands_to if math.isnan(found.branches_at) else found.branches_at
    assert greatest_share * first == pytest.approx(greatest, rel=END)


def test_stiffness_falls_to_nothing_along_a_straight_path() -> None:
    """The least eigenvalue of a rigid mast under its head's weight is k h2 - P H to a factor: linear in P."""
    greatest = on_springs(9000.0)[1]
    stiff = []
    for weight in (1.0, 0.5 * greatest, 0.9 * greatest):
        setting = made.setting(on_springs(weight)[0])
        stiff.append(stability.least_costs(setting.problem, setting.state)[0] * setting.problem.mass[0])
    assert np.array(stiff) / stiff[0] == pytest.approx([1.0, 0.5, 0.1], abs=1e-3)


# ---------------------------------------------------------------- energy


def test_eigenvalues_are_the_second_derivative_of_the_potential_energy() -> None:
    """A rigid mast under a side load on straight stays, its energy by hand: EA (c - L)2/2L of every taut stay less F . x of the load.

    Second differences of a tilt of h = 1e-4 are right to h2; and the energy has no slope there.
    """
    high, reach, force = 12.0, 8.0, np.array([260.0, 90.0, -3000.0])
    head = made.fitting(at=high, load=made.vector(*force))
    one = made.spar("mast", rigid=True, section=[made.weightless(high)], fitting=[head])
    ring = made.anchors(reach, 20.0, 140.0, 260.0)
    stays = [made.cable(f"stay {a['name']}", high, a["name"], length=14.4) for a in ring]
    EA = 2e5
    document = made.document([one], ring, stays, still=True, straight=True, rope={"rope": made.rope(stiffness=EA)})
    setting = made.setting(document)
    anchors = np.array([[reach * math.sin(math.radians(b)), reach * math.cos(math.radians(b)), 0.0] for b in (20.0, 140.0, 260.0)])
    top = high * setting.problem.heading(setting.state)[0, 0]

    def energy(tilt: Array) -> float:
        angle = float(np.linalg.norm(tilt))
        axis = tilt / angle if angle else np.array([1.0, 0, 0])
        here = top * math.cos(angle) + np.cross(axis, top) * math.sin(angle) + axis * (axis @ top) * (1 - math.cos(angle))
        stretch = np.maximum(np.linalg.norm(here - anchors, axis=1) - 14.4, 0.0)
        return float((0.5 * EA / 14.4 * stretch**2).sum() - force @ here)

    t = top / high
    x = np.cross([0.0, 1, 0], t) / np.linalg.norm(np.cross([0.0, 1, 0], t))
    sides, h = (x, np.cross(t, x)), 1e-4
    slope = [(energy(h * s) - energy(-h * s)) / (2 * h) for s in sides]
    assert np.abs(slope).max() < 1e-4 * high * np.linalg.norm(force)

    def second(a: Array, b: Array) -> float:
        return (energy(h * (a + b)) - energy(h * (a - b)) - energy(h * (b - a)) + energy(-h * (a + b))) / (4 * h * h)

    hessian = [[second(a, b) for b in sides] for a in sides]
    scale = setting.problem.mass[0]
    assert setting.problem.pattern.free[0, 1] >= 3, "the mast has nothing but rotations"
    ours = stability.modes(setting.problem, setting.state, 2).value * scale
    assert ours == pytest.approx(np.linalg.eigvalsh(hessian), rel=1e-3)


# ---------------------------------------------------------------- against itself


def test_solved_again_equilibrium_is_there_below_and_gone_above() -> None:
    """From the setting, along the way to the raised case and not the factor."""
    document = mast(20.0)
    found = reserves_of(document)
    lines = lines_of(found.scenario)
    for loads in (WIND, ALL):
        factors = [s.of(loads).factor for s in found.every]  # type: ignore[union-attr]
        for share, stands in ((1 - 2 * CLOSE, True), (1 + 4 * CLOSE, False)):
            raised = [RAISED[loads](line, share * x) for line, x in zip(lines, factors, strict=True)]
            assert (solve_lines(made.setting(document), raised, detail=False).code <= stability.NEUTRAL).tolist() == [stands]


def test_cables_drop_where_it_is_said_and_paths_are_solved_states() -> None:
    document = mast(20.0)
    found = reserves_of(document)
    lines = lines_of(found.scenario)
    dropping = [(k, c, r.drops[c]) for k, s in enumerate(found.every) if (r := s.of(ALL)) for c in range(6) if not math.isnan(r.drops[c])]
    assert dropping
    for share, slack in ((1 - 20 * ROOT, False), (1 + 20 * ROOT, True)):
        batch = solve_lines(made.setting(document), [RAISED[ALL](lines[k], share * x) for k, _, x in dropping], detail=False)
        told = [bool(batch.forces.slack[n, c]) for n, (_, c, _) in enumerate(dropping)]
        assert told == [slack] * len(dropping)
    path = found.every[0].of(WIND).path  # type: ignore[union-attr]
    at = len(path.factor) // 2
    batch = solve_lines(made.setting(document), [RAISED[WIND](lines[0], float(path.factor[at]))], detail=True)
    assert np.maximum(batch.forces.tension_anchor, batch.forces.tension_top)[0] == pytest.approx(path.tension[at], rel=1e-6)
    still = solve_lines(made.setting(document), [RAISED[WIND](lines[0], 0.0)], detail=True)
    moved = batch.spars[0].displacement[0, -1] - still.spars[0].displacement[0, -1]
    assert moved == pytest.approx(path.head[at, 0], abs=1e-7)


def test_a_path_in_a_plane_of_symmetry_ends_where_its_stiffness_has_gone() -> None:
    """Wind between two guys: the mast stays in the plane until it branches out of it, where the least eigenvalue passes zero (Thompson &
    Hunt).  A search that fails on the way would end it sooner; the last state is within `CLOSE` of the end and has next to no stiffness."""
    assert only(mast(60.0), WIND).stiffness < CLOSE / 2


def test_a_direction_alone_has_the_reserve_it_has_in_company() -> None:
    both = {**made.tipping(), "wind": {**made.tipping()["wind"], "directions": [120.0, 90.0]}}
    for loads in (WIND, ALL):
        assert reserves_of(both).every[1].of(loads).factor == pytest.approx(only(made.tipping(), loads).factor, rel=1e-9)  # type: ignore[union-attr]


def test_of_the_states_of_a_line_thegravest_is_told() -> None:
    """A line with patches of gust: its path that ends first, its gravest verdict, and nothing to raise where one state falls."""
    (early,) = reserves_of(made.tipping()).every
    late = replace(early, verdict=STABLE, reserves=tuple(replace(r, stands_to=2 * r.stands_to, lost=False) for r in early.reserves))
    for states in ([early, late], [late, early]):
        assert gravest(states) == early
    falls = replace(early, verdict=NONE, reserves=())
    assert gravest([late, falls, early]) == falls


def test_the_mode_goes_where_the_words_say() -> None:
    found = only(made.tipping(), WIND)
    assert found.mode is not None
    moves = found.mode.moves[0]
    assert np.linalg.norm(moves, axis=1).max() == pytest.approx(1.0)
    assert math.degrees(math.atan2(moves[-1, 0], moves[-1, 1])) % 360 == pytest.approx(270.0, abs=1.0)
    assert np.abs(moves[0]).max() < 1e-9, "the foot stays"


# ---------------------------------------------------------------- verdicts


def test_a_stump_is_not_lost_up_to_the_greatest_factor() -> None:
    stump = made.spar("stump", 2.0, base="fixed", section=[made.tube(2.0)])
    (standing,) = reserves_of(made.document([stump], wind=made.wind(0.0, speed=1.0))).every
    assert standing.verdict == STABLE
    assert [(r.lost, r.stands_to, math.isnan(r.factor), r.mode) for r in standing.reserves] == [(False, MOST, True, None)] * 2


def test_what_comes_to_rest_lying_down_is_said_to_fall() -> None:
    """Guys taken away, or a jib without a stay: the equations have a hanging equilibrium, and the search finds it."""
    lost = {**made.mast(), "case": [{"name": "lost", "wind": 0.0, "without": ["9 m A", "17 m A"]}]}
    jib = made.spar("jib", foot={"spar": "boom", "at": 5.0}, section=[made.tube(3.0, 0.05, 0.003)], lean=80.0, toward=60.0)
    boom = made.boom()
    for document, words in ((lost, "mast falls toward 190°"), ({**boom, "spar": [*boom["spar"], jib]}, "still air: jib falls")):
        found = reserves_of(document)
        assert [(s.verdict, s.reserves) for s in found.every] == [(NONE, ())]
        assert words in found.every[0].words
        assert found.settled == (False,)
        assert "No case stands" in " ".join(text.text for text in draw_reserve_page(found, "A4", "SI").texts)


def test_the_figure_tells_cases_without_a_reserve_once_with_their_winds() -> None:
    """A hinged pylon that does not stand in two of three winds: one line for both."""
    found = reserves_of(made.tipping())
    alike = [replace(found.every[0], wind_from=math.radians(w), verdict=NONE, words="it falls", reserves=()) for w in (30.0, 60.0)]
    page = draw_reserve_page(replace(found, every=(*found.every, *alike)), "A3", "SI")
    assert f"{alike[0].case}, wind from 30°, 60°: {NONE}: from 30°: it falls" in " ".join(text.text for text in page.texts)


def swaying() -> made.Document:
    """A weightless rigid mast on slack straight guys: nothing holds it anywhere near upright."""
    return made.stayed(made.spar(rigid=True, section=[made.weightless(10.0)]), 0.0, 120.0, 240.0, length=13.0, straight=True)


def test_free_to_sway_is_neutral_and_free_to_spin_is_not() -> None:
    (neutral,) = reserves_of(swaying()).every
    assert neutral.verdict == NEUTRAL
    assert "may turn or sway freely" in neutral.words
    spinning = reserves_of(made.stayed(made.spar(base="ball"), 0.0, 120.0, 240.0))
    assert (spinning.every[0].verdict, spinning.settled) == (CONDITIONALLY, (True,))
    assert "may spin freely" in spinning.every[0].words


# ---------------------------------------------------------------- ways out


@pytest.mark.usefixtures("one_format")
def test_files_table_and_exit_status(tmp_path: Path, capsys: pytest.CaptureFixture[str]) -> None:
    file = tmp_path / "pylon.toml"
    file.write_text(made.text(made.tipping()), encoding="utf-8")
    assert cli.run(["reserve", str(file), "--out", str(tmp_path / "out")]) == 0
    printed = capsys.readouterr().out
    for words in (CONDITIONALLY, "wind alone", "all loads", "1.69", "pylon falls toward 270°", "nothing yields"):
        assert words in printed
    names = {"reserve.json", "reserve.csv", "paths.csv", "reserve.pdf", "reserve.svg", "reserve.png"}
    assert {path.name for path in (tmp_path / "out").iterdir()} == names
    rows = list(csv.DictReader(io.StringIO((tmp_path / "out/reserve.csv").read_text(encoding="utf-8"))))
    assert [row["loads"] for row in rows] == [WIND, ALL]
    assert {row["verdict"] for row in rows} == {CONDITIONALLY}
    told = json.loads((tmp_path / "out/reserve.json").read_text(encoding="utf-8"))
    assert told["cases"][0]["verdict"] == CONDITIONALLY
    assert told["cases"][0]["reserves"][0]["factor"] == only(made.tipping(), WIND).factor


def test_status_four_where_a_case_falls(tmp_path: Path, capsys: pytest.CaptureFixture[str]) -> None:
    file = tmp_path / "pole.toml"
    file.write_text(made.text(swaying()), encoding="utf-8")
    assert cli.run(["reserve", str(file), "--json"]) == 4
    assert json.loads(capsys.readouterr().out)["cases"][0]["verdict"] == NEUTRAL


def test_paths_have_a_row_for_every_state_and_thing() -> None:
    found = reserves_of(made.tipping())
    states = sum(len(r.path.factor) for s in found.every for r in s.reserves)
    assert len(exchange.paths_table(found).splitlines()) == 1 + states * (1 + 2)


@pytest.mark.parametrize("units", ["SI", "US"])
def test_the_figure_tells_verdict_and_factor_and_keeps_on_the_page(units: str) -> None:
    found = reserves_of(mast(20.0))
    page = draw_reserve_page(found, "A3", units)  # type: ignore[arg-type]
    words = [text.text for text in page.texts]
    for pair in found.lowest_first:
        assert row_words(*pair) in words
        assert CONDITIONALLY in row_words(*pair)
    assert not [text.text for text in page.texts if not (0 < text.x < page.width and 0 < text.y < page.height)]
    assert {"9 m A", "17 m C", "mast"} <= set(words)


def test_the_guide_names_every_key_and_column() -> None:
    found, known = reserves_of(made.tipping()), code_words("docs/user-guide.md")
    assert not sorted(keys_of(exchange.as_dict(found)) - known)
    for table in (exchange.as_table(found), exchange.paths_table(found)):
        assert not [column for column in table.splitlines()[0].split(",") if column not in known]
