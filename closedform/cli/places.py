"""Whether a folder can take files, asked before the work rather than after it."""

from __future__ import annotations

import os
from pathlib import Path

from closedform.document.files import CannotWriteError

__all__ = ["check_folder"]


def check_folder(into: Path) -> None:
    """Raise CannotWriteError if a folder is not there and cannot be made, as far as can be told.

    Nothing is made yet: a model that turns out to be unusable leaves no empty folder.
    """
    try:
        nearest = next(place for place in (into, *into.parents) if place.exists())
    except OSError as error:
        raise CannotWriteError(str(into), (error.strerror or str(error)).lower()) from error
    if not nearest.is_dir():
        raise CannotWriteError(str(into), f"{nearest} is a file, not a folder")
    if not os.access(nearest, os.W_OK | os.X_OK):
        raise CannotWriteError(str(into), f"no right to write in {nearest}")
