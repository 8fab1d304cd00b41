"""Every assumption with where it comes from, the loads worked out by hand at one height, the cases, and the method."""

from __future__ import annotations

import math
from pathlib import PurePath

from guys import tables
from guys.drawing import rounding
from guys.drawing.rounding import ABSENT
from guys.loads.pressure import PEAK
from guys.loads.worked import CableLoad, SparLoad
from guys.record.blocks import Block, Cell, Formulas, Items, Section, Table, text
from guys.record.numbers import figures, mass_per_metre, metres, millimetres, newtons, pascals, per_metre, plain
from guys.record.source import Source
from guys.scenario import Case, ice, patches
from guys.scenario.model import Wind
from guys.scenario.resolve import built_in_materials
from guys.scenario.standard_wind import averaging_words
from guys.setting import MET

DEFAULT = "assumed: default of this program"
GIVEN = "given in the scenario"
STEPS = 6
"""Figures to which a formula's numbers are written, so that its result follows to four."""
SHARE = "share of the wind that is across"


def assumptions(source: Source) -> Section:
    """Values with their source, what was converted or chosen, and how the structure is idealised."""
    notes = source.solution.notes
    blocks: list[Block] = [_values(source), _materials(source)]
    if notes:
        blocks += [text("Converted, chosen or looked up, each with its source:"), Items(tuple(notes))]
    blocks += [text("How the structure is idealised (this program's modelling, described in its theory page):"), Items(_model(source))]
    return Section("assumptions", "Assumptions and where they come from", tuple(blocks))


def _values(source: Source) -> Table:
    scenario, say = source.scenario, source.say
    allowed = scenario.allowables
    setting = GIVEN if "temperature" in scenario.setting.model_fields_set else DEFAULT
    rows: list[tuple[Cell, ...]] = [("setting temperature", say.given(scenario.setting.temperature, rounding.temperature), setting)]
    for name, words in (("cable", "least factor of cables"), ("anchor", "least factor of anchors"), ("sliding", "least factor of sliding"),
                        ("spar", "least factor of spars"), ("lean", "greatest lean of a head")):  # fmt: skip
        value = float(getattr(allowed, name))
        shown: Cell = say.given(value, lambda v, _: rounding.small_angle(v)) if name == "lean" else say.given(value, plain)
        rows.append((words, shown, DEFAULT if name in allowed.defaulted else GIVEN))
    rows += [(f"least factor of {name}, factored cases", say.given(v, plain), GIVEN) for name, v in allowed.factored.items()]
    for spar in scenario.spar:
        if spar.friction is not None:
            rows.append((f"friction under the base of {spar.name}", say.given(spar.friction, plain), GIVEN))
    for name, rope in scenario.rope.items():
        if any(c.rope == name for c in scenario.cable):
            rows.append((f"rope {name}", "as in the table of ropes", rope.source or GIVEN))
    return Table("Values assumed", ("what", "value", "source"), (*rows, *_weather(source)))


def _weather(source: Source) -> list[tuple[Cell, ...]]:
    scenario, say = source.scenario, source.say
    wind, rows = scenario.wind, list[tuple[Cell, ...]]()
    if wind is not None:
        rows.append(("wind speed", say.given(wind.speed, rounding.speed), f"{GIVEN}, {averaging_words(wind.averaging)}"))
        rows.append(("height of that speed", say.given(wind.height, metres), GIVEN))
        rows.append(("wind over height", wind.profile.words, "see what was converted, chosen or looked up"))
        rows.append(("air density", say.given(wind.air_density, rounding.density), "given, or by altitude and temperature or the standard"))
    if scenario.ice is not None:
        rows.append(("ice", ice.words(scenario.ice), GIVEN))
    return rows


def _materials(source: Source) -> Table:
    scenario, say = source.scenario, source.say
    built_in, known = built_in_materials(), {row["name"]: row["source"] for row in tables.rows("materials")}
    rows = []
    for name in dict.fromkeys(s.material for spar in scenario.spar for s in spar.section if s.material is not None):
        m = scenario.material[name]
        where = known[name] if built_in.get(name) == m else GIVEN
        stress = "none: not judged" if m.yield_ is None else say.given(m.yield_, rounding.pressure_down)
        moduli = (say.given(v, figures("GPa", "ksi")) for v in (m.modulus, m.shear_modulus))
        rows.append((name, say.given(m.density, rounding.density), *moduli, stress, where))
    return Table("Materials", ("material", "density", "Young's modulus", "shear modulus", "yield", "source"), tuple(rows))


