"""From a model file to the model."""

from __future__ import annotations

import os
import re
import sys
import tomllib
from pathlib import Path
from typing import Any

from closedform.errors import Place
from closedform.model.building import build
from closedform.model.driven.model import DrivenModel
from closedform.model.entries import DecimalText
from closedform.model.file_errors import (
    USUAL_LINES,
    FileEmptyError,
    FileEncodingError,
    FileIsDirectoryError,
    FileMissingError,
    FileSyntaxError,
    FileTooLargeError,
    FileUnreadableError,
)
from closedform.model.model import Model
from closedform.model.parametric import ParametricModel
from closedform.model.source import Source

__all__ = ["LARGEST_FILE", "load"]

LARGEST_FILE = 2_000_000
"""Bytes of a model file."""
BYTE_ORDER_MARK = b"\xef\xbb\xbf"
QUOTED_FORMULA = """a fraction or a formula stands in quotation marks, as in "1/2\""""
ADVICE = {
    "Unclosed array": (
        "before this place a comma or a closing bracket may be missing, or digits after a "
        f"decimal point; {QUOTED_FORMULA}"
    ),
    "Invalid value": (
        f'text stands in quotation marks, as in title = "Two carts", and {QUOTED_FORMULA}; '
        "a decimal has digits on both sides of its point"
    ),
    "Expected newline or end of document after a statement": (
        "each value has a line of its own; the decimal mark is a point, as in 0.5, and "
        f"{QUOTED_FORMULA}"
    ),
}
"""What is usually meant where the TOML reader stops, by what it says."""
LONG_DOTTED_KEY = re.compile(
    r"""(?<![\w"'-])(?:(?:[\w-]+|"[^"\n]*"|'[^'\n]*')[ \t]*\.[ \t]*){40}"""
)


def load(path: str | os.PathLike[str]) -> Model | ParametricModel | DrivenModel:
    """Return the model stated in a TOML file; its name is the stem of the file's name.

    Decimals are read as exact rationals: 0.1 is 1/10.  A file with `parameters` gives a
    ParametricModel, one with equations, masses or inputs a DrivenModel.

    Raises:  the errors of ``closedform.model`` and ``closedform.notation``; all of them are
             InputError.
    """
    name = os.fspath(path)
    text = _decode(_read(name), name)
    source = Source(Place(file=name), text)
    mapping = _parse(text, name)
    if not mapping:
        raise FileEmptyError(name)
    return build(mapping, Path(name).stem, source)


def _read(name: str) -> bytes:
    path = Path(name)
    if "\0" in name:
        raise FileUnreadableError(name, "there is a NUL character in its name")
    try:
        size = path.stat().st_size
        if path.is_dir():
            raise FileIsDirectoryError(name)
        if size > LARGEST_FILE:
            raise FileTooLargeError(name, size, LARGEST_FILE)
        with path.open("rb") as file:
            data = file.read(LARGEST_FILE + 1)
    except FileNotFoundError:
        raise FileMissingError(name) from None
    except OSError as error:
        raise FileUnreadableError(name, error.strerror or str(error)) from None
    if len(data) > LARGEST_FILE:  # a pipe or a device has no size beforehand
        raise FileTooLargeError(name, None, LARGEST_FILE)
    return data


def _decode(data: bytes, name: str) -> str:
    start = len(BYTE_ORDER_MARK) if data.startswith(BYTE_ORDER_MARK) else 0
    try:
        return data[start:].decode("utf-8").replace("\r\n", "\n")
    except UnicodeDecodeError as error:
        position = start + error.start
        raise FileEncodingError(name, position, data[position]) from None


def _parse(text: str, name: str) -> dict[str, Any]:
    place = Place(file=name)
    if LONG_DOTTED_KEY.search(text):  # the TOML reader takes quadratic time for such a key
        raise FileSyntaxError(place, "a key with dozens of parts")
    try:
        return tomllib.loads(text, parse_float=DecimalText)
    except tomllib.TOMLDecodeError as error:
        raise _syntax_error(str(error), text, place) from None
    except ValueError:
        if not _has_long_integer(text):
            raise
        raise FileSyntaxError(place, "an integer with thousands of digits") from None
    except RecursionError:
        raise FileSyntaxError(
            place, "arrays or tables are nested hundreds of levels deep"
        ) from None


def _has_long_integer(text: str) -> bool:
    """Say whether digits stand in a row beyond those that Python converts to an integer."""
    most = sys.get_int_max_str_digits()
    return any(len(run.replace("_", "")) > most for run in re.findall("[0-9_]+", text))


def _syntax_error(message: str, text: str, place: Place) -> FileSyntaxError:
    """Return the error for a message that ends in '(at line 3, column 7)'."""
    reason = message.partition(" (at ")[0]
    lines = text.split("\n")
    if found := re.search(r"at line (\d+), column (\d+)", message):
        line, column = int(found[1]), int(found[2])
    else:  # at the end of the document
        line, column = len(lines), len(lines[-1]) + 1
    place = Place(place.file, None, line, column, lines[line - 1])
    return FileSyntaxError(place, reason[:1].lower() + reason[1:], ADVICE.get(reason, USUAL_LINES))
