"""What stands in the box, the strip and the table."""

from __future__ import annotations

from dataclasses import replace

import numpy as np
import pytest
import sheet_samples as samples

from guys.drawing import box, compose, strip, table, under_ground
from guys.drawing.rounding import tongue
from guys.results import SelfCheck

SI = tongue("SI")


def words(solution: samples.Solution) -> dict[str, str]:
    found: dict[str, str] = {}
    for row in box.entries(solution, SI):
        found[row.label] = f"{found[row.label]} | {row.text}" if row.label in found else row.text
    return found


def test_wind_is_told_with_its_averaging_and_height() -> None:
    assert words(samples.solution(samples.FOUR))["Wind"].startswith("25 m/s, 3 s gust at 10 m, uniform with height, air 1.225 kg/m³")


@pytest.mark.parametrize(("seconds", "said"), [(3.0, "3 s gust"), (600.0, "10 min mean"), (3600.0, "1 h mean"), (60.0, "1 min mean")])
def test_averaging(seconds: float, said: str) -> None:
    assert box.averaging_words(seconds) == said


def test_findings_with_demand_and_capacity() -> None:
    hardest = words(samples.solution(samples.FOUR))["Hardest"]
    assert hardest.startswith("cable 17 m E tension 7.35 kN / 23.0 kN, factor 3.13 (2 needed, default): within; wind from 95°")


def test_of_findings_alike_but_for_rounding_the_first_is_named() -> None:
    first = next(f for f in samples.solution(samples.FOUR).findings if f.quantity == "tension")
    second = replace(first, thing="cable after it", factor=first.factor * (1.0 - 1e-12))
    assert box.worst_of_each([first, second]) == [first]
    assert box.worst_of_each([first, replace(second, factor=first.factor * 0.999)])[0].thing == "cable after it"


def test_every_finding_past_is_named() -> None:
    solution = samples.solution(samples.TALL)
    past = words(solution)["Past"]
    assert len(solution.past) > 10
    for finding in solution.past:
        assert finding.thing in past


def test_not_judged_is_never_within() -> None:
    found = words(samples.solution(samples.FOUR))
    assert found["Not judged"] == "pull of anchor N, anchor E, anchor S, anchor W (no holdfast given: what holds it is not checked)"


def test_dropped_cables_with_their_sectors() -> None:
    found = words(samples.solution(samples.FOUR))["Dropped"]
    assert "9 m N 120° to 255°" in found


def test_tensions_to_set() -> None:
    assert words(samples.solution(samples.FOUR))["Set to"] == "9 m 1.20 kN, 17 m 1.20 kN; at the lower end, still air, 15 °C"


def test_tensions_that_differ_are_told_cable_by_cable() -> None:
    """As on uneven ground, or where plumb = true has found them: a range would not tell the crew what to set where."""
    solution = samples.solution(samples.FOUR)
    tension = solution.cables.tension_anchor.copy()
    tension[0, [c.name for c in solution.scenario.cable].index("9 m E")] = 1430.0
    other = replace(solution, cables=replace(solution.cables, tension_anchor=tension))
    said = words(other)["Set to"]
    assert said.startswith("9 m N 1.20 kN, 9 m E 1.43 kN, 9 m S 1.20 kN, 9 m W 1.20 kN, 17 m 1.20 kN; at the lower end")


def test_densities_are_in_the_units_of_the_sheet() -> None:
    rows = {r.label: r.text for r in box.entries(samples.solution(samples.FOUR), tongue("US"))}
    assert "air 0.0765 lb/ft³" in rows["Wind"]  # 1.225 kg/m3 x 0.0624280 lb/ft3 per kg/m3
    assert "kg" not in rows["Wind"]


def test_a_note_told_in_a_warning_is_not_told_again() -> None:
    solution = replace(samples.solution(samples.FOUR), notes=("it branches",))
    assert words(solution)["Note"] == "it branches"
    assert "Note" not in words(replace(solution, warnings=("the structure branches in setting: it branches",)))


def test_warnings_come_first_and_once() -> None:
    solution = replace(samples.solution(samples.FOUR), warnings=("one", "two", "one"))
    rows = box.entries(solution, SI)
    assert [(r.label, r.text, r.alarming) for r in rows[:2]] == [("Warning", "one", True), ("Warning", "two", True)]
    assert rows[2].label == "State"


def test_another_stable_state_is_alarming() -> None:
    solution = replace(samples.solution(samples.FOUR), check=SelfCheck(1e-11, "other stable state", 0.3, "storm", 0.0))
    assert any(r.alarming and "ANOTHER STABLE STATE" in r.text for r in box.entries(solution, SI))


def test_small_print_names_program_input_and_self_check() -> None:
    text = box.small_print(samples.solution(samples.FOUR), SI)
    assert "guys 0.1.0, scenario 7f3a9c0d51e2" in text
    assert "2e-11 of the reference force" in text
    assert "agrees to 3e-09" in text
    assert "kg mass" in text


