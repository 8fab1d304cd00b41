"""`guys lost`: statics of masts with a guy gone, symmetry, the swing, and what is reported without being solved."""

from __future__ import annotations

import math
import re
from dataclasses import replace
from pathlib import Path

import numpy as np
import pytest
import scenarios_made as made
from hypothesis import given, settings
from hypothesis import strategies as some

from guys import cli, stability
from guys.checks.extremes import TIE
from guys.checks.items import Item
from guys.drawing.losses import load_row
from guys.drawing.rounding import force, tongue
from guys.errors import ScenarioError
from guys.exchange import losses
from guys.loads import lines_of, setting_line
from guys.studies import cells, lost
from guys.studies.batch import solve_lines
from guys.studies.limit import limits


def lose(document: made.Document) -> lost.Lost:
    return lost.lose(made.scenario(document))


def row(found: lost.Lost, *name: str) -> int:
    return next(k for k, loss in enumerate(found.losses) if loss.name == name)


def at(found: lost.Lost, degrees: float) -> int:
    """The line of the first case with wind from that bearing."""
    return next(i for i, line in enumerate(found.lines) if abs(math.degrees(line.wind_from) - degrees) < 1e-6)


def short() -> made.Document:
    """A mast of 6 m on a fixed base with three guys, which needs none of them in a moderate wind."""
    return made.stayed(made.spar(length=6.0, base="fixed"), 0.0, 120.0, 240.0, wind=made.wind(0.0, speed=10.0), tension=200.0)


# ---------------------------------------------------------------- stands or falls


def test_a_file_without_cables_is_refused() -> None:
    document = made.document([made.spar("pole", 6.0, base="fixed", section=[made.tube(6.0)])], still=True)
    with pytest.raises(ScenarioError, match="cable: the file has none, so nothing can be lost"):
        lose(document)


def test_three_guys_at_one_level_of_a_pinned_mast_lose_one_and_fall_in_still_air() -> None:
    """The two left pull the head over to their side, and nothing pulls back (statics; common practice: never ease a guy of three)."""
    found = lose(made.ring_mast(3))
    assert found.losses[1].kind == "cable"
    assert (found.verdict[1:] == cells.FALLS).all()
    assert all(found.still[1:])
    assert not found.still[0]
    assert (found.verdict[0] < cells.FALLS).all()
    assert re.match(r"mast falls toward 180° at 0.\d\d of the way to being without guy A;", found.cells[row(found, "guy A")].reason[0])
    assert found.cells[row(found, "guy A")].reason[1] == lost.ITS_STILL_AIR


def test_a_fixed_mast_stands_without_any_of_its_guys() -> None:
    document = short()
    found = lose(document)
    assert (found.verdict < cells.FALLS).all()


def test_a_loss_that_stands_in_still_air_may_fall_in_some_winds_only(monkeypatch: pytest.MonkeyPatch) -> None:
    """A slender mast without one of its three low guys stands where the wind presses it on the two others, or those above hold it.

    Told apart by a solve of each wind alone whose path starts from the whole mast and ends a sixteen times finer than the study's.
    """
    document = made.mast(10.0, 190.0, 250.0, wind=made.wind(10.0, 190.0, 250.0, speed=40.0))
    some_losses = lost.losses_of(made.scenario(document))
    monkeypatch.setattr(lost, "losses_of", lambda _: [loss for loss in some_losses if loss.name in ((), ("9 m C",))])
    found = lose(document)
    here = found.cells[1]
    assert here.verdict[0] < cells.FALLS
    setting = made.setting(document)
    lines = [replace(line, without=("9 m C",)) for line in lines_of(setting.problem.structure.scenario)]
    alone = solve_lines(setting, lines, True)
    fallen = here.verdict[[at(found, d) for d in (10.0, 190.0, 250.0)]] == cells.FALLS
    assert fallen.tolist() == (alone.code == stability.NONE).tolist()
    assert set(fallen.tolist()) == {True, False}


