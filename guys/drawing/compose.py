"""The sheet: one page with plan, elevation, table, polar figure and box, laid out from the words upward.

Words are measured first; the drawings share what is left, and plan and elevation take one scale where neither loses much by it.  Where
words leave too little room for a drawing, first the polar figure goes, then the page grows taller: nothing is cut and nothing shrinks
below its printed size.
"""

from __future__ import annotations

from dataclasses import dataclass

from matplotlib.figure import Figure

from guys.drawing import box, elevation, plan, polar, style, table
from guys.drawing.elevation import lettered_sections, numbered_fittings
from guys.drawing.lettering import fitted, plain, width, wrapped
from guys.drawing.page import PAPERS, Page, Rect, new_page
from guys.drawing.reading import View, look_bearing
from guys.drawing.rounding import Tongue, Units, angle, area, bearing, length, mass, thickness, tongue
from guys.drawing.scales import together
from guys.results import Solution
from guys.scenario import model

MARGIN = 12.0
GUTTER = 9.0
LEFT_SHARE = 0.555
PITCH = 4.2
STRIP = 8.0
KEY_MARK, KEY_GAP = 5.0, 4.0
POLAR_WIDE, POLAR_HIGH = 62.0, 66.0
LEAST_PLAN, LEAST_ELEVATION = 124.0, 100.0
SIGNED = "date _____________  pegged out by _____________  checked by _____________"
ESTIMATE = "for this mast and this dressing only"


@dataclass(frozen=True)
class Layout:
    """Where everything goes, and by how much the page had to grow."""

    head: Rect
    strip: Rect
    plan: Rect
    table: Rect
    elevation: Rect
    key: Rect
    polar: Rect | None
    box: Rect
    foot: Rect
    taller: float


def draw_sheet(solution: Solution, paper: str, look_toward: float | None, units: Units) -> Figure:
    """The whole sheet as a figure."""
    return draw_page(solution, paper, look_toward, units).figure


def draw_page(solution: Solution, paper: str, look_toward: float | None, units: Units) -> Page:
    """The whole sheet with what was placed on it."""
    speech = tongue(units)
    rows = box.entries(solution, speech)
    layout = lay_out(solution, paper, speech, rows)
    page = new_page(paper, layout.taller)
    view = View(look_bearing(solution) if look_toward is None else look_toward)
    ratios = together(
        plan.fitting_ratio(page, solution, layout.plan, speech), elevation.fitting_ratio(page, solution, layout.elevation, view)
    )
    _head(page, solution, layout.head, speech)
    _strip(page, solution, layout.strip)
    plan.draw_plan(page, solution, layout.plan, ratios[0], speech)
    table.draw_table(page, solution, layout.table, speech)
    elevation.draw_elevation(page, solution, layout.elevation, ratios[1], view, speech)
    _key(page, lay_key(solution, speech, layout.key.width), layout.key)
    if layout.polar is not None:
        polar.draw_polar(page, solution, layout.polar, speech)
    box.draw_box(page, box.laid(rows, layout.box.width), layout.box)
    _foot(page, foot_lines(solution, speech, layout.foot.width), layout.foot)
    return page


def lay_out(solution: Solution, paper: str, speech: Tongue, rows: list[box.Entry]) -> Layout:
    """Heights of all words, then the drawings' share of the page."""
    wide, high, shrink = PAPERS[paper]
    right, top = wide / shrink - MARGIN, high / shrink - MARGIN
    middle = MARGIN + (right - MARGIN) * LEFT_SHARE
    left_wide, right_wide = middle - MARGIN, right - middle - GUTTER
    foot_high = PITCH * len(foot_lines(solution, speech, right - MARGIN)) + 3.0
    head_high = 11.5 + PITCH * len(subtitle_lines(solution, right - MARGIN))
    body = top - head_high - STRIP - 3.0 - MARGIN - foot_high
    table_high = table.table_height(solution, speech, left_wide)
    key_high = PITCH * lay_key(solution, speech, right_wide).rows + 3.5
    with_polar = polar.has_polar(solution)
    box_wide = right_wide - POLAR_WIDE if with_polar else right_wide
    box_high = box.laid(rows, box_wide).height
    if with_polar and body - max(box_high, POLAR_HIGH) - key_high < LEAST_ELEVATION:
        with_polar, box_wide = False, right_wide
        box_high = box.laid(rows, box_wide).height
    low_high = max(box_high, POLAR_HIGH) if with_polar else box_high
    taller = max(0.0, LEAST_PLAN - (body - table_high - 2.0), LEAST_ELEVATION - (body - low_high - key_high))
    top += taller
    head = Rect(MARGIN, top - head_high, right, top)
    strip = Rect(MARGIN, head.bottom - STRIP, right, head.bottom)
    under, floor = strip.bottom - 3.0, MARGIN + foot_high
    start = middle + GUTTER
    low_top = floor + low_high
    return Layout(
        head, strip,
        plan=Rect(MARGIN, floor + table_high + 2.0, middle, under), table=Rect(MARGIN, floor, middle, floor + table_high),
        elevation=Rect(start, low_top + key_high, right, under), key=Rect(start, low_top, right, low_top + key_high),
        polar=Rect(start, floor, start + POLAR_WIDE - 4.0, low_top) if with_polar else None,
        box=Rect(right - box_wide, low_top - box_high, right, low_top), foot=Rect(MARGIN, MARGIN, right, floor), taller=taller,
    )  # fmt: skip


