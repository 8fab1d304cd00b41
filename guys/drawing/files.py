"""Figures written to files: the same bytes for the same result, replaced whole or not at all."""

from __future__ import annotations

from contextlib import ExitStack
from io import BytesIO
from pathlib import Path
from typing import TYPE_CHECKING, Any

from guys.drawing.style import DRAWING_RULES
from guys.exchange.files import replaced

if TYPE_CHECKING:
    from matplotlib.figure import Figure

PIXELS_ACROSS = 2150.0
"""Of the picture; 130 to the inch on A3, at which 9 pt is legible on a screen."""
PACKED = 3
"""How hard a picture is compressed, 1 to 9: line drawings come out no larger than at 6, in two thirds of the time."""


def _metadata(kind: str, title: str, version: str) -> dict[str, str | None]:
    """What the file says of itself; no date, so that equal results give equal files."""
    maker = f"guys {version}"
    if kind == "png":
        return {"Title": title, "Software": maker}
    return {"Title": title, "Creator": maker, "CreationDate" if kind == "pdf" else "Date": None}


def figure_bytes(figure: Figure, kind: str, title: str, version: str) -> bytes:
    """The figure as a PDF, SVG or PNG."""
    import matplotlib

    into = BytesIO()
    dots = PIXELS_ACROSS / float(figure.get_size_inches()[0]) if kind == "png" else 72.0
    with matplotlib.rc_context(dict(DRAWING_RULES)):  # type: ignore[arg-type]
        packing: dict[str, Any] = {"pil_kwargs": {"compress_level": PACKED}} if kind == "png" else {}
        figure.savefig(into, format=kind, dpi=dots, metadata=_metadata(kind, title, version), **packing)
    return into.getvalue()


def svg_text(figure: Figure, title: str, version: str) -> str:
    """The figure as SVG text."""
    return figure_bytes(figure, "svg", title, version).decode()


def write_figure(figure: Figure, directory: Path, stem: str, title: str, version: str) -> tuple[Path, ...]:
    """Write `stem`.pdf, .svg and .png into a directory: all drawn and stored before the first is renamed into place."""
    paths = tuple(directory / f"{stem}.{kind}" for kind in ("pdf", "svg", "png"))
    with ExitStack() as stack:
        places = [stack.enter_context(replaced(path)) for path in paths]
        for path, place in zip(paths, places, strict=True):
            place.write_bytes(figure_bytes(figure, path.suffix[1:], title, version))
    return paths
