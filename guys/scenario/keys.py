"""Key paths of a scenario file, and where in its text they stand.

A key is a tuple such as ``("guy_level", 0, "at")``, written ``guy_level[0].at``.  Lines and columns are looked up only when there is a
fault to report: the text is then read a second time by a parser that keeps the place of every key.
"""

from __future__ import annotations

import re
from collections.abc import Callable, Iterator, Mapping
from dataclasses import dataclass
from difflib import get_close_matches
from typing import Any

Key = tuple[str | int, ...]
_BARE = re.compile(r"[A-Za-z0-9_-]+")
_LONGEST_NAME = 60


@dataclass(frozen=True)
class Finding:
    """Something wrong at a key.  It is left unsaid where the value at one of `after`, or below the key itself, is already found wrong."""

    key: Key
    message: str
    after: tuple[Key, ...] = ()

    def follows_from(self, broken: Key) -> bool:
        """Whether it may be no more than a consequence of another finding at `broken`."""
        return any(broken[: len(cause)] == cause for cause in (self.key, *self.after))


def written(key: Key) -> str:
    """The key as a message names it."""
    text = ""
    for part in key:
        if isinstance(part, int):
            text += f"[{part}]"
        else:
            text += ("." if text else "") + (part if _BARE.fullmatch(part) else f'"{clipped(part)}"')
    return text


def clipped(text: str) -> str:
    """A name on one line and not longer than a message can bear."""
    line = text.encode("unicode_escape").decode("ascii") if not text.isprintable() else text
    return line if len(line) <= _LONGEST_NAME else line[: _LONGEST_NAME - 3] + "..."


def nearest(name: str, known: list[str] | tuple[str, ...]) -> str:
    """What to say after an unknown name: the nearest known one, or all of them where they are few."""
    folded = {choice.lower(): choice for choice in reversed(known)}
    near = get_close_matches(clipped(name).lower(), list(folded), 1, 0.6)
    if near:
        return f'; did you mean "{clipped(folded[near[0]])}"?'
    if 0 < len(known) <= 24:
        return "; known: " + ", ".join(clipped(choice) for choice in known)
    return ""


def items(document: Mapping[str, Any], kind: str) -> Iterator[tuple[int, Mapping[str, Any]]]:
    """The tables of an array of tables as read, with their index; whatever else stands there is passed over."""
    found = document.get(kind)
    for index, item in enumerate(found if isinstance(found, list) else ()):
        if isinstance(item, dict):
            yield index, item


def placer(text: str) -> Callable[[Key], tuple[int, int]]:
    """A function giving line and column, from 1, of a key: of itself, or of the nearest table above it that is there."""
    source = text.replace("\r\n", "\n")
    root = _spanned(source)

    def place(key: Key) -> tuple[int, int]:
        offset, node = 0, root
        for part in key:
            step = _child(node, part)
            if step is None:
                break
            span, node = step
            offset = _first(source, span, node)
        return source.count("\n", 0, offset) + 1, offset - (source.rfind("\n", 0, offset) + 1) + 1

    return place


def _spanned(source: str) -> Any:
    import spanned_toml

    try:
        return spanned_toml.loads(source)
    except (ValueError, RecursionError):
        return None


def _child(node: Any, part: str | int) -> tuple[int | None, Any] | None:
    inner = None if node is None else node.inner()
    if isinstance(part, int):
        return (None, inner[part]) if isinstance(inner, list) and part < len(inner) else None
    if isinstance(inner, dict):
        for name, value in inner.items():
            if name.inner() == part:
                return name.span().start, value
    return None


def _first(source: str, span: int | None, node: Any) -> int:
    """Where an item begins: its key; for an item of a list its own place, or the header above the first key in it."""
    if span is not None:
        return span
    if node.span().stop > 0:
        return int(node.span().start)
    starts = _starts(node)
    return max(source.rfind("\n[", 0, starts) + 1, 0) if starts is not None else 0


def _starts(node: Any) -> int | None:
    inner = node.inner()
    return min((name.span().start for name in inner), default=None) if isinstance(inner, dict) else None