def subtitle_lines(solution: Solution, room: float) -> list[str]:
    """The user's note and what the sheet holds for."""
    note = " ".join((solution.scenario.note or "").split())
    return wrapped(f"{note} · {ESTIMATE}" if note else ESTIMATE, room - width(SIGNED, style.BODY) - 8.0, style.BODY)


def _head(page: Page, solution: Solution, zone: Rect, speech: Tongue) -> None:
    right = "anchor loads, plan and elevation"
    page.text(zone.right, zone.top - 6.5, right, style.HEADING, align="right")
    room = zone.width - width(right, style.HEADING) - 10.0
    lines = wrapped(solution.scenario.title, room, style.TITLE, bold=True)
    if len(lines) == 1:
        page.text(zone.left, zone.top - 6.5, lines[0], style.TITLE, bold=True)
    else:
        small = style.TITLE * 0.58
        for i, line in enumerate(_at_most(wrapped(solution.scenario.title, room, small, bold=True), 2, room, small)):
            page.text(zone.left, zone.top - 3.2 - 4.9 * i, line, small, bold=True)
    y = zone.top - 12.4
    page.text(zone.right, y, SIGNED, style.BODY, colour=style.GREY, align="right")
    for line in subtitle_lines(solution, zone.width):
        page.text(zone.left, y, line, style.BODY)
        y -= PITCH


def _at_most(lines: list[str], count: int, room: float, size: float) -> list[str]:
    if len(lines) <= count:
        return lines
    return [*lines[: count - 1], fitted(" ".join(lines[count - 1 :]), room, size, bold=True)]


def strip_words(solution: Solution) -> list[tuple[str, bool]]:
    """State, verdict and warnings in words, each with whether it alarms."""
    alarming = solution.failed or not {"none", "unstable", "neutral"}.isdisjoint(box.kinds(solution))
    state = box.state_summary(solution) + _of_which(solution)
    past, verdict = len(solution.past), _verdict(solution)
    count = len(dict.fromkeys([*solution.warnings, *solution.scenario.warnings]))
    warned = f"{count} WARNING{'S' if count > 1 else ''}, in the box" if count else "no warnings"
    return [(_raised(state), alarming), (_raised(verdict), past > 0), (warned, count > 0)]


def _of_which(solution: Solution) -> str:
    if "none" not in solution.state:
        return ""
    return "; loads are of the cases that stand" if set(solution.state) != {"none"} else "; there are no loads to show"


def _verdict(solution: Solution) -> str:
    if set(solution.state) == {"none"}:
        return "nothing judged: nothing stands"
    judged = sum(f.verdict != "not judged" for f in solution.findings)
    past, open_ = len(solution.past), len(solution.findings) - judged
    words = f"{past} of {judged} checks PAST the allowable" if past else f"all {judged} checks within" if judged else "nothing judged"
    return f"{words}, {open_} not judged" if open_ else words


def _raised(words: str) -> str:
    return words[0].upper() + words[1:]


def _strip(page: Page, solution: Solution, zone: Rect) -> None:
    """Three cells; one that alarms is set white on black and in capitals where it counts."""
    words = strip_words(solution)
    size = style.BODY + 1.0
    natural = [width(text, size, True) + 8.0 for text, _ in words]
    size *= min(1.0, zone.width / sum(natural))
    share = max(0.0, zone.width - sum(natural)) / len(words)
    x = zone.left
    for (text, alarming), wide in zip(words, natural, strict=True):
        end = x + (wide + share) * min(1.0, zone.width / sum(natural))
        corners = [(x, zone.bottom), (end, zone.bottom), (end, zone.top - 1.0), (x, zone.top - 1.0)]
        page.shape(corners, style.INK if alarming else None, style.INK, style.THIN)
        page.text((x + end) / 2.0, zone.bottom + 2.3, text, size, True, style.WHITE if alarming else style.INK, "centre")
        x = end


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


def _key(page: Page, key: Key, zone: Rect) -> None:
    for x, row, mark, line in key.cells:
        y = zone.top - 4.6 - PITCH * row
        page.text(zone.left + x, y, mark, style.SMALL, bold=True)
        page.text(zone.left + x + KEY_MARK, y, line, style.SMALL)


def foot_lines(solution: Solution, speech: Tongue, room: float) -> list[tuple[str, str]]:
    """The cautions, then the small print; each line with its colour."""
    cautions = " · ".join(caution.rstrip(".") for caution in solution.cautions)
    lines = [(line, style.INK) for line in wrapped(cautions, room, style.SMALL)]
    return lines + [(line, style.GREY) for line in wrapped(box.small_print(solution, speech), room, box.SIZE)]


def _foot(page: Page, lines: list[tuple[str, str]], zone: Rect) -> None:
    page.line([(zone.left, zone.top - 1.2), (zone.right, zone.top - 1.2)], style.INK, style.THIN)
    y = zone.top - 5.2
    for line, colour in lines:
        page.text(zone.left, y, line, style.SMALL if colour == style.INK else box.SIZE, colour=colour)
        y -= PITCH
