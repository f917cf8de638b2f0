"""What a comment beside a formula says: ``says = eigenvector, of = -2``."""

from __future__ import annotations

import re
from difflib import get_close_matches

from closedform.checking.source.errors import RemarkError, SourceKeyError
from closedform.errors import Place

__all__ = ["DOCUMENT_KEYS", "LINE_KEYS", "read_remark"]

DOCUMENT_KEYS = ("model", "title", "case")
LINE_KEYS = ("says", "of", "at", "where", "skip")
KEY = re.compile(r"\s*([\w-]+)\s*(=?)\s*")
QUOTED = re.compile(r"""\s*(?:"([^"]*)"|'([^']*)')\s*(?=[,;]|\Z)""")
PIECE = re.compile(r"[(\[{]|[)\]}]|[,;]")
ADVICE = (
    'write key = value, as in % closedform: says = eigenvector, of = "-2"; a value with a comma '
    "in it stands in quotation marks"
)


def read_remark(text: str, place: Place) -> dict[str, str]:
    """Return the keys and values of a comment; `skip` has the value "skip".

    Keys are parted by a comma or a semicolon that stands in no brackets.

    Raises:  RemarkError, SourceKeyError.
    """
    found: dict[str, str] = {}
    position = 0
    while position < len(text):
        opened = KEY.match(text, position)
        if opened is None:
            raise RemarkError(place, text[position:].strip() or text, ADVICE)
        key = opened[1].lower()
        allowed = (*DOCUMENT_KEYS, *LINE_KEYS)
        if key not in allowed:
            near = get_close_matches(key[:40], allowed, n=1)
            raise SourceKeyError(place, opened[1], near[0] if near else None, allowed)
        if key in found:
            raise RemarkError(place, opened[1], "it is said twice; say it once")
        value, position = _value(text, opened.end())
        if bool(opened[2]) == (key == "skip") or (key == "skip") != (value == ""):
            raise RemarkError(place, text.strip(), ADVICE)
        found[key] = value or "skip"
    if not found:
        raise RemarkError(place, "% closedform:", ADVICE)
    return found


def _value(text: str, start: int) -> tuple[str, int]:
    """Return a value and where the next key begins."""
    if quoted := QUOTED.match(text, start):
        value = quoted[1] if quoted[1] is not None else quoted[2]
        return value.strip(), quoted.end() + 1
    depth = 0
    for piece in PIECE.finditer(text, start):
        if piece[0] in ",;" and depth <= 0:
            return text[start : piece.start()].strip(), piece.end()
        depth += {"(": 1, "[": 1, "{": 1, ",": 0, ";": 0}.get(piece[0], -1)
    return text[start:].strip(), len(text)