def _model(source: Source) -> tuple[str, ...]:
    scenario = source.scenario
    straight = "straight and weightless, and bear tension alone"
    hang = "elastic catenaries under their own weight, ice and wind, and bear no compression"
    gives = [a.name for a in scenario.anchor if a.give is not None]
    moves = f"Anchors do not move, but {', '.join(gives)}, by what is given." if gives else "Anchors do not move."
    return (
        "Spars are straight as drawn before they are loaded; elastic ones are chains of beams that turn by any amount at small strain.",
        f"Cables are {hang if scenario.analysis.cable == 'catenary' else straight}. They run from the axis of a spar, or from a lug on it.",
        "Loads are worked out on the position as set and keep size and direction as the structure moves; what one update on the deformed "
        "position changes is told under sensitivity.",
        "Initial tensions are in every case and are never multiplied by a factor of it.",
        "Wind is steady and level; no thing shelters another; what gusts add is in the pressure alone.",
        moves,
        "A case stands where its equilibrium is stable against every small motion of the whole structure.",
    )


def loads(source: Source) -> Section:
    """The formulas in numbers at one height, and on one cable."""
    found, wind = source.found.worked, source.scenario.wind
    if found is None or wind is None:
        return Section("loads", "Loads", (text("No case has wind: the loads are weights and what the scenario gives."),))
    line = found.line
    where = f"case {line.name}, wind from {rounding.bearing(line.wind_from)}"
    first = (
        f"Worked out for {where}, at half the length of {found.spar.spar}, "
        "with the numbers the run used; heights are above the foot. Results follow from the numbers written to about four figures."
    )
    blocks: list[Block] = [text(first)]
    if patches.of(source.scenario):
        gusts = (
            "Gusts come patch by patch in this run: what follows is the peak pressure, of which the mean wind holds 1 / (1 + 7 I_v) and "
        )
        blocks.append(text(f"{gusts}each patch adds its gust within its band of heights; see what was converted, chosen or looked up."))
    blocks += [Formulas(tuple(_pressure(source, wind, found.spar))), Formulas(tuple(_on_spar(source)))]
    if found.cable is not None:
        blocks.append(Formulas(tuple(_on_cable(source, found.cable))))
    sums = text("The sums of all loads of every case stand beside the reactions under balance.")
    return Section("loads", "Loads, worked out by hand", (*blocks, sums))


def _n(value: float) -> str:
    return f"{value:.{STEPS}g}".replace("-", "−")


def _pressure(source: Source, wind: Wind, spar: SparLoad) -> list[tuple[str, Cell]]:
    say, p = source.say, wind.profile
    rows: list[tuple[str, Cell]] = [("height z above the foot", say.number("worked.spar.z_m", metres))]
    speed = wind.speed_factor * wind.speed
    if wind.speed_factor != 1.0:
        rows.append((f"speed s V = {_n(wind.speed_factor)} × {_n(wind.speed)} m/s", say.given(speed, rounding.speed)))
    z = min(max(spar.z, p.low), p.high)
    if z != spar.z:
        rows.append((f"taken at z = {_n(z)} m, since below and above its limits the profile stays as it is", say.given(z, metres)))
    q = say.number("worked.spar.q_Pa", pascals)
    f = "" if wind.pressure_factor == 1.0 else f" × {_n(wind.pressure_factor)}"
    still = f"½ × {_n(wind.air_density)} kg/m³ × ({_n(speed)} m/s)²{f}"
    symbols = "½ ρ (s V)²" + (" f" if f else "")
    if p.kind == "en1991":
        log = math.log(z / p.roughness)
        mean = p.terrain * log * p.orography * speed
        turbulence = 1.0 / (p.orography * log)
        symbol = f"v_m = k_r ln(z / z₀) c_o V = {_n(p.terrain)} × ln({_n(z)} / {_n(p.roughness)}) × {_n(p.orography)} × {_n(speed)} m/s"
        gust = f"(1 + {PEAK:g} × {_n(turbulence)}) × ½ × {_n(wind.air_density)} kg/m³ × ({_n(mean)} m/s)²{f}"
        rows.append((symbol, say.given(mean, rounding.speed)))
        rows.append((f"I_v = 1 / (c_o ln(z / z₀)) = 1 / ({_n(p.orography)} × {_n(log)})", say.given(turbulence, plain)))
        return [*rows, (f"q = (1 + 7 I_v) ½ ρ v_m²{' f' if f else ''} = {gust}", q)]
    if p.exponent == 0.0:
        return [*rows, (f"q = {symbols} = {still}, the same at every height", q)]
    reference = p.reference or wind.height
    ratio, power = f"({_n(max(z, 0.0))} / {_n(reference)})", _n(2 * p.exponent)
    crest, words = "", ""
    if p.crest is not None:
        hill = (1.0 + p.crest[0] * math.exp(-p.crest[1] * max(spar.z, 0.0))) ** 2
        crest, words = " Kzt", f" × {_n(hill)}"
        rows.append((f"Kzt = (1 + {_n(p.crest[0])} × exp(−{_n(p.crest[1])} × {_n(max(spar.z, 0.0))}))²", say.given(hill, plain)))
    return [*rows, (f"q = {symbols} (z / z_r)^(2p){crest} = {still} × {ratio}^{power}{words}", q)]


