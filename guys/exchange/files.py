"""Files replaced whole or not at all, and how every JSON file begins and is written.

A result is written under a temporary name in the same directory, flushed to the disk, and renamed over the old file (POSIX rename is
atomic within a file system).  Whatever goes wrong before that, an interruption included, leaves the old file as it was and no
temporary one behind.
"""

from __future__ import annotations

import errno
import json
import os
from collections.abc import Iterator, Mapping
from contextlib import contextmanager, suppress
from pathlib import Path
from tempfile import NamedTemporaryFile
from typing import Any

from guys.errors import OutputError
from guys.scenario import Scenario
from guys.version import __version__

_REASONS = {
    errno.ENOSPC: "the disk is full; what was there before is untouched",
    errno.EDQUOT: "the disk quota is used up; what was there before is untouched",
    errno.EROFS: "the file system is read-only",
    errno.EACCES: "no permission to write there",
    errno.EPERM: "no permission to write there",
    errno.ENOENT: "the directory does not exist",
    errno.ENOTDIR: "part of its path is not a directory",
    errno.EISDIR: "a directory has that name",
    errno.EEXIST: "a file has that name, where a directory is needed",
}


@contextmanager
def replaced(path: str | os.PathLike[str]) -> Iterator[Path]:
    """Yield a temporary path to write to; on success it becomes `path`, on any failure it is removed.

    A directory of that name is refused before anything is written, so that of several files entered together none is replaced.

    Raises `OutputError` for what the operating system refuses, with the reason in words.
    """
    target = Path(path)
    temporary: Path | None = None
    try:
        if target.is_dir():
            raise IsADirectoryError(errno.EISDIR, os.strerror(errno.EISDIR))
        temporary = _beside(target)
        yield temporary
        _flush(temporary)
        os.replace(temporary, target)
        _flush_directory(target.parent)
    except BaseException as failure:
        if temporary is not None:
            with suppress(OSError):
                temporary.unlink(missing_ok=True)
        if isinstance(failure, OSError):
            raise OutputError(str(target), reason(failure)) from failure
        raise


def reason(failure: OSError) -> str:
    """Why the operating system refused, in words."""
    return _REASONS.get(failure.errno or 0, failure.strerror or str(failure))


def _beside(target: Path) -> Path:
    with NamedTemporaryFile(dir=target.parent, prefix=f".{target.name}.", suffix=".tmp", delete=False) as made:
        made_path = Path(made.name)
    mask = os.umask(0)
    os.umask(mask)
    made_path.chmod(0o666 & ~mask)
    return made_path


def _flush(path: Path) -> None:
    with path.open("rb+") as stream:
        os.fsync(stream.fileno())


def _flush_directory(directory: Path) -> None:
    """Make the rename last through a power cut, where the system lets a directory be opened."""
    with suppress(OSError):
        handle = os.open(directory, os.O_RDONLY)
        try:
            os.fsync(handle)
        finally:
            os.close(handle)


def json_text(content: Mapping[str, Any]) -> str:
    """The text of a JSON file: on one line, with no number that JSON cannot hold."""
    return json.dumps(content, ensure_ascii=False, allow_nan=False, separators=(",", ":")) + "\n"


def heading(form: str, scenario: Scenario) -> dict[str, str]:
    """What every result file says first: its format, and of what, by which version, from which input it is."""
    return {"format": form, "title": scenario.title, "guys_version": __version__, "scenario_sha256": scenario.sha256}
