"""What a crew's pages say in words: how to read a tension, in which order to set it, what to look at, which pieces to bring."""

from __future__ import annotations

from collections import Counter

from guys.drawing.rounding import Tongue, fine_length, mass, share, temperature, thickness
from guys.scenario.model import Scenario
from guys.studies.field import Field, order

HOW = (
    "Pulse: strike the cable once, sideways, near its lower end with a hand on it; each time the blow comes back is a return. Start the "
    "watch with one of them, stop it with the last of those to count.",
    "Swing: push the cable to and fro sideways, square to the plane it hangs in (in that plane it swings faster), with its own beat; "
    "count full swings, there and back.",
    "Sag: how far the cable hangs below the straight line between its ends, upright, at the middle of its level length.",
    "Sight: look along the lowest part of the cable from its lower end; the line of sight passes so far below the upper end, "
    "measured plumb.",
    "Gauge: at the lower end.",
)
INSPECT = (
    "Before tensioning: every pin closed and moused, thimbles seated, clips with the saddle on the live part, nuts tight; rope without "
    "broken wires, kinks, rust or cuts.",
    "Turnbuckles: at least half the thread engaged at both ends, locked after setting.",
    "Holdfasts: none moved, heaved or cracked the ground around; proof load held before the mast goes up.",
    "Base: seated on its whole face, pin or ball free, nothing settled.",
    "After tensioning: every level plumb, no twist, tensions within what is accepted, nothing rubs.",
    "Each morning, and after rain, thaw, frost or strong wind: holdfasts, tensions, plumb, turnbuckle locks, clips (retighten them after "
    "the first loading).",
)
"""Common practice."""
COARSE = "Coarse: the error alone is more than what is accepted; such a reading shows a slip, not that a tension is accepted."
NOT_IN_IT = "Not in it: what new rope stretches for good; stiffness of hardware; bending stiffness and clamps of a cable in its swing."
IN_ROUNDS = (
    "Lowest level first. In small equal turns, opposite cables together; plumb after each round. Tightening one cable changes the others: "
    "go round again until all are within what is accepted. The temperature is that of the cable: in the sun more than that of the air."
)


def how(found: Field) -> tuple[str, ...]:
    """How each reading is taken, and what one in the wrong plane would tell."""
    too_much = [v for v in found.in_plane.tolist() if v == v]
    most = max(too_much, default=0.0)
    wrong = [f"Swung in the plane it hangs in, a cable here would tell up to {100 * most:.0f} % too much tension."] if most > 0 else []
    return (*HOW, *wrong, COARSE)


def setting_words(found: Field, speech: Tongue) -> list[str]:
    """In which order, and how, tensions are set (common practice)."""
    levels = order(found.scenario)
    out = [
        f"{k + 1}. {level.spar} at {speech.say(fine_length, level.at)}: {', '.join(level.cables)}" for k, level in enumerate(levels)
    ]
    return [
        *out,
        IN_ROUNDS,
    ]


def assumed(found: Field, speech: Tongue) -> list[str]:
    """Values of [field] the user did not give, told as such."""
    work = found.scenario.field
    told = {
        "hardware": f"hardware {speech.say(fine_length, work.hardware)}",
        "turn_back": f"rope used by terminations {speech.say(fine_length, work.turn_back)}",
        "time_error": f"a time stopped to {work.time_error:g} s",
        "sag_error": f"a sag read to {speech.say(thickness, work.sag_error)}",
        "sight_error": f"a sight read to {speech.say(thickness, work.sight_error)}",
        "plumb_error": f"spars known to stand as set to {speech.say(thickness, work.plumb_error)}",
        "gauge_error": f"a gauge {share(work.gauge_error)}",
        "mass_error": f"rope mass {share(work.mass_error)}",
    }
    left = [words for key, words in told.items() if work.defaulted(key)]
    given = [words for key, words in told.items() if not work.defaulted(key)]
    out = [f"Taken, as [field] does not say otherwise (from memory): {'; '.join(left)}."] if left else []
    out += [f"As given: {'; '.join(given)}."] if given else []
    return [*out, NOT_IN_IT]


def accepted_words(found: Field) -> list[str]:
    """Where what is accepted comes from."""
    work = found.scenario.field
    source = "ANSI/TIA-222-H, 13.3.2, read in an industry advisory notice on it"
    names = [
        f"{name} {words}"
        for key, name, words in (
            ("tension", "tensions", share(work.tension)),
            ("plumb", "plumb", f"1 in {1 / work.plumb:.0f} of the height"),
            ("twist", "twist", f"{work.twist * 57.29577951308232:.2g}° in 10 ft (3.05 m)"),
            ("twist_whole", "twist over all", f"{work.twist_whole * 57.29577951308232:.2g}°"),
        )
        if work.defaulted(key)
    ]
    return [f"Not given, so taken: {', '.join(names)} ({source})."] if names else []


def pieces(found: Field, speech: Tongue) -> list[tuple[str, str, str]]:
    """What to bring: thing, how many, of what."""
    scenario = found.scenario
    out = []
    for rope in dict.fromkeys(cable.rope for cable in scenario.cable):
        rows = [k for k, cable in enumerate(scenario.cable) if cable.rope == rope]
        whole = float(sum(found.cut.rope[k] for k in rows))
        diameter = speech.say(thickness, scenario.rope[rope].diameter)
        out.append((f"rope {rope}", f"{len(rows)} lengths", f"{diameter}, {speech.say(fine_length, whole)} in all"))
    ends = Counter(end for cable in scenario.cable for end in cable.ends)
    out += [(end, str(count), "in the line of cables") for end, count in ends.items()]
    held = Counter(anchor.holdfast for anchor in scenario.anchor)
    out += [(f"holdfast {name}" if name else "anchors without a holdfast named", str(count), "") for name, count in held.items()]
    for spar in scenario.spar:
        count = "1 section" if len(spar.section) == 1 else f"{len(spar.section)} sections"
        out.append((f"spar {spar.name}", count, f"{speech.say(fine_length, spar.length)}, base {spar.base}"))
        out += [(fitting.name, "1", f"on {spar.name}, {speech.say(mass, fitting.mass)}") for fitting in spar.fitting]
    return [*out, *_tools(scenario)]


def _tools(scenario: Scenario) -> list[tuple[str, str, str]]:
    return [("watch, tape, plumb line or level, thermometer", "1 each", "to read tensions and plumb")] if scenario.cable else []


def at_temperature(found: Field, k: int, speech: Tongue) -> str:
    """A temperature of the table."""
    return speech.say(temperature, float(found.still.temperature[k]))
