"""The starter models that are shipped: listed, or copied to be worked on."""

from __future__ import annotations

import os
import tomllib
from difflib import get_close_matches
from importlib.resources.abc import Traversable
from pathlib import Path

from closedform.cli.places import check_folder
from closedform.document.files import write_whole
from closedform.document.templating import templates_folder
from closedform.errors import InputError

__all__ = ["StarterExistsError", "UnknownStarterError", "copy_starter", "listing", "starters"]

ENDING = ".toml"


class UnknownStarterError(InputError):
    """A name that no starter has; `nearest` is the known name most like it."""

    def __init__(self, name: str, nearest: str | None) -> None:
        super().__init__(name, nearest)
        self.name, self.nearest = name, nearest

    def __str__(self) -> str:
        if self.nearest:
            return f"No starter is called '{self.name}'; did you mean '{self.nearest}'?"
        return f"No starter is called '{self.name}'; `closedform starter` lists them."


class StarterExistsError(InputError):
    """A file that stands where the copy of a starter would go."""

    def __init__(self, path: str) -> None:
        super().__init__(path)
        self.path = path

    def __str__(self) -> str:
        return (
            f"{self.path}: this file exists and was left as it is; replace it with --replace, "
            "or name another folder with --into."
        )


def starters() -> dict[str, Traversable]:
    """Return the shipped starter models by name."""
    folder = templates_folder() / "starters"
    files = sorted(folder.iterdir(), key=lambda file: file.name)
    return {file.name.removesuffix(ENDING): file for file in files if file.name.endswith(ENDING)}


def listing() -> list[str]:
    """Return one line for each starter, its name and then its title."""
    found = starters()
    width = max(map(len, found), default=0)
    return [f"{name:{width}}  {_title(file)}" for name, file in found.items()]


def copy_starter(name: str, into: Path, *, replace: bool = False) -> Path:
    """Copy a starter into a folder, made if missing, and return the path of the copy.

    Raises:  UnknownStarterError; StarterExistsError if a file is in its place and `replace`
             is not set; CannotWriteError.
    """
    found = starters()
    chosen = name.removesuffix(ENDING)
    if chosen not in found:
        nearest = get_close_matches(chosen, found, n=1)
        raise UnknownStarterError(name, nearest[0] if nearest else None)
    check_folder(into)
    path = into / f"{chosen}{ENDING}"
    if os.path.lexists(path) and not replace:
        raise StarterExistsError(str(path))
    return write_whole(path, found[chosen].read_bytes())


def _title(file: Traversable) -> str:
    return str(tomllib.loads(file.read_text(encoding="utf-8"))["title"])
