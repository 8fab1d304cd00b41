"""The one list that the letters and numbers of the elevation are keyed to: sections by letter, fittings by number."""

from __future__ import annotations

from dataclasses import dataclass

from guys.drawing import style
from guys.drawing.lettering import plain, width, wrapped
from guys.drawing.page import Page, Rect
from guys.drawing.rounding import Tongue, angle, area, bearing, length, mass, thickness
from guys.results import Solution
from guys.scenario import model

KEY_MARK, KEY_GAP = 5.0, 4.0


def lettered_sections(solution: Solution) -> list[tuple[str, model.Spar, int, model.Section]]:
    """(letter, spar, index, section); alike sections of one spar share a letter."""
    letters: dict[tuple[str, str], str] = {}
    rows = []
    for spar in solution.scenario.spar:
        for i, section in enumerate(spar.section):
            letter = letters.setdefault((spar.name, repr(section)), _letter(len(letters)))
            rows.append((letter, spar, i, section))
    return rows


def _letter(index: int) -> str:
    return chr(65 + index) if index < 26 else _letter(index // 26 - 1) + _letter(index % 26)


def numbered_fittings(solution: Solution) -> list[tuple[str, model.Spar, model.Fitting]]:
    """(number, spar, fitting) from the foot up, spar by spar."""
    pairs = [(spar, fitting) for spar in solution.scenario.spar for fitting in sorted(spar.fitting, key=lambda f: f.at)]
    return [(str(i + 1), spar, fitting) for i, (spar, fitting) in enumerate(pairs)]


@dataclass(frozen=True)
class Key:
    """Sections by letter over the whole width, fittings by number in columns: (x, row, mark, line)."""

    cells: tuple[tuple[float, int, str, str], ...]
    rows: int


def lay_key(solution: Solution, speech: Tongue, room: float) -> Key:
    """What the letters and numbers of the elevation stand for."""
    alike: dict[str, tuple[model.Spar, model.Section, int]] = {}
    for letter, spar, _, section in lettered_sections(solution):
        alike[letter] = (spar, section, alike[letter][2] + 1 if letter in alike else 1)
    sections = _in_columns([(letter, _section_words(*found, speech)) for letter, found in alike.items()], room)
    fittings = _in_columns([(n, _fitting_words(fitting, speech)) for n, _, fitting in numbered_fittings(solution)], room)
    shifted = tuple((x, row + sections.rows, mark, line) for x, row, mark, line in fittings.cells)
    return Key(sections.cells + shifted, sections.rows + fittings.rows)


def _in_columns(items: list[tuple[str, str]], room: float) -> Key:
    """Items down as many columns as hold their words on one line; one column of wrapped words where they are long."""
    widest = max((width(plain(words), style.SMALL) for _, words in items), default=0.0) + KEY_MARK
    columns = int(min(max(1.0, (room + KEY_GAP) // (widest + KEY_GAP)), 4.0))
    wide = (room - KEY_GAP * (columns - 1)) / columns
    broken = [(mark, line) for mark, words in items for mark, line in _marked(mark, wrapped(words, wide - KEY_MARK, style.SMALL))]
    rows = -(-len(broken) // columns)
    return Key(tuple((i // rows * (wide + KEY_GAP), i % rows, mark, line) for i, (mark, line) in enumerate(broken)), rows)


def _marked(mark: str, lines: list[str]) -> list[tuple[str, str]]:
    return [(mark if i == 0 else "", line) for i, line in enumerate(lines)]


def _section_words(spar: model.Spar, section: model.Section, count: int, speech: Tongue) -> str:
    times = f"{count} × " if count > 1 else ""
    words = f"{spar.name}: {times}{speech.say(length, section.length)}"
    if section.tube is not None:
        size = f"{speech.say(thickness, section.tube.diameter)} × {speech.say(thickness, section.tube.wall)}"
        words += f" tube {size}, {section.material or ''}".rstrip(", ")
    if section.lattice is not None:
        legs = section.lattice.legs
        bar = speech.say(thickness, legs.diameter) + (f" × {speech.say(thickness, legs.wall)}" if legs.wall < legs.diameter / 2 else "")
        face = speech.say(thickness, section.lattice.face)
        words += f" lattice of {section.lattice.sides} legs {bar}, face {face}, {section.material or ''}"
    return words + (f", leaning {angle(spar.lean)} toward {bearing(spar.toward)}" if spar.lean else "")


def _fitting_words(fitting: model.Fitting, speech: Tongue) -> str:
    parts = [fitting.name, f"at {speech.say(length, fitting.at)}"]
    if fitting.mass:
        parts.append(speech.say(mass, fitting.mass))
    if fitting.area:
        parts.append(speech.say(area, fitting.area))
    if fitting.shape == "flat" and fitting.face is not None:
        parts.append(f"face {bearing(fitting.face)}")
    return " ".join([parts[0], ", ".join(parts[1:])])


def draw_key(page: Page, key: Key, zone: Rect) -> None:
    """Set the list from the top of its zone down."""
    for x, row, mark, line in key.cells:
        y = zone.top - 4.6 - style.ROW * row
        page.text(zone.left + x, y, mark, style.SMALL, bold=True)
        page.text(zone.left + x + KEY_MARK, y, line, style.SMALL)
