"""Figures of the record, drawn by the sheet's own drawings and set into the page as SVG.

An SVG is made fit for a page of a strict content policy: no metadata, no style but attributes, no reference out of the page, and names of
its parts with a prefix of the figure, since those of all figures live in one page.
"""

from __future__ import annotations

import re
from typing import TYPE_CHECKING
from xml.etree import ElementTree

from guys.drawing import elevation, plan, polar
from guys.drawing.files import svg_text
from guys.drawing.key import draw_key, lay_key
from guys.drawing.page import Page, Rect, figure_page
from guys.drawing.reading import View, dropping, look_bearing, stands
from guys.drawing.rounding import bearing
from guys.drawing.style import ROW
from guys.record.blocks import Figure
from guys.record.source import Source

if TYPE_CHECKING:
    from matplotlib.figure import Figure as Drawing

WIDE = 180.0
"""[mm] width of a figure on A4 between margins of 15 mm."""
PLAN, ELEVATION = 150.0, 125.0
POLAR = 105.0
SVG = "{http://www.w3.org/2000/svg}"
LINK = "{http://www.w3.org/1999/xlink}href"
DROPPED = {"metadata", "style", "title"}


def drawn(source: Source) -> tuple[Figure, ...]:
    """Plan and elevation."""
    return _plan(source), _elevation(source)


def around(source: Source) -> tuple[Figure, ...]:
    """The polar figure, where there was a full circle of winds."""
    solution = source.solution
    if not polar.has_polar(solution):
        return ()
    page = figure_page(WIDE, POLAR)
    polar.draw_polar(page, solution, Rect(2.0, 2.0, WIDE - 2.0, POLAR - 2.0), source.tongue)
    shows = (
        "A circle of winds, north up. The heavy line is the greatest pull of any anchor when the wind comes from that bearing, thin lines "
        "are the anchors; the anchor that governs a sector is named on the rim. The greatest of each anchor stands in the tables."
    )
    return (Figure("Greatest anchor pull against the bearing of the wind", shows, inline(page, "polar")),)


def _plan(source: Source) -> Figure:
    solution = source.solution
    page = figure_page(WIDE, PLAN)
    zone = Rect(2.0, 2.0, WIDE - 2.0, PLAN - 2.0)
    plan.draw_plan(page, solution, zone, plan.fitting_ratio(page, solution, zone, source.tongue), source.tongue)
    drops = [name for name, drop in zip(solution.cables.name, dropping(solution), strict=True) if drop]
    shows = (
        f"The site from above, north up, with its spars, {len(solution.anchors.name)} anchors and {len(solution.cables.name)} cables. "
        f"At each anchor a bar for the greatest horizontal pull and a ring for the greatest uplift, to "
        f"one scale. Dashed, because they drop in some case or wind: {', '.join(drops) or 'none'}."
    )
    return Figure("Plan", shows, inline(page, "plan"))


def _elevation(source: Source) -> Figure:
    solution = source.solution
    key = lay_key(solution, source.tongue, WIDE - 4.0)
    below = ROW * key.rows + 5.0
    page = figure_page(WIDE, ELEVATION + below)
    view = View(look_bearing(solution))
    zone = Rect(2.0, below, WIDE - 2.0, ELEVATION + below - 2.0)
    elevation.draw_elevation(page, solution, zone, elevation.fitting_ratio(page, solution, zone, view), view, source.tongue)
    draw_key(page, key, Rect(2.0, 2.0, WIDE - 2.0, below))
    how = "as it hangs in still air" if stands(solution) else "as drawn, since it does not stand in still air"
    shows = (
        f"The structure from the side, looking toward {bearing(view.toward)}, {how}: spars with their sections as lettered brackets, "
        "fittings as numbered flags, cables with their angle from the ground at the anchors, and the levels of what they are made fast to."
    )
    return Figure("Elevation", shows, inline(page, "elevation"))


def inline(page: Page, prefix: str) -> str:
    """The drawing as an SVG to stand in a page."""
    return _inline(page.figure, prefix)


def _inline(figure: Drawing, prefix: str) -> str:
    root = ElementTree.fromstring(svg_text(figure, "", ""))
    _strip(root, prefix, _wanted(root))
    for name in ("width", "height", "version"):
        root.attrib.pop(name, None)
    root.set("aria-hidden", "true")
    root.set("focusable", "false")
    return ElementTree.tostring(root, encoding="unicode", short_empty_elements=True)


def _wanted(root: ElementTree.Element) -> set[str]:
    """Names that some part of the drawing points to; no other needs one."""
    values = [value for node in root.iter() for name, value in node.attrib.items() if name != "id"]
    return {name for value in values for name in re.findall(r"#([\w.-]+)", value)}


def _strip(node: ElementTree.Element, prefix: str, wanted: set[str]) -> None:
    for child in list(node):
        if child.tag.removeprefix(SVG) in DROPPED:
            node.remove(child)
        else:
            _strip(child, prefix, wanted)
    node.tag = node.tag.removeprefix(SVG)
    attributes = {name: value for name, value in node.attrib.items() if name != "id" or value in wanted}
    node.attrib.clear()
    for declaration in filter(None, (d.strip() for d in attributes.pop("style", "").split(";"))):
        name, _, value = declaration.partition(":")
        attributes[name.strip()] = value.strip()
    for name, value in attributes.items():
        node.set("href" if name == LINK else name, _named(name, value, prefix))


def _named(attribute: str, value: str, prefix: str) -> str:
    if attribute == "id":
        return f"{prefix}-{value}"
    if attribute == LINK:
        return f"#{prefix}-{value.removeprefix('#')}"
    return re.sub(r"url\(#", f"url(#{prefix}-", value)