def test_a_cable_gone_where_the_others_catch_the_mast_far_over_does_not_count_as_a_fall() -> None:
    """Anchors 2 m above the foot: without the north guy the two square to it hold the head up however strong the wind, since the mast
    cannot turn without stretching them (geometry). A path in coarse steps of the fading guy misses that state."""
    found = lose(made.ring_mast(4, 0.0, level=2.0, tension=300.0, wind=made.wind(0.0, speed=45.0)))
    here = found.cells[row(found, "guy A")]
    assert (here.verdict < cells.FALLS).all()


def test_a_structure_that_does_not_stand_is_all_falls_and_exit_status_4(tmp_path: Path) -> None:
    document = made.ring_mast(3)
    document["cable"] = [made.cable("guy A", 10.0, "A", length=12.9)]
    found = lose(document)
    assert (found.verdict == cells.FALLS).all()
    assert all(found.still)
    file = tmp_path / "falls.toml"
    file.write_text(made.text(document))
    assert cli.run(["lost", str(file), "--json"]) == 4


# ---------------------------------------------------------------- loads


def test_the_guy_left_holds_the_lean_and_the_wind_by_moments() -> None:
    """A rigid mast hinged to lean east, between a guy to the west and one to the east: without the east one, moments about the hinge give
    the west one's tension, T d = W (L/2) sin a + q c b L (L/2) cos2 a for wind from the west square to the axis (statics)."""
    length, lean = 10.0, math.radians(20.0)
    section = made.weightless(length) | {"mass": 20.0, "drag": 1.2}
    mast = made.spar(length=length, rigid=True, section=[section], base="hinged", lean=20.0, toward=90.0)
    guys = [made.cable(name, length, name, tension=700.0) for name in ("west", "east")]
    ring = made.anchors(8.0, 270.0, 90.0, names=["west", "east"])
    stiff = {"rope": made.rope(stiffness=1e9)}
    wind = made.wind(270.0, speed=20.0)
    found = lose(made.document([mast], ring, guys, straight=True, wind=wind, rope=stiff, setting={"plumb": True}))
    head = np.array([length * math.sin(lean), length * math.cos(lean)])
    toward = np.array([-8.0, 0.0]) - head
    lever = abs(head[0] * toward[1] - head[1] * toward[0]) / np.linalg.norm(toward)
    weight = 20.0 * 9.80665 * length * (length / 2) * math.sin(lean)
    blown = 0.5 * 1.25 * 20.0**2 * 1.2 * 0.1 * math.cos(lean) ** 2 * length**2 / 2
    here = found.cells[row(found, "east")]
    stretch = 1e-5  # of the guy, at most 3 kN over 1 GN; the head moves by a few times that
    for line, moment in ((0, weight), (at(found, 270.0), weight + blown)):
        assert here.tension[line, 0] == pytest.approx(moment / lever, rel=stretch)


def test_each_loss_is_the_case_without_those_cables() -> None:
    document = made.mast(0.0, 70.0)
    found = lose(document)
    setting = made.setting(document)
    k = row(found, "9 m A")
    lines = [replace(line, without=("9 m A",)) for line in lines_of(setting.problem.structure.scenario)]
    alone = solve_lines(setting, lines, True)
    tension = np.fmax(alone.forces.tension_anchor, alone.forces.tension_top)
    close = 1e-8  # of the tension: both stop at an out-of-balance of 1e-9 of the reference force
    for n, degrees in enumerate((0.0, 70.0)):
        assert found.cells[k].tension[at(found, degrees)] == pytest.approx(tension[n], rel=close, abs=close * tension.max())


def test_an_anchor_with_one_cable_is_that_cable_and_with_two_takes_both() -> None:
    single = lose(made.ring_mast(4))
    assert (single.cells[row(single, "guy A")].verdict == single.cells[row(single, "A")].verdict).all()
    double = lost.losses_of(made.scenario(made.mast(0.0)))
    assert next(loss for loss in double if loss.name == ("A",)).cables == ("9 m A", "17 m A")


