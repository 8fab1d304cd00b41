"""The calculation record: one page that a checking engineer can follow, repeat and sign.

    inputs    `question`, `assumptions`       answers   `every_case`, `judged`       page   `figures`, `page`, `pdf`

Everything is written from a `Recorded`; nothing is computed but changes in per cent and numbers of formulas.  Numbers are looked up by
their key in `record.json`, so that page and file cannot differ.
"""

from guys.record.page import html

__all__ = ["html"]
