"""LaTeX in raw tokens, each with its place: what TeX itself would see, and no meaning yet."""

from __future__ import annotations

import re
from dataclasses import dataclass

from closedform.notation.greek import LETTERS
from closedform.notation.written.macros import MATRICES, TEXTS, VERBATIM
from closedform.notation.written.written_errors import (
    StopError,
    UnbalancedError,
    UnusableNotationError,
    WrittenDepthError,
)

__all__ = ["MOST_NESTED", "Raw", "lexed", "matched"]

MOST_NESTED = 40
"""Braces, brackets and environments inside each other."""


@dataclass(frozen=True, slots=True)
class Raw:
    """One token of TeX.

    `kind` is letter, digit, command, text, row, begin, end, char, or one of { } ^ _ & '.
    A command has its name without backslash as `text`, an environment its name; `arguments`
    are the texts of those arguments that are no formulas, `at` where the first begins.
    """

    kind: str
    text: str
    start: int
    end: int
    arguments: tuple[str, ...] = ()
    at: int = -1


_COMMAND = re.compile(r"\\([A-Za-z]+|.)", re.DOTALL)
_ROW = re.compile(r"\*?(?:[ \t]*\[[ \t]*-?[0-9.]*[ \t]*[a-z\\]{2,14}\])?")
_ENVIRONMENT = re.compile(r"[ \t]*\{([A-Za-z]+)(\*?)\}")
_OPTION = re.compile(r"[ \t]*\[(?:[^\]\[{}\\]|\{[^{}\\]*\})*\]")
_COMMENT = re.compile(r"%[^\n]*\n?[ \t]*")
_KERN = re.compile(r"[ \t]*-?[0-9.]+[ \t]*[a-z]{2}")
_BRACKET = re.compile(r"\s*(?:\\?[(|]|\[[^\]]*\](?!\s*\{))")
_SPECIAL = frozenset("{}^_&'")
_SUPERSCRIPTS = dict(zip("⁰¹²³⁴⁵⁶⁷⁸⁹", "0123456789", strict=True))
_SUBSCRIPTS = dict(zip("₀₁₂₃₄₅₆₇₈₉", "0123456789", strict=True))
_SCRIPTS = re.compile(f"[{''.join(_SUPERSCRIPTS)}]+|[{''.join(_SUBSCRIPTS)}]+")
WITH_COLUMNS = frozenset({"array", "tabular", "alignat", "alignedat", "subarray"})


def lexed(text: str, start: int = 0, end: int | None = None) -> list[Raw]:
    """Return the raw tokens of a text between two offsets; comments and blanks are left out.

    Raises:  StopError at a command whose argument has no end.
    """
    found: list[Raw] = []
    at, end = start, len(text) if end is None else end
    while at < end:
        character = text[at]
        if character == "\\":
            at = _command(text, at, end, found)
        elif character == "%":
            comment = _COMMENT.match(text, at, end)
            at = comment.end() if comment else end
        elif character.isspace() or character == "$":
            at += 1
        elif scripts := _SCRIPTS.match(text, at, end):
            table = _SUPERSCRIPTS if character in _SUPERSCRIPTS else _SUBSCRIPTS
            mark = "^" if character in _SUPERSCRIPTS else "_"
            found += [Raw(mark, mark, at, at), Raw("{", "{", at, at)]
            found += [Raw("digit", table[c], at + k, at + k + 1) for k, c in enumerate(scripts[0])]
            at = scripts.end()
            found.append(Raw("}", "}", at, at))
        else:
            found.append(_character(character, at))
            at += 1
    return found


def _character(character: str, at: int) -> Raw:
    if character in LETTERS:
        return Raw("command", LETTERS[character], at, at + 1)
    if character.isascii() and character.isalpha():
        kind = "letter"
    elif character in "0123456789":
        kind = "digit"
    elif character == "~":
        return Raw("command", " ", at, at + 1)
    elif character in "’′":
        kind, character = "'", "'"
    else:
        kind = character if character in _SPECIAL else "char"
    return Raw(kind, character, at, at + 1)


def _command(text: str, at: int, end: int, found: list[Raw]) -> int:
    """Add the command that begins at an offset, and return where it ends."""
    form = _COMMAND.match(text, at, end)
    if form is None:
        raise StopError(
            UnusableNotationError, at, at + 1, "\\", "a command follows a backslash; name it"
        )
    name, after = form[1], form.end()
    if name == "\\":
        row = _ROW.match(text, after, end)
        after = row.end() if row else after
        found.append(Raw("row", "\\\\", at, after))
    elif name in ("begin", "end"):
        after = _environment(name, text, at, after, end, found)
    elif name in ("cr", "newline", "tabularnewline"):
        found.append(Raw("row", "\\\\", at, after))
    elif name in ("hskip", "kern", "mkern", "mskip"):
        size = _KERN.match(text, after, end)
        after = size.end() if size else after
        found.append(Raw("command", ",", at, after))
    elif name == "qty" and _BRACKET.match(text, after, end):
        pass  # brackets that grow, of the package physics; a quantity has braces
    elif name in VERBATIM:
        after = _verbatim(name, text, at, after, end, found)
    elif name not in ("(", ")", "[", "]"):  # these only bound a formula
        found.append(Raw("command", name, at, after))
    return after


