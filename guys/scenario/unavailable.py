"""What the format holds and this version does not do: refused by name, never passed over and never called unknown."""

from __future__ import annotations

from collections.abc import Iterator
from typing import Any

from guys.scenario.keys import Finding, Key

NOT_AVAILABLE = "not available in this version"

_EVERY = "*"
_PATTERNS: tuple[tuple[tuple[str, ...], str], ...] = (
    (("raise",), ""),
)


def sweep(document: dict[str, Any]) -> tuple[dict[str, Any], list[Finding]]:
    """The document without what is not available, and a finding for each."""
    found = [Finding(key, NOT_AVAILABLE + hint) for pattern, hint in _PATTERNS for key in _matches(document, pattern)]
    for finding in found:
        document = without(document, finding.key)
    return document, found


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


def _matches(node: Any, pattern: tuple[str, ...]) -> Iterator[Key]:
    if not pattern:
        yield ()
    elif pattern[0] == _EVERY:
        for index, item in enumerate(node if isinstance(node, list) else ()):
            yield from ((index, *rest) for rest in _matches(item, pattern[1:]))
    elif isinstance(node, dict) and pattern[0] in node:
        yield from ((pattern[0], *rest) for rest in _matches(node[pattern[0]], pattern[1:]))
