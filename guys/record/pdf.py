"""The record's page as a PDF, where the extra `pdf` is installed; a browser prints the same page without it."""

from __future__ import annotations

from guys.errors import OutputError


def pdf(page: str) -> bytes:
    """The page as set on A4.

    Raises OutputError where what sets it is not there.
    """
    try:
        from weasyprint import HTML
    except (ImportError, OSError) as failure:
        what = 'needs the extra "pdf" (pip install "guys[pdf]") and the system\'s Pango; record.html prints from any browser without'
        raise OutputError("record.pdf", what) from failure
    return bytes(HTML(string=page).write_pdf())
