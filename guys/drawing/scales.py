"""Round scales: the ratio of a drawing, and bars of round length to measure it by."""

from __future__ import annotations

from math import floor, isfinite, log10

from guys.drawing import style
from guys.drawing.page import Page
from guys.drawing.rounding import INCH, POUND_FORCE, System, Tongue

RATIO_STEPS = (1.0, 1.25, 1.5, 2.0, 2.5, 3.0, 4.0, 5.0, 6.0, 7.5, 8.0, 10.0)
BAR_STEPS = (1.0, 2.0, 5.0, 10.0)
SAME_SCALE_LIMIT = 1.7
"""Plan and elevation share a scale unless that shrinks one of them by more than this."""
_FIT_NOISE = 1e-9


def round_ratio(least: float) -> float:
    """The next round ratio not under `least` (1:100, 1:125, 1:150 ...)."""
    if not isfinite(least) or least <= 0.0:
        return 1.0
    decade = 10.0 ** floor(log10(least))
    return next(decade * s for s in RATIO_STEPS if decade * s >= least * (1.0 - _FIT_NOISE))


def ratio_to_fit(metres: tuple[float, float], room: tuple[float, float], shrink: float) -> float:
    """Smallest round ratio at which a thing of `metres` (across, up) fits `room` in design millimetres."""
    return round_ratio(max(1000.0 * m / (r * shrink) for m, r in zip(metres, room, strict=True)))


def together(one: float, two: float) -> tuple[float, float]:
    """The common ratio of two drawings where neither loses too much, else each its own."""
    common = max(one, two)
    return (common, common) if common <= SAME_SCALE_LIMIT * min(one, two) else (one, two)


def ratio_text(ratio: float) -> str:
    """The ratio as written."""
    return f"1:{ratio:.4g}" if ratio < 1e4 else f"1:{ratio:.0f}"


def round_below(limit: float) -> float:
    """The greatest of 1, 2, 5 times a power of ten that does not pass `limit`."""
    decade = 10.0 ** floor(log10(limit))
    return max(decade * s for s in BAR_STEPS if decade * s <= limit * (1.0 + _FIT_NOISE))


def length_bar(page: Page, x: float, y: float, per_metre: float, longest: float, system: System) -> float:
    """A bar of four black and white fields, x its left end; returns its right end, words included [mm]."""
    unit, name = (1.0, "m") if system == "SI" else (12.0 * INCH, "ft")
    total = round_below(longest / (per_metre * unit))
    long = total * unit * per_metre
    for i in range(4):
        a, b = x + long * i / 4.0, x + long * (i + 1) / 4.0
        page.shape([(a, y), (b, y), (b, y + 1.4), (a, y + 1.4)], style.INK if i % 2 == 0 else style.WHITE, style.INK, 0.6)
    size = style.SMALL
    page.text(x, y - 3.6, "0", size, align="left")
    page.text(x + long / 2.0, y - 3.6, f"{total / 2.0:g}", size, align="centre")
    end = page.text(x + long - 1.0, y - 3.6, f"{total:g} {name}", size)
    return x + long - 1.0 + end


def load_bar(page: Page, x: float, y: float, per_newton: float, longest: float, tongue: Tongue) -> float:
    """A bar of a round force in the colour and weight of the anchors' bars; returns its right end, words included [mm]."""
    system = tongue.systems[0]
    unit, name = (1.0, "N") if system == "SI" else (POUND_FORCE, "lbf")
    total = round_below(longest / (per_newton * unit))
    if system == "SI" and total >= 1000.0:
        unit, name, total = 1000.0, "kN", total / 1000.0
    long = total * unit * per_newton
    page.line([(x, y + 0.7), (x + long, y + 0.7)], style.LOAD, style.BAR, butt=True)
    words = f"bar or ring radius {total:g} {name}"
    return x + max(long, page.text(x, y - 3.6, words, style.SMALL, colour=style.LOAD))
