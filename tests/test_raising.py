"""Raisings through the solver: against rigid statics, beams by hand, winds by hand, turned and mirrored sites, and as commands."""

from __future__ import annotations

import json
import math
from concurrent.futures import ThreadPoolExecutor
from dataclasses import replace
from pathlib import Path

import numpy as np
import pytest
from raisings import ELASTIC, MAST, STANDING, WIND, raised, turned
from test_tilting import EXPECTED
from toml_text import changed, dumps_tables

from guys import cli, parse_scenario, read_scenario, tilting
from guys.constants import STANDARD_GRAVITY as G
from guys.exchange import raising as exchange
from guys.studies import hoisting, part_raised
from guys.studies.raising import Raised, solve

SHIPPED = Path(__file__).parent.parent / "scenarios/tilt-up-mast.toml"
THREADS = 1e-5
"""Relative: the lines' own weight, a ten-millionth of a kilogram a metre, and the solver's tolerance."""
SECOND_ORDER = 0.03
"""Relative: a spar that bends by a hundredth of its length moves its weight by so much of their levers."""
GIN, SPAR = ("raise", "gin_pole"), ("spar", 0)
COARSE = (("raise", "angles"), "every 30 deg")


@pytest.fixture(scope="module")
def shipped() -> Raised:
    return solve(read_scenario(SHIPPED))


def test_a_rigid_spar_against_an_independent_calculation() -> None:
    """Source: independent reference calculation, this project."""
    found = raised()
    rows = [round(math.degrees(a)) for a in found.angle]
    assert rows == list(range(0, 91, 5))
    assert found.hoist[1:-1, 0] == pytest.approx(list(EXPECTED["hoist_N"].values()), rel=THREADS)
    hinge = np.array(list(EXPECTED["hinge_force_on_ground_N"].values()))
    assert found.on_hinge[1:-1, 0] == pytest.approx(hinge, abs=THREADS * 3.5e3)
    assert found.stands.all()


def test_angles_side_by_side_give_the_same_bytes() -> None:
    scenario = parse_scenario(dumps_tables(changed(MAST, COARSE, (("wind",), WIND))))
    with ThreadPoolExecutor(2) as threads:
        texts = [exchange.as_text(found, hoisting.findings(found)) for found in (solve(scenario), solve(scenario, threads))]
    assert texts[0] == texts[1]


def test_gin_pole_and_lifting_line_are_those_of_rigid_statics() -> None:
    found = raised(COARSE)
    pole = tilting.turning_pole(found.lift.rig, found.rigid)
    assert found.gin_pole[:-1] == pytest.approx(pole.thrust[:-1], abs=THREADS * 3e3)
    assert found.lift_line[:-1] == pytest.approx(pole.lift_line[:-1], abs=THREADS * 3e3)


@pytest.mark.parametrize("pole", [MAST["raise"]["gin_pole"], STANDING], ids=["turning", "standing"])
def test_turned_and_mirrored_sites(pole: dict[str, object]) -> None:
    """East and north of a standing pole's foot have no bearing, so it is turned by its own angle."""
    document = changed(MAST, (GIN, pole), COARSE, (("wind",), WIND))
    here = solve(parse_scenario(dumps_tables(document)))
    for degrees, mirror in ((37.0, False), (0.0, True)):
        there = turned(document, degrees, mirror)
        if "foot" in pole:
            there = changed(there, ((*GIN, "foot"), _at(-270.0 if mirror else 270.0 + degrees)))
        found = solve(parse_scenario(dumps_tables(there)))
        order = [winds(found, (-w if mirror else w) + degrees) for w in np.degrees(here.wind_from[1:])]
        for name in ("hoist", "gin_pole", "holding", "bending"):
            ours, theirs = getattr(here, name), getattr(found, name)
            assert theirs[:, [0, *order]] == pytest.approx(ours, abs=1e-6 * np.abs(here.hoist).max())


def winds(found: Raised, bearing: float) -> int:
    """The case of the wind from a bearing [deg]."""
    apart = [abs(math.remainder(w - math.radians(bearing), math.tau)) for w in found.wind_from[1:]]
    assert min(apart) < 1e-9
    return 1 + int(np.argmin(apart))


def _at(bearing: float) -> dict[str, str]:
    """A metre from the origin."""
    return {"east": f"{math.sin(math.radians(bearing))!r} m", "north": f"{math.cos(math.radians(bearing))!r} m"}


