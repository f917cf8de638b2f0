"""The line at the top of a write-up that says which model it is of, and how it was asked for.

It is a comment, and names the model by its path from the folder of the write-up; where that
would tell how folders of the machine are called, by its file name only.
"""

from __future__ import annotations

import os
import re
from dataclasses import dataclass
from pathlib import Path, PurePath

__all__ = ["Origin", "origin_line", "origin_of", "path_between"]

LINE = re.compile(
    r"^% closedform: write-up of (?P<model>.+), depth (?P<depth>summary|working|full), "
    r"digits (?P<digits>[0-9]{1,4})\s*$",
    re.MULTILINE,
)
NEAR_THE_TOP = 2000
"""Characters in which the line is looked for."""


@dataclass(frozen=True, slots=True)
class Origin:
    """What a write-up is of: the model's file as seen from its folder, depth and digits."""

    model: str
    depth: str
    digits: int


def origin_line(origin: Origin) -> str:
    """Return the line, with its end.  What no line can hold is replaced by a question mark."""
    model = "".join(sign if sign.isprintable() else "?" for sign in origin.model)
    return f"% closedform: write-up of {model}, depth {origin.depth}, digits {origin.digits}\n"


def origin_of(text: str) -> Origin | None:
    """Return what a document says that it is a write-up of, None if it does not say so."""
    match = LINE.search(text[:NEAR_THE_TOP])
    if match is None:
        return None
    return Origin(match["model"], match["depth"], int(match["digits"]))


def path_between(model: str | os.PathLike[str], folder: str | os.PathLike[str]) -> str:
    """Return the path of a model's file as seen from a folder, both as the user named them.

    Nothing is looked up: a path that leaves the working folder, or begins at a root, would
    tell what the folders above are called, and then it is the name of the file.

    >>> path_between("models/tank.toml", "out"), path_between("/home/me/tank.toml", "out")
    ('../models/tank.toml', 'tank.toml')
    """
    file, into = (PurePath(os.path.normpath(os.fspath(path))) for path in (model, folder))
    if any(path.is_absolute() or path.anchor or ".." in path.parts for path in (file, into)):
        return file.name
    return Path(os.path.relpath(file, into)).as_posix()