def _environment(name: str, text: str, at: int, after: int, end: int, found: list[Raw]) -> int:
    form = _ENVIRONMENT.match(text, after, end)
    if form is None:
        raise StopError(
            UnusableNotationError, at, after, f"\\{name}", "it needs an environment in braces"
        )
    after = form.end()
    if name == "begin":
        takes = form[1] in (*WITH_COLUMNS, "aligned") or (form[2] and form[1] in MATRICES)
        if takes and (option := _OPTION.match(text, after, end)):
            after = option.end()
        if form[1] in WITH_COLUMNS:
            _, after = _braced(text, after, end, at, f"\\begin{{{form[1]}}}")
    found.append(Raw(name, form[1], at, after))
    return after


def _verbatim(name: str, text: str, at: int, after: int, end: int, found: list[Raw]) -> int:
    """Add a command whose arguments are no formulas; mathematics in a text is read."""
    option = _OPTION.match(text, after, end)
    after = option.end() if option else after
    if text[after : after + 1] == "*":
        after += 1
    arguments, first = [], -1
    for _ in range(VERBATIM[name]):
        begin, stop = _braced(text, after, end, at, f"\\{name}")
        first = begin if first < 0 else first
        arguments.append(text[begin : stop - 1])
        after = stop
    if name in TEXTS and arguments and "$" in arguments[0]:
        inside = first
        for number, piece in enumerate(arguments[0].split("$")):
            if number % 2:
                found += lexed(text, inside, inside + len(piece))
            elif piece.strip():
                found.append(Raw("text", name, inside, inside + len(piece), (piece,), inside))
            inside += len(piece) + 1
    else:
        found.append(
            Raw("text" if name in TEXTS else "command", name, at, after, tuple(arguments), first)
        )
    return after


def _braced(text: str, after: int, end: int, at: int, command: str) -> tuple[int, int]:
    """Return where the contents of the next braces begin, and where the braces end."""
    while after < end and text[after].isspace():
        after += 1
    if after >= end:
        raise StopError(UnusableNotationError, at, after, command, "its argument is missing")
    if text[after] != "{":
        raise StopError(UnusableNotationError, at, after, command, "write its argument in braces")
    depth = 0
    for offset in range(after, end):
        if text[offset] == "{" and text[offset - 1] != "\\":
            depth += 1
        elif text[offset] == "}" and text[offset - 1] != "\\":
            depth -= 1
            if depth == 0:
                return after + 1, offset + 1
    raise StopError(UnbalancedError, after, after + 1, "{")


def matched(raws: list[Raw]) -> dict[int, int]:
    r"""Return the index of the partner of every brace and every begin or \\left, both ways.

    Raises:  StopError where one has no partner, or where they are nested too deep.
    """
    partners: dict[int, int] = {}
    opened: list[int] = []
    ends = {"{": "}", "begin": "end", "left": "right"}
    for index, raw in enumerate(raws):
        grows = raw.kind == "command" and raw.text in ("left", "right")
        kind = raw.text if grows else raw.kind
        if kind in ends:
            opened.append(index)
            if len(opened) > MOST_NESTED:
                raise StopError(WrittenDepthError, raw.start, raw.end, raw.text, MOST_NESTED)
        elif kind in ("}", "end", "right"):
            start = opened.pop() if opened else -1
            first = raws[start] if start >= 0 else None
            kinds = first and (first.text if first.kind == "command" else first.kind)
            if first is None or ends[kinds or "{"] != kind:
                raise StopError(UnbalancedError, raw.start, raw.end, _shown(raw))
            if kind == "end" and first.text != raw.text:
                raise StopError(UnbalancedError, raw.start, raw.end, _shown(raw))
            partners[start], partners[index] = index, start
    if opened:
        raw = raws[opened[-1]]
        raise StopError(UnbalancedError, raw.start, raw.end, _shown(raw))
    return partners


def _shown(raw: Raw) -> str:
    if raw.kind in ("begin", "end"):
        return f"\\{raw.kind}{{{raw.text}}}"
    return f"\\{raw.text}" if raw.kind == "command" else raw.text