def test_a_bigger_one_of_the_same_weight_asks_for_the_same_pull() -> None:
    """All lengths twice as long, masses per length half: the same forces, twice the moments."""
    small = raised(COARSE)
    big = raised(
        COARSE, ((*SPAR, "section", 0, "length"), "24 m"), ((*SPAR, "section", 0, "mass"), "7.5 kg/m"),
        ((*SPAR, "fitting", 0, "at"), "24 m"),
        (("raise", "lift_at"), "16 m"), ((*GIN, "length"), "10 m"), (("raise", "winch", "radius"), "20 m"),
    )  # fmt: skip
    assert big.hoist == pytest.approx(small.hoist, rel=THREADS, abs=0.1)
    assert big.bending[:-1] == pytest.approx(2 * small.bending[:-1], rel=THREADS)


def test_us_units_are_the_same_mast() -> None:
    us = raised(COARSE, (("raise", "lift_at"), f"{8 / 0.3048!r} ft"), ((*GIN, "mass"), f"{25 / 0.45359237!r} lb"))
    assert us.hoist == pytest.approx(raised(COARSE).hoist, rel=1e-9, abs=1e-6)


# ---------------------------------------------------------------- the spar as a beam


def test_bending_of_the_lying_spar_is_that_of_a_beam_with_an_overhang() -> None:
    """At the lift point 4 m of 15 kg/m and 20 kg hang over; the line's pull has no moment there."""
    found = raised(((*SPAR, "rigid"), ...), ((*SPAR, "section", 0), ELASTIC), (("raise", "angles"), ["0 deg", "40 deg"]))
    for k, degrees in enumerate((0.0, 40.0)):
        by_hand = (15.0 * G * 4.0**2 / 2 + 20.0 * G * 4.0) * math.cos(math.radians(degrees))
        assert found.bending[k, 0] == pytest.approx(by_hand, rel=SECOND_ORDER)
        assert found.bending_at[k, 0] == pytest.approx(8.0)


def test_a_stiffer_spar_comes_nearer_to_rigid_statics() -> None:
    away = []
    for times in (1, 10, 100):
        section = {**ELASTIC, "EI": f"{700 * times} kN m2", "EA": f"{300 * times} MN"}
        found = raised(((*SPAR, "rigid"), ...), ((*SPAR, "section", 0), section), COARSE)
        away.append(float(np.abs(found.hoist[:-1, 0] / found.rigid[:-1, 0] - 1).max()))
    assert away[0] < SECOND_ORDER
    assert away[1] == pytest.approx(away[0] / 10, rel=0.1), "the first order of a small deflection"
    assert away[2] < 0.02 * away[0]


def test_the_sections_of_the_spar_are_judged_while_it_hangs_from_one_point() -> None:
    """89 by 3.2 mm: W = pi/32 (D^4 - d^4)/D = 17.9e3 mm3; the moment of the overhang at the lift point, the thrust below it."""
    tube = {"length": "12 m", "tube": {"diameter": "89 mm", "wall": "3.2 mm"}, "material": "mine", "drag": 1.2}
    own = {"mine": {"density": "7850 kg/m3", "modulus": "210 GPa", "shear_modulus": "81 GPa", "yield": "235 MPa"}}
    found = raised(((*SPAR, "rigid"), ...), ((*SPAR, "section", 0), tube), (("material",), own), (("raise", "angles"), ["0 deg"]))
    d, inner = 0.089, 0.0826
    modulus, area = math.pi / 32 * (d**4 - inner**4) / d, math.pi / 4 * (d**2 - inner**2)
    thrust = found.lift_line[0, 0] * 8.0 / math.hypot(8.0, 5.0)
    judged = next(f for f in hoisting.findings(found) if f.thing == "spar mast")
    assert judged.factor == pytest.approx(235e6 / (found.bending[0, 0] / modulus + thrust / area), rel=SECOND_ORDER)


# ---------------------------------------------------------------- wind


def test_wind_along_the_plane_by_hand() -> None:
    """Pressure q on 1.2 x 0.1 m: across the spar q sin(a)^2 a metre, its moment q sin(a)^2 L^2/2; from the east it helps to raise."""
    found = raised((("wind",), WIND), (("raise", "angles"), ["30 deg", "60 deg"]))
    q = 0.5 * 1.225 * 12.0**2 * 1.2 * 0.1
    lever = tilting.lever(found.lift.rig, found.lift.rig.lifts)
    east, west = winds(found, 90.0), winds(found, 270.0)
    change = q * np.sin(found.angle) ** 2 * 12.0**2 / 2 / lever
    assert found.hoist[:, 0] - found.hoist[:, east] == pytest.approx(change, rel=1e-3)
    assert found.hoist[:, west] - found.hoist[:, 0] == pytest.approx(change, rel=1e-3)