def test_pairs_are_every_two_cables_and_every_two_anchors() -> None:
    losses_ = lost.losses_of(made.scenario(made.mast(0.0, lost={"pairs": True})))
    kinds = [loss.kind for loss in losses_]
    assert [kinds.count(kind) for kind in ("nothing", "cable", "anchor", "two cables", "two anchors")] == [1, 6, 3, 15, 3]


def test_losing_north_in_wind_from_south_mirrors_losing_south_in_wind_from_north() -> None:
    found = lose(made.ring_mast(4, 0.0, 180.0, level=3.0))
    north, south = found.cells[row(found, "guy A")], found.cells[row(found, "guy C")]
    a, b = at(found, 180.0), at(found, 0.0)
    assert north.verdict[a] == south.verdict[b]
    close = 1e-7  # of the greatest tension: rounding of bearings, over an out-of-balance of 1e-9
    assert np.nan_to_num(north.tension[a]) == pytest.approx(np.nan_to_num(south.tension[b])[[2, 1, 0, 3]], rel=close, abs=1e-4)


# ---------------------------------------------------------------- the swing


def test_suddenness_of_one_is_the_loss_at_rest() -> None:
    document = short()
    plain, one = lose(document), lose({**document, "lost": {"sudden": 1.0}})
    for a, b in zip(plain.cells, one.cells, strict=True):
        assert (a.verdict == b.verdict).all()
        assert np.array_equal(a.tension, b.tension, equal_nan=True)


@settings(max_examples=4, deadline=None)
@given(some.floats(1.0, 3.0))
def test_a_linear_structure_swings_as_far_as_sudden_says(sudden: float) -> None:
    """A stiff fixed mast and small tensions: the head moves in proportion to what is taken away.

    The other guy's tension falls linearly with the head's displacement; so T(swing) - T(whole) = sudden (T(rest) - T(whole)).
    """
    mast = made.spar(length=5.0, base="fixed", section=[made.bar(5.0, EI=1e6)])
    ring = made.anchors(5.0, 90.0, 270.0)
    guys = [made.cable(f"guy {a['name']}", 5.0, a["name"], tension=100.0) for a in ring]
    document = made.document([mast], ring, guys, straight=True, still=True, rope={"rope": made.rope(stiffness=1e4)})
    setting = made.setting(document)
    line = lines_of(setting.problem.structure.scenario)[0]
    gone = [replace(line, without=("guy A",))]
    whole = solve_lines(setting, [line], False)
    change = lost.swing_of(setting, whole, np.array([0]), sudden)
    t0, t1, ts = (
        float(batch.forces.tension_anchor[0, 1])
        for batch in (whole, solve_lines(setting, gone, False), solve_lines(setting, gone, True, change=change))
    )
    linear = 1e-3  # displacement over height, the part by which directions of forces change
    assert ts - t0 == pytest.approx(sudden * (t1 - t0), rel=linear)


def test_the_swing_balances_as_a_whole() -> None:
    """Loads at parted ends, on lugs, are in the sum of forces and moments over the deformed structure, worked out apart from the solver."""
    document = made.mast(70.0)
    for cable in document["cable"]:
        cable["from"]["arm"] = 0.3
    setting = made.setting(document)
    line = lines_of(setting.problem.structure.scenario)[0]
    whole = solve_lines(setting, [line], False)
    swing = lost.swing_of(setting, whole, np.array([0]), 2.0)
    batch = solve_lines(setting, [replace(line, without=("9 m A",))], False, change=swing)
    assert batch.code[0] == 0
    assert batch.balance[0] < 1e-9  # of the reference force, as every case