@pytest.mark.parametrize(
    ("states", "unsettled", "said", "alarming"),
    [
        (("stable",) * 3, (False,) * 3, "Stable in all 3 cases and winds", False),
        (("stable", "none", "stable"), (False, True, False), "NO EQUILIBRIUM (falls) in 1 of 3, stable in 2 of 3", True),
        (
            ("stable", "unstable", "none"),
            (False, True, True),
            "NO EQUILIBRIUM (falls) in 1 of 3, UNSTABLE in 1 of 3, stable in 1 of 3",
            True,
        ),
        (("stable", "neutral", "stable"), (False, True, False), "NEUTRAL (free to move) in 1 of 3, stable in 2 of 3", True),
        (("stable", "neutral", "stable"), (False, False, False), "Free to spin about its own axis in 1 of 3, stable in 2 of 3", False),
    ],
)
def test_state_in_words(states: tuple[str, ...], unsettled: tuple[bool, ...], said: str, alarming: bool) -> None:
    solution = replace(samples.solution(samples.FOUR), state=states, unsettled=unsettled)  # type: ignore[arg-type]
    text, alarms = strip.strip_words(solution)[0]
    assert text.startswith(said)
    assert alarms is alarming


def test_a_failed_solver_is_not_called_a_fall() -> None:
    text, alarms = strip.strip_words(replace(samples.solution(samples.FOUR), failed=True))[0]
    assert text.startswith("SOLVER FAILED")
    assert alarms


def test_verdict_of_the_strip() -> None:
    assert strip.strip_words(samples.solution(samples.FOUR))[1] == ("All 9 checks within, 4 not judged", False)
    assert strip.strip_words(samples.solution(samples.EIGHT))[1] == ("8 of 17 checks PAST the allowable, 8 not judged", True)


def test_one_check_is_not_all_checks() -> None:
    solution = samples.solution(samples.FOUR)
    one = replace(solution, findings=tuple(f for f in solution.findings if f.quantity == "lean"))
    assert strip.strip_words(one)[1] == ("1 check within", False)
    assert strip.strip_words(replace(solution, findings=()))[1] == ("Nothing to judge", False)


def test_checks_of_what_does_not_stand_are_not_called_within() -> None:
    """Where some cases fall the verdict says of which cases it speaks; an equilibrium that does not hold is not judged at all."""
    some = samples.falling(samples.FOUR, [2])
    some = replace(some, unsettled=tuple(s == "none" for s in some.state))
    assert strip.strip_words(some)[1][0].startswith("Of the cases that stand: ")
    cases = len(some.state)
    unstable = replace(some, state=("unstable",) + ("none",) * (cases - 1), unsettled=(True,) * cases)
    assert strip.strip_words(unstable)[1] == ("Nothing judged: nothing stands", False)
    assert strip.strip_words(unstable)[0][0].endswith("loads are of an equilibrium that does not hold")
    assert "Hardest" not in words(unstable)
    assert all(row[-1] == ("not judged",) for row in table.anchor_grid(unstable, SI).rows)


def test_a_fall_told_in_a_warning_is_not_told_again() -> None:
    some = samples.falling(samples.FOUR, [2, 3])
    reason = some.reason[2] or ""
    assert words(some)["Falls"].endswith(reason)
    assert reason not in words(replace(some, warnings=(f"design: {reason}",)))["Falls"]
    other = replace(some, reason=tuple("another" if i == 3 else r for i, r in enumerate(some.reason)))
    assert words(other)["Falls"].endswith("and otherwise, see result.json")


def test_factors_of_cases_are_named() -> None:
    assert "factors on weight, wind pressure and weight of ice" in words(samples.solution(samples.FOUR))["Cases"]


def test_a_base_that_is_lifted_is_not_pushed_down_by_a_negative_force() -> None:
    solution = samples.solution(samples.FOUR)
    foot = solution.worst_feet[0]
    up = replace(foot, down=replace(foot.down, value=-4700.0, peak=-4700.0), lift=replace(foot.lift, value=4700.0, peak=4701.0))
    row = table.base_grid(replace(solution, worst_feet=(up,)), SI).rows[0]
    assert (row[1], row[2], row[-1]) == (("none",), ("–",), ("4.8 kN",))
    said = under_ground.base_lines(up, SI)[1].text
    assert "down" not in said
    assert said.endswith("LIFTED BY 4.8 kN")


def test_bases_stand_first_with_what_they_bear() -> None:
    row = table.base_grid(samples.solution(samples.BOOM), SI).rows
    assert [cells[0] for cells in row] == [("mast",), ("boom on mast",)]
    assert row[0][1] == ("15 kN",)
    assert row[0][-1] == ("none",)


def test_anchor_rows() -> None:
    grid = table.anchor_grid(samples.solution(samples.FOUR), SI)
    row = dict(zip([c.head.replace("\n", " ") for c in grid.columns], grid.rows[1], strict=True))
    assert row["anchor"] == ("E",)
    assert row["bearing"] == ("97°",)
    assert row["radius"] == ("9.50 m",)
    assert row["hardest guy"] == ("17 m E",)
    assert row["demand / capacity"] == ("7.35 / 23.0 kN",)
    assert row["factor"] == ("3.13 within",)


def test_columns_are_given_up_before_numbers() -> None:
    grid, _ = table.fitted_grid(table.anchor_grid(samples.solution(samples.LONG), tongue("both")), 180.0)
    heads = [c.head for c in grid.columns]
    assert "out" in heads
    assert "up" in heads
    assert "slope\ndistance" not in heads


def test_long_words_make_the_page_taller_rather_than_be_cut() -> None:
    solution = replace(
        samples.solution(samples.FOUR), warnings=tuple(f"warning number {i} about something long enough to wrap" for i in range(40))
    )
    page = compose.draw_page(solution, "A3", None, "SI")
    assert page.height > 297.0
    assert not page.crowded
    assert np.isfinite(page.height)