def test_wind_along_and_across_the_plane_is_always_among_the_winds() -> None:
    found = raised((("wind",), {**WIND, "directions": ["20 deg"]}), COARSE)
    assert np.degrees(found.wind_from[1:]) == pytest.approx([0.0, 20.0, 90.0, 180.0, 270.0], abs=1e-9)


def test_the_load_changes_side_earlier_in_wind(shipped: Raised) -> None:
    assert hoisting.over_in_wind(shipped) < shipped.over < math.pi / 2
    over = shipped.angle > shipped.over
    assert (shipped.holding[over, 0] > 1.0).all()
    assert (shipped.holding[~over, 0] < 1.0).all()
    assert (shipped.hoist[over, 0] < 1.0).all()


PLAY = 0.02
"""Of a pull near the line's dead point: what the play in it moves the spar, a millimetre, changes its lever."""


def test_where_the_wind_turns_the_load_round_the_other_line_takes_it_over() -> None:
    """Of a rigid spar near the change of side, by moments about the hinge: the hoist line carries it, or the holding line.

    A holding line with any play to speak of would let the spar swing over before it held; one too short would pull against the other.
    """
    found = raised((("wind",), WIND), (("raise", "angles"), ["82 deg", "84 deg", "86 deg", "88 deg"]))
    rig, moment = found.lift.rig, found.moment
    turned_round = np.sign(moment[:, 1:]) != np.sign(moment[:, :1])
    assert turned_round[moment[:, 0] < 0].any()
    assert turned_round[moment[:, 0] > 0].any()
    held = np.maximum(moment, 0.0) / -tilting.lever(rig, rig.holds)[:, None]
    assert found.hoist == pytest.approx(found.rigid, rel=PLAY, abs=1.0)
    assert found.holding == pytest.approx(held, rel=PLAY, abs=1.0)


def test_raising_has_a_wind_speed_of_its_own() -> None:
    own = raised((("wind",), WIND), (("raise", "wind_speed"), "6 m/s"), COARSE)
    same = raised((("wind",), {**WIND, "speed": "6 m/s"}), COARSE)
    assert own.hoist == pytest.approx(same.hoist, rel=1e-12)


def test_half_a_spar_needs_no_line_when_it_is_balanced() -> None:
    """No gin pole's weight: upright the spar hangs in neither line."""
    found = raised(
        ((*GIN, "mass"), "0 kg"),
        (("raise", "angles"), ["60 deg", "90 deg"]),
        ((*GIN, "kind"), "standing"),
        ((*GIN, "foot"), STANDING["foot"]),
    )
    assert found.stands.all()
    assert found.hoist[1, 0] < 1e-3 * found.hoist[0, 0]


# ---------------------------------------------------------------- side guys, what turns with the spar


def guyed(radius_north: str, off: str = "0 m", **given: object) -> tuple[tuple[tuple[str | int, ...], object], ...]:
    anchors = [{"name": "N", "east": off, "north": radius_north}, {"name": "S", "east": off, "north": f"-{radius_north}"}]
    level = {"name": "side", "spar": "mast", "at": "9 m", "rope": "wire", "to": ["N", "S"], **(given or {"tension": "500 N"})}
    wire = {"diameter": "6 mm", "mass": "0.15 kg/m", "stiffness": "1.4 MN", "strength": "23 kN", "drag": 1.2}
    return (
        (("anchor",), anchors), (("guy_level",), [level]), (("rope",), {"wire": wire}),
        (("raise", "side_guys"), ["side N", "side S"]), COARSE,
    )  # fmt: skip


def test_side_guys_on_the_line_of_the_hinge_keep_their_length() -> None:
    """Their pull along the spar goes into the hinge: 2 x 500 N at 45 degrees, and half the guys' weight."""
    found, bare = raised(*guyed("9 m")), raised(COARSE)
    assert np.abs(found.guy_change).max() < 1e-9
    assert found.guys[:, 0] == pytest.approx(500.0, rel=1e-6)
    extra = np.linalg.norm(found.on_hinge[1, 0]) - np.linalg.norm(bare.on_hinge[1, 0])
    assert extra == pytest.approx(2 * 500.0 * math.sin(math.pi / 4), rel=0.15), "the pull is not quite along the hinge's own force"
    assert not [w for w in hoisting.warnings(found) if "side guy" in w]


