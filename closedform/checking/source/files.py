"""The files of a derivation: its text, and the files that it takes in or names."""

from __future__ import annotations

import stat
from pathlib import Path

from closedform.checking.source.errors import (
    NoSuchModelError,
    OwnModelError,
    SourceEncodingError,
    SourceFileError,
)
from closedform.errors import Place
from closedform.notation.documents.errors import IncludedFileError
from closedform.notation.documents.weaving import TextFile

__all__ = ["LARGEST_DOCUMENT", "Folder", "demand_file", "is_there", "model_path", "read_text"]

LARGEST_DOCUMENT = 8_000_000
"""Bytes of a file with a derivation."""
BYTE_ORDER_MARK = b"\xef\xbb\xbf"


def read_text(path: Path, name: str, largest: int = LARGEST_DOCUMENT) -> str:
    """Return the text of a file; line ends are single characters.  `name` stands in errors.

    Raises:  SourceFileError, SourceEncodingError.
    """
    place = Place(name)
    if "\0" in str(path):
        raise SourceFileError(place, "there is a NUL character in the name of the file")
    try:
        if path.is_dir():
            raise SourceFileError(place, "this is a folder; name the file inside it")
        demand_file(path, name)
        with path.open("rb") as file:
            data = file.read(largest + 1)
    except FileNotFoundError:
        raise SourceFileError(
            place, "there is no such file; check the name and the folder"
        ) from None
    except OSError as error:
        reason = f"the file cannot be read ({error.strerror or error}); check its permissions"
        raise SourceFileError(place, reason) from None
    if len(data) > largest:
        reason = f"the file has more than {largest} bytes; hand in the part with the derivation"
        raise SourceFileError(place, reason)
    return _decoded(data.removeprefix(BYTE_ORDER_MARK), name)


def _decoded(data: bytes, name: str) -> str:
    try:
        text = data.decode("utf-8")
    except UnicodeDecodeError as error:
        before = data[: error.start].decode("utf-8").replace("\r\n", "\n").replace("\r", "\n")
        line, column = before.count("\n") + 1, len(before) - before.rfind("\n")
        place = Place(name, None, line, column)
        raise SourceEncodingError(place, data[error.start]) from None
    nul = text.find("\0")
    if nul >= 0:
        place = Place(name, None, text.count("\n", 0, nul) + 1, nul - text.rfind("\n", 0, nul))
        raise SourceEncodingError(place, 0)
    return text.replace("\r\n", "\n").replace("\r", "\n")


class Folder:
    r"""The folder of a document, in which the files lie that it takes in.

    A file outside is not read, however it is named: a document that was sent to somebody is
    not to show what else lies on the disk.
    """

    def __init__(self, document: Path) -> None:
        self.root = document.parent
        self.inside = document.resolve().parent

    def open(self, name: str, place: Place) -> TextFile:
        """Return the file of a name, with or without the ending .tex.

        Raises:  IncludedFileError, SourceFileError, SourceEncodingError.
        """
        path = Path(name)
        if "\0" in name or len(name) > 1000:
            raise IncludedFileError(place, name, "this is no name of a file")
        if path.is_absolute() or ".." in path.parts or name.startswith(("~", "|")):
            reason = "only files in the folder of the document are taken in"
            raise IncludedFileError(place, name, reason)
        for candidate in (Path(f"{name}.tex"), path):
            if not is_there(self.root / candidate):
                continue
            found = (self.root / candidate).resolve()
            if not found.is_relative_to(self.inside):
                raise IncludedFileError(place, name, "it leads out of the folder of the document")
            shown = str(self.root / found.relative_to(self.inside))
            return TextFile(shown, read_text(found, shown))
        raise IncludedFileError(place, name, "there is no such file; check the name and the folder")


def demand_file(path: Path, name: str) -> None:
    """Raise SourceFileError for a pipe or a device: it may never end.  `name` stands in it."""
    try:
        mode = path.stat().st_mode
    except (OSError, ValueError):  # reading it tells why
        return
    if not (stat.S_ISREG(mode) or stat.S_ISDIR(mode)):
        reason = "this is a pipe or a device; save what it gives as a file, and name that"
        raise SourceFileError(Place(name), reason)


def is_there(path: Path) -> bool:
    """Say whether there is a file of this name."""
    try:
        return "\0" not in str(path) and path.is_file()
    except OSError:  # its name is too long, or links run in a circle
        return False


def model_path(name: str, document: Path, place: Place) -> Path:
    """Return the path of a model file whose name counts from the folder of a document.

    Raises:  NoSuchModelError, OwnModelError.
    """
    path = document.parent / name
    if not is_there(path):
        raise NoSuchModelError(place, name, str(path))
    if path.resolve() == document.resolve():
        raise OwnModelError(place)
    return path
