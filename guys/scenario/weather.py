"""Rules on what wind, ice and temperature need: what a load case asks for must be there, since bare or calm would be unsafe."""

from __future__ import annotations

from collections.abc import Iterator

from guys.catalogue import ropes as stock
from guys.scenario import wind_rules
from guys.scenario.document import CaseEntry
from guys.scenario.draft import Draft
from guys.scenario.keys import Finding, Key, clipped, items
from guys.scenario.model import Fitting, Section

NO_SHAPE = "it cannot be chosen, since the shape is not known"


def findings(draft: Draft) -> Iterator[Finding]:
    """Every lack of wind, ice and temperature."""
    windy = _first(draft, "wind") or _raised(draft)
    icy = _first(draft, "ice")
    if windy and "wind" not in draft.document:
        yield Finding(("wind",), f'missing; case "{clipped(windy.name)}" has wind = {windy.wind:g}; give [wind], or wind = 0 in every case')
    if icy and "ice" not in draft.document:
        yield Finding(("ice",), f'missing; case "{clipped(icy.name)}" has ice = {icy.ice:g}; give [ice]')
    yield from wind_rules.findings(draft)
    for index, spar in enumerate(draft.spar):
        for place, section in enumerate(spar.section if spar else ()):
            yield from _section(section, ("spar", index, "section", place), windy, icy)
        for place, fitting in enumerate(spar.fitting if spar else ()):
            yield from _fitting(fitting, ("spar", index, "fitting", place), windy, icy)
    yield from _ropes(draft)


def used_ropes(draft: Draft) -> set[str]:
    """The ropes some cable is made of, be the rest of its table readable or not."""
    named = [item.get("rope") for kind in ("guy_level", "cable") for _, item in items(draft.document, kind)]
    return {name for name in named if isinstance(name, str)}


def warmed(draft: Draft) -> CaseEntry | None:
    """The first case whose temperature is not that of the setting."""
    if draft.setting is None:
        return None
    at = draft.setting.temperature
    return next((case for case in draft.cases() if case.temperature is not None and case.temperature != at), None)


def _first(draft: Draft, factor: str) -> CaseEntry | None:
    return next((case for case in draft.cases() if getattr(case, factor) > 0.0), None)


def _raised(draft: Draft) -> CaseEntry | None:
    """The raising, which is in the wind wherever the file has one."""
    return CaseEntry(name="raise") if "wind" in draft.document and draft.raising is not None else None


def _section(section: Section, key: Key, windy: CaseEntry | None, icy: CaseEntry | None) -> Iterator[Finding]:
    outright = section.tube is None and section.lattice is None
    shape = ((*key, "tube"), (*key, "lattice"))
    if windy and section.drag is None and outright and section.shape is None:
        text = f"missing; {_has(windy, 'wind')}; give drag, or shape; {NO_SHAPE}"
        yield Finding((*key, "drag"), text, (*shape, (*key, "shape")))
    if windy and outright and section.width is None and section.shape is None:
        yield Finding((*key, "width"), f'missing; {_has(windy, "wind")}; give width, such as width = "100 mm"', shape)
    for name in ("iced_mass", "iced_width"):
        if icy and outright and getattr(section, name) is None:
            yield Finding((*key, name), f"missing; {_has(icy, 'ice')}, and a section given outright needs it", shape)


def _fitting(fitting: Fitting, key: Key, windy: CaseEntry | None, icy: CaseEntry | None) -> Iterator[Finding]:
    if windy and fitting.drag is None:
        yield from _drag(fitting, key, windy)
    no_area = fitting.area is None and (fitting.width is None or fitting.height is None)
    if icy and not (no_area and fitting.mass == 0.0):
        wanted = ("iced_mass",) if no_area else ("iced_mass", "iced_area")
        causes = ((*key, "area"), (*key, "mass"))
        yield from (Finding((*key, name), f"missing; {_has(icy, 'ice')}", causes) for name in wanted if getattr(fitting, name) is None)


def _drag(fitting: Fitting, key: Key, windy: CaseEntry) -> Iterator[Finding]:
    """What is lacking for a coefficient chosen from the shape."""
    if fitting.shape == "any" and fitting.area is not None:
        yield Finding((*key, "drag"), f"missing; {_has(windy, 'wind')}; give drag; {NO_SHAPE}", ((*key, "shape"),))
    for name in ("width", "height") if fitting.shape != "any" else ():
        if getattr(fitting, name) is None:
            text = f"missing; {_has(windy, 'wind')} and no drag is given; the coefficient chosen from the shape needs {name}"
            yield Finding((*key, name), text, ((*key, "shape"), (*key, "drag")))


def _has(case: CaseEntry, what: str) -> str:
    return f'case "{clipped(case.name)}" has {what}'


def _ropes(draft: Draft) -> Iterator[Finding]:
    used = used_ropes(draft)
    yield from _stock_ropes(draft)
    warm = warmed(draft)
    for name, rope in draft.rope.items():
        key: Key = ("rope", name)
        if rope is None:
            continue
        given = [each for each in ("stiffness", "modulus", "metal_area") if getattr(rope, each) is not None]
        if given not in (["stiffness"], ["modulus", "metal_area"]):
            got = f"has {' and '.join(given)}" if given else "has no stiffness"
            yield Finding(key, f"{got}; give stiffness, or modulus and metal_area")
        if name in used and warm and rope.expansion is None:
            text = f'missing; case "{clipped(warm.name)}" is not at the setting\'s temperature; give expansion, such as "12e-6 1/K"'
            yield Finding((*key, "expansion"), text, (("setting",), ("case",)))


def _stock_ropes(draft: Draft) -> Iterator[Finding]:
    """Catalogue ropes whose expansion is not known, where a case asks for it."""
    warm = warmed(draft)
    for kind in ("guy_level", "cable") if warm else ():
        for index, item in items(draft.document, kind):
            name = item.get("rope")
            found = stock.find(name) if isinstance(name, str) and name not in draft.rope else None
            if warm and found is not None and found.expansion is None:
                text = f'no thermal expansion of "{name}" is known, and case "{clipped(warm.name)}" is not at the setting\'s temperature'
                yield Finding((kind, index, "rope"), f"{text}; give a [rope.NAME] with expansion", (("setting",), ("case",)))