def test_side_guys_off_that_line_are_told_with_how_much() -> None:
    found = raised(*guyed("9 m", "1 m"))
    drawn, lying = math.sqrt(81 + 1 + 81), math.sqrt(64 + 81)
    assert found.guy_change[0] == pytest.approx([lying - drawn] * 2, rel=1e-12)
    told = [w for w in hoisting.warnings(found) if 'side guy "side N"' in w]
    assert "1 m (3.281 ft) off the line of the hinge's axis" in told[0]
    assert "let out or taken in" in told[0]


def test_a_pinned_spar_is_held_sideways_by_its_side_guys_alone() -> None:
    held = raised(((*SPAR, "base"), "pinned"), ((*SPAR, "hinge_axis"), ...), *guyed("9 m"), (("wind",), WIND))
    assert held.stands.all()


def test_fittings_turn_with_the_spar() -> None:
    """A mass 1 m west of the upright mast's axis is 1 m above the lying one, and a face to the north stays to the north."""
    sign = {"name": "sign", "at": "10 m", "mass": "50 kg", "offset": {"east": "-1 m"}, "shape": "flat", "area": "1 m2", "face": "270 deg"}
    scenario = parse_scenario(dumps_tables(changed(MAST, ((*SPAR, "fitting", 1), {**sign, "drag": 1.0}))))
    assert scenario.raising is not None
    lift = part_raised.lift_of(scenario, scenario.raising)
    lying, upright = part_raised.stage(lift, 0).spar[0].fitting[1], part_raised.stage(lift, len(lift.angle) - 1).spar[0].fitting[1]
    assert [lying.offset.east, lying.offset.north, lying.offset.up] == pytest.approx([0.0, 0.0, 1.0], abs=1e-12)
    assert lying.face_tilt == pytest.approx(math.pi / 2)
    assert [upright.offset.east, upright.offset.up] == pytest.approx([-1.0, 0.0], abs=1e-12)
    assert upright.face == pytest.approx(-math.pi / 2)
    found = solve(scenario)
    moment = (1320.0 + 500.0) * G
    assert found.moment[0, 0] == pytest.approx(-moment, rel=1e-9)
    assert found.moment[-1, 0] == pytest.approx((62.5 + 50.0) * G, rel=1e-9)


# ---------------------------------------------------------------- what is judged and told


def test_of_mirror_winds_the_first_is_named(shipped: Raised) -> None:
    """Winds from either side of the plane of raising pull alike but for rounding; the greatest is told of the one that comes first."""
    last = np.where(np.isclose(shipped.wind_from, math.radians(150.0)), 1e-9, 0.0)
    for hoist in (shipped.hoist, shipped.hoist * (1 + last)):
        told = exchange.as_dict(replace(shipped, hoist=hoist), ())["greatest"]["hoist_N"]
        assert (told["angle_deg"], told["wind_from_deg"]) == (0.0, 30.0)


def test_capacities_are_judged() -> None:
    found = raised(
        COARSE, (("raise", "winch", "capacity"), "2 kN"), ((*GIN, "capacity"), "4 kN"), (("raise", "lift_capacity"), "3.1 kN"),
        (("raise", "hinge_capacity"), "4 kN"),
    )  # fmt: skip
    verdicts = {f.thing: f.verdict for f in hoisting.findings(found)}
    assert verdicts["winch"] == "past"
    assert verdicts["hinge"] == "past"
    assert {verdicts[name] for name in ("gin pole", "lift point")} == {"within"}
    assert verdicts["hoist line"] == "not judged"


def test_the_gin_pole_pulled_off_its_seat_is_told_with_the_angle() -> None:
    """By the formulae of `guys.tilting`, tested there, its thrust is 61.7 N at 60 degrees and -157.7 N at 65."""
    found = raised()
    assert math.degrees(hoisting.lifted_off(found)) == pytest.approx(61.4, abs=0.2)
    assert any("pulled off its seat from 61.4" in w for w in hoisting.warnings(found))


