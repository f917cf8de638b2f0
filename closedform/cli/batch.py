"""The work of ``writeup``: one model after the other, whatever becomes of each."""

from __future__ import annotations

import os
from collections.abc import Sequence
from dataclasses import dataclass
from pathlib import Path
from typing import Literal

from closedform.cli.places import check_folder
from closedform.cli.progress import Progress
from closedform.cli.screen import Screen, printable
from closedform.cli.status import status_of, worst
from closedform.errors import ClosedformError, InputError

__all__ = ["SameFileError", "Wishes", "write_models"]


@dataclass(frozen=True, slots=True)
class Wishes:
    """What is wanted of every model; `depth` and `template` are those of `write_up`."""

    into: Path
    depth: Literal["summary", "working", "full"]
    digits: int
    template: str
    record: bool
    pdf: bool


class SameFileError(InputError):
    """A file that would be written is asked for twice, or is one of the models."""

    def __init__(self, file: str, model: str, other: str) -> None:
        super().__init__(file, model, other)
        self.file, self.model, self.other = file, model, other

    def __str__(self) -> str:
        if self.file == self.other:
            return (
                f"{self.model}: its write-up would replace the model {self.other}. Nothing was "
                "done; name another folder with --into, or rename one of them."
            )
        if self.model == self.other:
            return f"{self.model}: this model is named twice. Nothing was done; name it once."
        return (
            f"{self.model} and {self.other} would both write {self.file}. Nothing was done; "
            "write them into different folders with --into, or rename one of them."
        )


def write_models(models: Sequence[str], wishes: Wishes, screen: Screen) -> int:
    """Write up each model, print what came of it, and return the exit status of all.

    Raises:  SameFileError or CannotWriteError before anything is done.
    """
    refuse_same_files(models, wishes)
    check_folder(wishes.into)
    statuses = []
    with screen.progress(len(models)) as progress:
        for model in models:
            statuses.append(_write_one(model, wishes, screen, progress))
            progress.done()
    if screen.shows_results and len(models) > 1:
        failed = sum(status != 0 for status in statuses)
        screen.line(f"{len(models)} models: {len(models) - failed} written up, {failed} failed")
    return worst(statuses)


def refuse_same_files(models: Sequence[str], wishes: Wishes) -> None:
    """Raise SameFileError if two models want the same file, or one would replace a model."""
    owner: dict[str, str] = {}
    sources = {_identity(Path(model)): model for model in models}
    for model in models:
        for file in _files(model, wishes):
            identity = _identity(file)
            if identity in sources:
                raise SameFileError(sources[identity], model, sources[identity])
            if identity in owner:
                raise SameFileError(str(file), owner[identity], model)
            owner[identity] = model


def _files(model: str, wishes: Wishes) -> list[Path]:
    endings = [".tex", *([".record.json"] if wishes.record else []), *([".pdf"] * wishes.pdf)]
    return [wishes.into / f"{Path(model).stem}{ending}" for ending in endings]


def _identity(path: Path) -> str:
    return os.path.normcase(path.resolve())


def _write_one(model: str, wishes: Wishes, screen: Screen, progress: Progress) -> int:
    name = printable(Path(model).stem)
    try:
        progress.stage(name, "reading")
        from closedform.document.writeup import write_pdf, write_up
        from closedform.model.reading import load

        stated = load(model)
        progress.stage(name, "solving and proving")
        result = write_up(
            stated,
            into=wishes.into,
            template=wishes.template,
            depth=wishes.depth,
            digits=wishes.digits,
            record=wishes.record,
            source=model,
        )
    except ClosedformError as error:
        screen.error(error)
        return status_of(error)
    files, trouble = result.files, None
    if wishes.pdf:
        progress.stage(name, "typesetting")
        try:
            files = (*files, write_pdf(result))
        except ClosedformError as error:
            trouble = error
    if screen.shows_results:
        from closedform.cli.summary import summary

        screen.lines(summary(result, files, digits=wishes.digits, width=screen.width))
    else:
        for file in files:
            screen.path(file)
    if trouble is None:
        return 0
    screen.error(trouble)
    return status_of(trouble)
