"""Key paths of a scenario file, and where in its text they stand.

A key is a tuple such as ``("guy_level", 0, "at")``, written ``guy_level[0].at``.  Lines and columns are looked up only when there is a
fault to report: the text is then read a second time by a parser that keeps the place of every key.
"""

from __future__ import annotations

import re
from bisect import bisect_left
from collections.abc import Callable, Iterable, Iterator, Mapping
from dataclasses import dataclass
from difflib import get_close_matches
from functools import cache
from itertools import islice
from typing import Any

Key = tuple[str | int, ...]
_BARE = re.compile(r"[A-Za-z0-9_-]+")
_LONGEST_NAME = 60
_MOST_COMPARED = 500


@dataclass(frozen=True)
class Finding:
    """Something wrong at a key.

    It is left unsaid where the value at one of `after`, or below it or the key itself, is already found wrong: it may be no more than a
    consequence.
    """

    key: Key
    message: str
    after: tuple[Key, ...] = ()


def independent(findings: Iterable[Finding], broken: Iterable[Finding]) -> list[Finding]:
    """The findings that do not follow from those in `broken`."""
    wrong = {finding.key[:length] for finding in broken for length in range(1, len(finding.key) + 1)}
    return [finding for finding in findings if wrong.isdisjoint((finding.key, *finding.after))]


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


def nearest(name: str, known: Iterable[str]) -> str:
    """What to say after an unknown name: the nearest known one, or all of them where they are few."""
    known = list(islice(known, _MOST_COMPARED))
    folded = {choice.lower(): choice for choice in reversed(known)}
    near = get_close_matches(clipped(name).lower(), list(folded), 1, 0.6)
    if near:
        return f'; did you mean "{clipped(folded[near[0]])}"?'
    if 0 < len(known) <= 24:
        return "; known: " + ", ".join(clipped(choice) for choice in known)
    return ""


def without(node: Any, key: Key) -> Any:
    """A copy of nested tables and lists in which the last part of the key is gone."""
    head, rest = key[0], key[1:]
    if isinstance(node, list) and isinstance(head, int):
        return [without(item, rest) if index == head else item for index, item in enumerate(node)]
    if isinstance(node, dict) and head in node:
        if not rest:
            return {name: value for name, value in node.items() if name != head}
        return {name: without(value, rest) if name == head else value for name, value in node.items()}
    return node


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
    breaks = [match.start() for match in re.finditer("\n", source)]
    children = cache(_children)

    def place(key: Key) -> tuple[int, int]:
        offset, node = 0, root
        for part in key:
            step = None if node is None else children(node).get(part)
            if step is None:
                break
            own, node = step
            offset = _header(source, node, offset) if own is None else own
        line = bisect_left(breaks, offset)
        return line + 1, offset - (breaks[line - 1] if line else -1)

    return place


def _spanned(source: str) -> Any:
    import spanned_toml

    try:
        return _Node(spanned_toml.loads(source))
    except (ValueError, RecursionError):
        return None


@dataclass(frozen=True, eq=False)
class _Node:
    """A value with its place; compared by identity, so that what is worked out for it can be kept."""

    spanned: Any


def _children(node: _Node) -> dict[str | int, tuple[int | None, _Node]]:
    """Each key or index of a table or list, with where its key begins and its value."""
    inner = node.spanned.inner()
    if isinstance(inner, list):
        return {index: (None, _Node(item)) for index, item in enumerate(inner)}
    if isinstance(inner, dict):
        return {name.inner(): (name.span().start, _Node(value)) for name, value in inner.items()}
    return {}


def _header(source: str, node: _Node, above: int) -> int:
    """Where an item of a list begins: at its own place, or at the header above its first key."""
    if node.spanned.span().stop > 0:
        return int(node.spanned.span().start)
    inner = node.spanned.inner()
    first = min((name.span().start for name in inner), default=None) if isinstance(inner, dict) else None
    return above if first is None else source.rfind("\n[", 0, first) + 1
