"""The strip under the title: does it stand, is it within, is there anything to be warned of; in words, white on black where it alarms."""

from __future__ import annotations

from guys.drawing import style
from guys.drawing.lettering import width
from guys.drawing.page import Page, Rect
from guys.results import Solution

KINDS = {
    "failed": "SOLVER FAILED (report it)",
    "none": "NO EQUILIBRIUM (falls)",
    "unstable": "UNSTABLE",
    "neutral": "NEUTRAL (free to move)",
    "spins": "free to spin about its own axis",
    "stable": "stable",
}
"""How a case ended, gravest first."""


def kinds(solution: Solution) -> list[str]:
    """(case,) how each case ended; a neutral one that counts as standing only spins."""
    settled = [not u for u in solution.unsettled] or [False] * len(solution.state)
    return ["spins" if s == "neutral" and ok else s for s, ok in zip(solution.state, settled, strict=True)]


def state_summary(solution: Solution) -> str:
    """How many cases found an equilibrium of which kind, in words."""
    ended = kinds(solution)
    if not solution.failed and all(kind == "stable" for kind in ended):
        return f"stable in all {len(ended)} cases and winds"
    words = [f"{word} in {ended.count(kind)} of {len(ended)}" for kind, word in KINDS.items() if kind in ended]
    return ", ".join([KINDS["failed"], *words] if solution.failed else words)


def strip_words(solution: Solution) -> list[tuple[str, bool]]:
    """State, verdict and warnings in words, each with whether it alarms."""
    alarming = solution.failed or not {"none", "unstable", "neutral"}.isdisjoint(kinds(solution))
    state = state_summary(solution) + _of_which(solution)
    past, judged = len(solution.past), verdict(solution)
    count = len(dict.fromkeys([*solution.warnings, *solution.scenario.warnings]))
    warned = f"{count} WARNING{'S' if count > 1 else ''}, in the box" if count else "no warnings"
    return [(_raised(state), alarming), (_raised(judged), past > 0), (warned, count > 0)]


def _of_which(solution: Solution) -> str:
    if set(solution.state) == {"none"}:
        return "; there are no loads to show"
    if not standing(solution):
        return "; loads are of an equilibrium that does not hold"
    return "; loads are of the cases that stand" if "none" in solution.state else ""


def standing(solution: Solution) -> bool:
    """Does any case stand."""
    return not {"stable", "spins"}.isdisjoint(kinds(solution))


def verdict(solution: Solution) -> str:
    """How many checks are within, past, not judged, in words."""
    if not standing(solution):
        return "nothing judged: nothing stands"
    judged = sum(f.verdict != "not judged" for f in solution.findings)
    past, open_ = len(solution.past), len(solution.findings) - judged
    checks = f"{judged} check{'s' if judged != 1 else ''}"
    words = f"{past} of {checks} PAST the allowable" if past else f"{'all ' if judged > 1 else ''}{checks} within" if judged else ""
    if words and any(solution.unsettled):
        words = f"of the cases that stand: {words}"
    return ", ".join(w for w in (words, f"{open_} not judged" if open_ else "") if w) or "nothing to judge"


def _raised(words: str) -> str:
    return words[0].upper() + words[1:]


def draw_strip(page: Page, solution: Solution, zone: Rect) -> None:
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
