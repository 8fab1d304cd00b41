"""Figures written to files: the same bytes for the same result, replaced whole or not at all."""

from __future__ import annotations

from contextlib import ExitStack
from io import BytesIO, StringIO
from pathlib import Path
from typing import Any

import matplotlib
from matplotlib.figure import Figure

from guys.drawing.style import DRAWING_RULES
from guys.exchange.files import replaced

PIXELS_PER_INCH = 130


def _metadata(kind: str, title: str, version: str) -> dict[str, Any]:
    """What the file says of itself; no date, so that equal results give equal files."""
    maker = f"guys {version}"
    return {
        "pdf": {"Title": title, "Creator": maker, "CreationDate": None},
        "svg": {"Title": title, "Creator": maker, "Date": None},
        "png": {"Title": title, "Software": maker},
    }[kind]


def figure_bytes(figure: Figure, kind: str, title: str, version: str) -> bytes:
    """The figure as a PDF, SVG or PNG."""
    into = BytesIO()
    with matplotlib.rc_context(DRAWING_RULES):
        figure.savefig(into, format=kind, dpi=PIXELS_PER_INCH if kind == "png" else 72, metadata=_metadata(kind, title, version))
    return into.getvalue()


def svg_text(figure: Figure, title: str, version: str) -> str:
    """The figure as SVG text."""
    into = StringIO()
    with matplotlib.rc_context(DRAWING_RULES):
        figure.savefig(into, format="svg", dpi=72, metadata=_metadata("svg", title, version))
    return into.getvalue()


def write_figure(figure: Figure, directory: Path, stem: str, title: str, version: str) -> tuple[Path, ...]:
    """Write `stem`.pdf, .svg and .png into a directory: all drawn and stored before the first is renamed into place."""
    paths = tuple(directory / f"{stem}.{kind}" for kind in ("pdf", "svg", "png"))
    with ExitStack() as stack:
        places = [stack.enter_context(replaced(path)) for path in paths]
        for path, place in zip(paths, places, strict=True):
            place.write_bytes(figure_bytes(figure, path.suffix[1:], title, version))
    return paths