def test_the_swing_is_never_better_than_rest() -> None:
    document = short()
    rest, swing = lose(document), lose({**document, "lost": {"sudden": 1.8}})
    assert (swing.verdict >= rest.verdict).all()
    for a, b in zip(rest.cells[1:], swing.cells[1:], strict=True):
        both = ~np.isnan(a.use) & ~np.isnan(b.use)
        assert (b.use[both] >= a.use[both]).all()


# ---------------------------------------------------------------- keys, files, statuses


def test_allowables_after_a_loss_are_those_of_the_table() -> None:
    scenario = made.scenario(made.mast(0.0, lost={"cable": 1.2}))
    allowed = lost.after_a_loss(scenario).allowables
    assert (allowed.cable, allowed.anchor) == (1.2, scenario.allowables.anchor)
    assert "cable" not in allowed.defaulted
    assert "anchor" in allowed.defaulted


def test_a_suddenness_below_one_is_refused(tmp_path: Path, capsys: pytest.CaptureFixture[str]) -> None:
    file = tmp_path / "a.toml"
    file.write_text(made.text(made.mast(0.0, lost={"sudden": 0.9})))
    assert cli.run(["lost", str(file)]) == 2
    assert "lost.sudden: 0.9 will not do; it must be at least 1" in capsys.readouterr().err


@pytest.mark.usefixtures("one_format")
def test_files_table_and_exit_status(tmp_path: Path, capsys: pytest.CaptureFixture[str]) -> None:
    file = tmp_path / "a.toml"
    file.write_text(made.text(made.ring_mast(3)))
    assert cli.run(["lost", str(file), "--out", str(tmp_path / "out")]) == 3
    printed = capsys.readouterr().out
    assert "cable guy A" in printed
    assert "Falls in still air" in printed
    assert {p.name for p in (tmp_path / "out").iterdir()} == {"lost.json", "lost.csv", "lost.pdf", "lost.svg", "lost.png"}


def test_json_and_csv_hold_every_loss_case_and_wind() -> None:
    found = lose(made.mast(0.0, 5.0))
    told = losses.as_dict(found)
    assert len(told["losses"]) == 1 + 6 + 3
    assert all(len(loss["cells"]) == 1 + 37 for loss in told["losses"])
    assert len(losses.as_table(found).splitlines()) == 1 + 10 * 38
    least = min((c for c in told["losses"][1]["cells"] if c.get("factor")), key=lambda c: c["factor"] / c["factor_required"])
    assert told["losses"][1]["least_factor"]["factor"] == pytest.approx(least["factor"], rel=TIE)


def test_the_way_of_failing_goes_with_what_governs() -> None:
    """Of rest and swing, and of several cases, each keeps the item and the mode of its own greater use; what falls has none."""
    item = Item("anchor A", "pull", "N", "", modes=("sliding", "lifting"))
    bare = (np.array([1.0]), np.zeros((1, 0)), np.zeros((1, 0)), ("",), (item,))

    def of(use: float, governs: int, mode: int) -> cells.Cells:
        code = np.array([cells.PAST if use > 1 else cells.WITHIN])
        return cells.Cells(code, np.array([use]), np.array([governs]), np.array([mode]), *bare)

    rest, swing, none = of(0.5, 0, 0), of(1.5, 0, 1), of(math.nan, -1, -1)
    assert [x.how(0) for x in (rest, swing, none)] == ["sliding", "lifting", ""]
    assert [lost._worse(*pair).how(0) for pair in ((rest, swing), (swing, rest), (none, swing))] == ["lifting", "lifting", "lifting"]
    both = cells.joined(rest, swing)
    assert [both.how(k) for k in (0, 1)] == ["sliding", "lifting"]
    assert both.take([1]).how(0) == "lifting"
    assert cells.without_loads(replace(swing, verdict=np.array([cells.FALLS]))).how(0) == ""


