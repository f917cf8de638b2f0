"""A write-up of this program held against its model: is it still what was written, and right?

The model is solved, proved and derived anew, and rendered as the top of the document says.
Statements of the document are aligned with those of that rendering by what they say, not by
how they are set, so that one that was edited, put in or taken out is told once, by its line.
"""

from __future__ import annotations

from pathlib import Path

from closedform.checking.verdict import CheckReport
from closedform.document.origin import Origin, origin_of
from closedform.document.reading.against import verdicts
from closedform.document.reading.back import read_back
from closedform.document.render import rendered
from closedform.document.writeup import made_from
from closedform.errors import InputError
from closedform.model.reading import load

__all__ = [
    "ModelNotNamedError",
    "UnreadableWriteUpError",
    "check_file",
    "check_writeup",
    "is_writeup",
]

HEAD = 4096
"""Bytes of a file in which it says what it is."""


class ModelNotNamedError(InputError):
    """A document does not say which model it is a write-up of, or that file is not there.

    `path` is the document, `model` the file that it names, empty if it names none.
    """

    def __init__(self, path: str, model: str) -> None:
        super().__init__(path, model)
        self.path, self.model = path, model

    def __str__(self) -> str:
        if not self.model:
            return (
                f"{self.path}: it does not say at the top which model it is a write-up of. "
                "Name the model with --model."
            )
        return (
            f"{self.path}: it is a write-up of {self.model}, which is not there. "
            "Name the file of the model with --model."
        )


class UnreadableWriteUpError(InputError):
    """A document that cannot be read from its file."""

    def __init__(self, path: str, reason: str) -> None:
        super().__init__(path, reason)
        self.path, self.reason = path, reason

    def __str__(self) -> str:
        return f"{self.path}: cannot be read: {self.reason}. Name a .tex file in UTF-8."


def check_file(path: str | Path, *, model: str | Path | None = None) -> CheckReport:
    """Return what is found about a file: a write-up of this program, or a hand derivation.

    `model` is taken instead of the model that the file names.

    Raises:  what `check_writeup` raises for a write-up, and what
             `closedform.checking.check.check_file` raises for anything else.
    """
    if _begins_as_writeup(Path(path)):
        return check_writeup(path, model)
    from closedform.checking.check import check_file as check_derivation

    return check_derivation(path, model=model)


def _begins_as_writeup(file: Path) -> bool:
    """Whether the first lines say so; a file that cannot be read is none."""
    try:
        if not file.is_file():
            return False
        with file.open("rb") as opened:
            head = opened.read(HEAD)
    except OSError:
        return False
    return is_writeup(head.decode("utf-8", "replace"))


def is_writeup(text: str) -> bool:
    """Whether a document says that it is a write-up of this program."""
    return origin_of(text) is not None


def check_writeup(path: str | Path, model_path: str | Path | None = None) -> CheckReport:
    """Return what is found about every displayed statement of a write-up.

    `model_path` is the model to hold it against; left out, it is the one that the document
    names, looked for from the folder of the document, and beside it.

    Raises:  UnreadableWriteUpError, ModelNotNamedError; and all that `load` and `write_up`
             raise about the model.
    """
    file = Path(path)
    try:
        text = file.read_text(encoding="utf-8")
    except (OSError, UnicodeDecodeError) as error:
        raise UnreadableWriteUpError(str(path), _reason(error)) from error
    origin = origin_of(text)
    found = Path(model_path) if model_path is not None else _model_of(file, origin)
    origin = origin or Origin(found.name, "working", 6)
    model = load(found)
    derivation = made_from(model, origin.digits).derivation
    fresh = rendered(derivation, depth=origin.depth)
    read_back(fresh.text, fresh.printed, fresh.time)
    return CheckReport(
        name=file.stem,
        title=f"Write-up of {derivation.title}",
        source=str(path),
        model=str(found),
        model_title=derivation.title,
        lines=verdicts(text, str(path), fresh.text, fresh.printed, fresh.time),
        time=fresh.time,
    )


def _reason(error: OSError | UnicodeDecodeError) -> str:
    return error.reason if isinstance(error, UnicodeDecodeError) else error.strerror or str(error)


def _model_of(file: Path, origin: Origin | None) -> Path:
    if origin is None:
        raise ModelNotNamedError(str(file), "")
    named = Path(origin.model)
    for place in (file.parent / named, file.parent / named.name, file.parent.parent / named.name):
        if place.is_file():
            return place
    raise ModelNotNamedError(str(file), origin.model)