def test_a_holding_line_not_given_is_assumed_and_told(shipped: Raised) -> None:
    assert any("is assumed" in w for w in hoisting.warnings(raised(COARSE)))
    assert not any("is assumed" in w for w in hoisting.warnings(shipped))


def test_friction_makes_the_hoist_line_and_the_winch_pull_harder() -> None:
    turning, standing = raised(COARSE, (("raise", "friction"), 0.1)), raised(COARSE, (("raise", "friction"), 0.1), (GIN, STANDING))
    assert turning.winch[0, 0] == pytest.approx(turning.hoist[0, 0] / 0.9)
    assert standing.hoist[0, 0] == pytest.approx(standing.lift_line[0, 0] / 0.9)
    assert turning.hoist[0, 0] == pytest.approx(raised(COARSE).hoist[0, 0])


def test_a_list_of_angles_and_a_leaning_spar() -> None:
    assert np.degrees(raised((("raise", "angles"), ["10 deg", "33 deg"])).angle) == pytest.approx([10.0, 33.0])
    leaning = raised(((*SPAR, "lean"), "12 deg"), ((*SPAR, "toward"), "90 deg"), COARSE)
    assert np.degrees(leaning.angle) == pytest.approx([0.0, 30.0, 60.0, 78.0])


# ---------------------------------------------------------------- the command


def run(*arguments: str, capsys: pytest.CaptureFixture[str]) -> tuple[int, str, str]:
    status = cli.run(arguments)
    told = capsys.readouterr()
    return status, told.out, told.err


def written(tmp_path: Path, *changes: tuple[tuple[str | int, ...], object]) -> str:
    path = tmp_path / "mast.toml"
    path.write_text(dumps_tables(changed(MAST, *changes)), encoding="utf-8")
    return str(path)


def test_json_and_status(tmp_path: Path, capsys: pytest.CaptureFixture[str]) -> None:
    status, out, _ = run("raise", written(tmp_path, COARSE), "--json", capsys=capsys)
    found = json.loads(out)
    assert status == 0
    assert [stage["angle_deg"] for stage in found["stages"]] == [0.0, 30.0, 60.0, 90.0]
    assert found["stages"][1]["hoist_N"] == pytest.approx(EXPECTED["hoist_N"]["30"], rel=THREADS)
    assert len(found["stages"][0]["hinge_on_ground_N"]) == 3
    assert found["over_centre_deg"] == pytest.approx(math.degrees(math.atan2(1320.0, 62.5)))
    past, _, _ = run("raise", written(tmp_path, COARSE, (("raise", "winch", "capacity"), "2 kN")), capsys=capsys)
    assert past == 3
    floppy = ((*SPAR, "rigid"), ...), ((*SPAR, "section", 0), {**ELASTIC, "EI": "2 kN m2"}), (("raise", "angles"), ["60 deg"])
    status, out, _ = run("raise", written(tmp_path, *floppy), capsys=capsys)
    assert status == 4
    assert "nothing holds the spar" in out


def test_files_are_written(tmp_path: Path, capsys: pytest.CaptureFixture[str]) -> None:
    status, out, _ = run("raise", written(tmp_path, COARSE), "--out", str(tmp_path / "out"), "--units", "both", capsys=capsys)
    assert status == 0
    assert "lbf" in out
    rows = (tmp_path / "out/raise.csv").read_text().splitlines()
    assert len(rows) == 1 + 4
    assert (tmp_path / "out/raise.svg").stat().st_size > 10_000
    assert json.loads((tmp_path / "out/raise.json").read_text())["format"] == exchange.FORMAT


def test_a_file_without_the_table_is_refused(tmp_path: Path, capsys: pytest.CaptureFixture[str]) -> None:
    status, _, err = run(
        "raise",
        written(
            tmp_path,
            (("raise",), ...),
            ((*SPAR, "base"), "fixed"),
            ((*SPAR, "hinge_axis"), ...),
            (("case",), [{"name": "still", "wind": 0.0}]),
        ),
        capsys=capsys,
    )
    assert status == 2
    assert "raise: missing; give [raise]" in err


@pytest.mark.usefixtures("one_format")
def test_solving_a_file_that_is_only_raised_says_what_holds_it_not(tmp_path: Path, capsys: pytest.CaptureFixture[str]) -> None:
    status, out, _ = run("solve", written(tmp_path), "--out", str(tmp_path / "out"), capsys=capsys)
    assert status == 4
    assert "no cable holds mast; the lines of [raise] do not count here" in out