def _on_spar(source: Source) -> list[tuple[str, Cell]]:
    say, found = source.say, source.found.worked
    assert found is not None
    s = found.spar
    product = f"{_n(found.factor)} × {_n(s.q)} Pa × {_n(s.coefficient)} × {_n(s.width)} m × {_n(s.hold)}"
    g = f"{_n(s.mass)} kg/m × 9.80665 m/s²"
    return [
        (f"factor of the case on the pressure (wind {_n(found.line.wind)}{', less with ice' if found.factor != found.line.wind else ''})",
         say.number("worked.factor", plain)),
        ("force coefficient C on the width", say.number("worked.spar.coefficient", plain)),
        (f"width b the wind meets, section {s.section}", say.number("worked.spar.width_m", millimetres)),
        (f"{SHARE}, h", say.number("worked.spar.hold", plain)),
        (f"wind on {s.spar} = factor q C b h = {product}", say.number("worked.spar.wind_N_per_m", per_metre)),
        ("mass per length, with the factors of the case and its ice", say.number("worked.spar.mass_kg_per_m", mass_per_metre)),
        (f"weight per length = m g = {g}", say.number("worked.spar.weight_N_per_m", per_metre)),
    ]  # fmt: skip


def _on_cable(source: Source, c: CableLoad) -> list[tuple[str, Cell]]:
    say, found = source.say, source.found.worked
    assert found is not None
    product = f"{_n(found.factor)} × {_n(c.q)} Pa × {_n(c.coefficient)} × {_n(c.width)} m × {_n(c.chord)} m × {_n(c.hold)}"
    between = (say.number("worked.cable.low_m", metres), " to ", say.number("worked.cable.high_m", metres))
    return [
        (f"cable {c.cable}: heights of its ends", between),
        ("mean pressure between them", say.number("worked.cable.q_Pa", pascals)),
        ("force coefficient C on the diameter", say.number("worked.cable.coefficient", plain)),
        ("width d", say.number("worked.cable.width_m", millimetres)),
        ("chord c", say.number("worked.cable.chord_m", metres)),
        (f"{SHARE}, h", say.number("worked.cable.hold", plain)),
        (f"wind on {c.cable} = factor q C d c h = {product}", say.number("worked.cable.wind_N", newtons)),
    ]


def cases(source: Source) -> Section:
    """The load cases and the directions of the wind."""
    wind = source.scenario.wind
    blocks: list[Block] = [Table(
        "Load cases: factors on weight, on the wind's pressure and on the weight of ice",
        ("case", "kind", "dead", "wind", "ice", "temperature", "without cables", "no ice on"),
        tuple(_case(source, case) for case in source.scenario.case),
    )]  # fmt: skip
    if wind is not None:
        listed = ", ".join(rounding.bearing(d) for d in wind.directions)
        blocks.append(text(f"Each case with wind is solved for wind from {listed}. Bearings are clockwise from grid north and say where "
                           "the wind comes from."))  # fmt: skip
    if source.solution.sweep is not None:
        blocks.append(text("It is then solved around the full circle, and peaks between solved bearings are narrowed down."))
    blocks.append(text("Before all of them comes the setting: still air, dead load once, at the setting temperature."))
    return Section("cases", "Load cases and directions", tuple(blocks))


def _case(source: Source, c: Case) -> tuple[Cell, ...]:
    numbers = (source.say.given(v, plain) for v in (c.dead, c.wind, c.ice))
    warm = source.say.given(c.temperature, rounding.temperature)
    return (c.name, c.kind, *numbers, warm, ", ".join(c.without) or ABSENT, ", ".join(c.bare) or ABSENT)


def method(source: Source) -> Section:
    """How it was solved, and what identifies input and program."""
    solution, scenario = source.solution, source.scenario
    where = f" ({PurePath(scenario.path).name})" if scenario.path else ""
    rows = (
        ("program", f"guys {solution.version}"),
        ("scenario", f"format {scenario.format}{where}, attached at the end"),
        ("layout", scenario.layout),
        ("SHA-256 of its bytes", scenario.sha256),
        ("units", f"{' first, '.join(source.say.systems)} beside; the file record.json holds every number in SI with all its digits"),
    )
    equilibrium = (
        "Equilibrium is found on the deformed structure by a damped Newton iteration with tangents of beams, joints and cables. "
        f"Unstressed lengths of the cables come first, so that still air meets the tensions asked for within {MET:.0e} of them. "
        "A case is told apart as stable, neutral or unstable by the sign of the least eigenvalue of its tangent; one not found near "
        "the setting is followed along a path of the load, and where the path ends the structure falls."
    )
    return Section("method", "Method, version and input", (text(equilibrium), Table("What identifies this record", ("what", "is"), rows)))
