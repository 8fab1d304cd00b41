"""How a value came here: `read`, `worked out` of what was read, `from memory`; the latter also of one quantity among others.

In a table the column `known` begins with one of the three and may go on: ``read; mass from memory``.
"""

from __future__ import annotations

READ, WORKED_OUT, FROM_MEMORY = "read", "worked out", "from memory"
MARKS = (READ, WORKED_OUT, FROM_MEMORY)


def of_memory(known: str) -> str | None:
    """What of an entry is from memory, in words; None where nothing is."""
    if known == FROM_MEMORY:
        return "values from memory"
    parts = [part.strip() for part in known.split(";") if part.strip().endswith(FROM_MEMORY)]
    return "; ".join(parts) or None
