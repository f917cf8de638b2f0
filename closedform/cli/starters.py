"""The starters that are shipped, models and derivations: listed, or copied to be worked on."""

from __future__ import annotations

import os
import re
from dataclasses import dataclass
from difflib import get_close_matches
from importlib.resources.abc import Traversable
from pathlib import Path

from closedform.cli.places import check_folder
from closedform.document.files import write_whole
from closedform.document.templating import templates_folder
from closedform.errors import InputError

__all__ = [
    "Starter",
    "StarterExistsError",
    "UnknownStarterError",
    "copy_starter",
    "listing",
    "starters",
]

MODEL = ".toml"
ITS_MODEL = "_model.toml"
"""Follows the name of a derivation in that of the model beside it."""
ENDINGS = (".toml", ".tex")
TITLE = re.compile(r'(?m)^(?:% closedform: )?title = "([^"\n]+)"$')


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


@dataclass(frozen=True, slots=True)
class Starter:
    """A shipped model, or a derivation with the model that it is to be held against.

    `files` are to be copied, that which a command works on first; `command` is its name.
    """

    name: str
    title: str
    files: tuple[Traversable, ...]
    command: str


def starters() -> dict[str, Starter]:
    """Return what is shipped by name: the models, and then the derivations."""
    folder = templates_folder() / "starters"
    models = {path.name: path for path in folder.iterdir() if path.name.endswith(MODEL)}
    found = [
        Starter(name.removesuffix(MODEL), _title(path), (path,), "writeup")
        for name, path in sorted(models.items())
    ]
    beside = {path.name: path for path in (folder / "derivations").iterdir()}
    for name, path in sorted(beside.items()):
        stem, _, ending = name.rpartition(".")
        if f".{ending}" in ENDINGS and f"{stem}{ITS_MODEL}" in beside:
            files = (path, beside[f"{stem}{ITS_MODEL}"])
            found.append(Starter(stem, _title(path), files, "check"))
    return {starter.name: starter for starter in found}


def listing() -> list[str]:
    """Return one line for each starter, its name and then its title."""
    found = starters()
    width = max(map(len, found), default=0)
    return [f"{name:{width}}  {starter.title}" for name, starter in found.items()]


def copy_starter(name: str, into: Path, *, replace: bool = False) -> tuple[str, list[Path]]:
    """Copy a starter into a folder, made if missing.

    Returns the command that works on it, and the paths of the copies, that for the command first.

    Raises:  UnknownStarterError; StarterExistsError if a file is in the place of one of them and
             `replace` is not set; CannotWriteError.
    """
    found = starters()
    chosen = next((name.removesuffix(end) for end in ENDINGS if name.endswith(end)), name)
    if chosen not in found:
        nearest = get_close_matches(chosen, found, n=1)
        raise UnknownStarterError(name, nearest[0] if nearest else None)
    check_folder(into)
    starter = found[chosen]
    paths = [into / file.name for file in starter.files]
    for path in paths:
        if os.path.lexists(path) and not replace:
            raise StarterExistsError(str(path))
    for path, file in zip(paths, starter.files, strict=True):
        write_whole(path, file.read_bytes())
    return starter.command, paths


def _title(file: Traversable) -> str:
    """Return the title that a TOML file has as a key, or a LaTeX file in a comment."""
    title = TITLE.search(file.read_text(encoding="utf-8"))
    return title[1] if title else file.name