def test_way_of_failing_stands_in_file_and_on_the_page() -> None:
    document = made.ring_mast(4, 0.0, holdfast={"h": {"kind": "block", "mass": "900 kg", "friction": 0.5}})
    document["anchor"] = [{**a, "holdfast": "h"} for a in document["anchor"]]
    found = lose(document)
    told = losses.as_dict(found)["losses"][0]
    assert (told["least_factor"]["quantity"], told["least_factor"]["how"]) == ("pull", "sliding")
    assert {c["how"] for c in told["cells"] if c["governs"].startswith("anchor")} == {"sliding"}
    assert "quantity,how,factor" in losses.as_table(found).splitlines()[0]
    assert load_row(found, 0, tongue("SI"), force)[1].endswith(", sliding")


# ---------------------------------------------------------------- a case without a cable


def test_a_case_without_a_cable_has_its_path_from_still_air_without_it() -> None:
    """The mast of the far lean, solved as a case in a batch that is not told where to start: what `guys lost` finds, and not a fall."""
    document = made.ring_mast(4, 0.0, level=2.0, tension=300.0, wind=made.wind(0.0, speed=45.0))
    setting = made.setting(document)
    lines = [replace(line, without=("guy A",)) for line in lines_of(setting.problem.structure.scenario)]
    batch = solve_lines(setting, [*lines, *lines_of(setting.problem.structure.scenario)], False)
    assert batch.code.tolist() == [stability.STABLE] * 2
    found = lose(document)
    here = found.cells[row(found, "guy A")]
    pull = np.linalg.norm(batch.forces.pull[0], axis=-1)
    assert pull == pytest.approx(here.pull[at(found, 0.0)], rel=1e-9)  # two searches for one state


def test_where_still_air_without_a_cable_does_not_stand_the_wind_may_still_hold_it_up() -> None:
    """A pinned mast on guys to north, southeast and southwest: without the north one it falls in still air, and a wind from the south
    that presses it north stands against the other two (statics); the case is asked in that wind."""
    document = made.ring_mast(3, 180.0, wind=made.wind(180.0, speed=30.0))
    setting = made.setting(document)
    line = replace(lines_of(setting.problem.structure.scenario)[0], without=("guy A",))
    batch = solve_lines(setting, [line, replace(line, wind=0.0, wind_from=math.nan)], False)
    assert batch.code.tolist() == [stability.STABLE, stability.NONE]


# ---------------------------------------------------------------- the wind still stood


def test_the_wind_still_stood_is_the_limit_of_a_case_without_the_cable(
    monkeypatch: pytest.MonkeyPatch, tmp_path: Path, capsys: pytest.CaptureFixture[str]
) -> None:
    """The same as `guys limit` of a file whose one case has the guy away; nothing where it falls in still air."""
    monkeypatch.setattr(lost, "round_lines", lambda scenario: (setting_line(scenario), *lines_of(scenario)))
    document = made.ring_mast(4, 0.0, 200.0, level=2.0, tension=300.0, allowables={"lean": 20.0})
    found = lost.lose(made.scenario(document), winds=True)
    alone = limits(made.scenario({**document, "case": [{"name": "design", "without": ["guy A"]}]}), apart=2 * math.pi)
    mine = found.winds[row(found, "guy A")]
    for a, b in zip(mine, [alone.circle[k] for k in alone.listed], strict=True):
        assert (a.governs, a.wind_from) == (b.governs, b.wind_from)
        assert a.speed == pytest.approx(b.speed, rel=1e-4, nan_ok=True)  # to which a limit is found
    least = found.least_wind(row(found, "guy A"))
    assert least is not None
    assert least.known == min(limit.known for limit in mine)
    assert len(losses.as_dict(found)["losses"][1]["limits"]) == 2
    file = tmp_path / "a.toml"
    file.write_text(made.text(made.ring_mast(3, 0.0)))
    assert cli.run(["lost", str(file), "--winds"]) == 3
    told = capsys.readouterr().out.split("The wind still stood", 1)[1]
    assert "no wind" in next(line for line in told.splitlines() if "cable guy A" in line)
