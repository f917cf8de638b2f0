"""Files appear whole or not at all."""

from __future__ import annotations

import os
import tempfile
from pathlib import Path

from closedform.errors import InputError

__all__ = ["CannotWriteError", "write_whole"]


class CannotWriteError(InputError):
    """A result cannot be put where it was asked for."""

    def __init__(self, path: str, reason: str) -> None:
        super().__init__(path, reason)
        self.path, self.reason = path, reason

    def __str__(self) -> str:
        return (
            f"{self.path}: cannot be written: {self.reason}. Nothing was left half-written; "
            "name another place, or make room and the right to write there."
        )


def write_whole(path: str | Path, text: str | bytes) -> Path:
    r"""Write a file in one step and return its path; folders above it are made.

    The text goes to a new file beside the target, reaches the disc, and takes the
    target's name only then: a reader sees the old file or the new one, never a part.
    Text is written as UTF-8 with ``\\n`` line ends on every system.

    Raises:  CannotWriteError if the folder cannot be made or written to, the disc is
             full, or `path` is a folder.
    """
    path = Path(path)
    content = text.encode("utf-8") if isinstance(text, str) else text
    try:
        if path.is_dir():
            raise IsADirectoryError(None, "it is a folder")
        path.parent.mkdir(parents=True, exist_ok=True)
        handle, name = tempfile.mkstemp(dir=path.parent, prefix=f".{path.name[:40]}.")
    except OSError as error:
        raise CannotWriteError(str(path), _reason(error)) from error
    beside = Path(name)
    try:
        with os.fdopen(handle, "wb") as file:
            file.write(content)
            file.flush()
            os.fsync(file.fileno())
        beside.chmod(_usual_mode(path))
        beside.replace(path)
    except OSError as error:
        raise CannotWriteError(str(path), _reason(error)) from error
    finally:
        beside.unlink(missing_ok=True)
    return path


def _usual_mode(path: Path) -> int:
    """Return the mode of the file to be replaced, or that of any new file.

    A temporary file is readable by its owner alone; a report is for others, too.
    """
    if path.exists():
        return path.stat().st_mode & 0o777
    mask = os.umask(0)
    os.umask(mask)
    return 0o666 & ~mask


def _reason(error: OSError) -> str:
    return (error.strerror or str(error)).lower()
