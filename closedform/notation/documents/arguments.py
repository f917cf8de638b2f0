"""The arguments of macros, read from texts that lie in a pile."""

from __future__ import annotations

import re
from collections.abc import Callable
from dataclasses import dataclass

from closedform.notation.documents.definitions import (
    PARAMETER,
    Macro,
    group_end,
    optional_end,
)

__all__ = ["ENDS_IN_WORD", "LONGEST", "Feed", "Frame", "StrandedError", "filled"]

LONGEST = 20_000
"""Characters of an argument, and of what comes of one macro."""
BLANK = re.compile(r"\s*")
TOKEN = re.compile(r"(?s)\\[a-zA-Z@]+|\\.|.")
ENDS_IN_WORD = re.compile(r"\\[a-zA-Z@]+\Z")


class StrandedError(Exception):
    """A macro that cannot be expanded here; `macro` is what it is from now on, None as before."""

    def __init__(self, macro: Macro | None) -> None:
        super().__init__(macro)
        self.macro = macro


@dataclass(slots=True)
class Frame:
    """A text being read, and how far."""

    text: str
    position: int = 0


class Feed:
    """Texts being read, the innermost last: each is the body of a macro met in the one below.

    `spend` is told how many characters were looked at.
    """

    def __init__(self, base: Frame, spend: Callable[[int], None]) -> None:
        self.frames = [base]
        self._spend = spend

    def arguments(self, count: int, default: str | None) -> list[str]:
        """Return the next arguments, without braces; the first is optional if it has a default.

        Raises:  StrandedError if there are not as many.
        """
        found = [] if default is None else [self._optional(default)]
        while len(found) < count:
            found.append(self._argument())
        return found

    def _ahead(self) -> Frame:
        """Return the frame that holds the next character, which is no blank."""
        while True:
            frame = self.frames[-1]
            blank = BLANK.match(frame.text, frame.position)
            frame.position = blank.end() if blank else frame.position
            if frame.position < len(frame.text):
                return frame
            if len(self.frames) == 1:
                raise StrandedError(None)
            self.frames.pop()

    def _optional(self, default: str) -> str:
        frame = self._ahead()
        start = frame.position
        if frame.text[start] != "[":
            return default
        return self._enclosed(frame, optional_end(frame.text, start, LONGEST))

    def _argument(self) -> str:
        frame = self._ahead()
        start = frame.position
        if frame.text[start] == "{":
            return self._enclosed(frame, group_end(frame.text, start, LONGEST))
        token = TOKEN.match(frame.text, start)
        if token is None or token[0] in "}&":
            raise StrandedError(None)
        frame.position = token.end()
        return token[0]

    def _enclosed(self, frame: Frame, end: int | None) -> str:
        """Return what stands between the brackets that begin at the frame's position."""
        start = frame.position
        self._spend(LONGEST if end is None else end - start)
        if end is None:
            raise StrandedError(None)
        frame.position = end
        return frame.text[start + 1 : end - 1]


def filled(body: str, arguments: list[str]) -> str:
    """Return a body with its arguments put in; a command and a letter behind it are kept apart."""
    if not arguments:
        return body
    result: list[str] = []
    word = False
    for index, piece in enumerate(PARAMETER.split(body)):
        text = arguments[int(piece) - 1] if index % 2 else piece
        if text:
            if word and text[0].isalpha():
                result.append(" ")
            result.append(text)
            word = ENDS_IN_WORD.search(text) is not None
    return "".join(result)
