"""Text put together from pieces of other texts, which knows where each piece came from."""

from __future__ import annotations

import re
from bisect import bisect_right

from closedform.errors import Place

__all__ = ["TextFile", "Weave"]

LONGEST_EXCERPT = 400


class TextFile:
    """The text of a file; `name` is None for a text that stands in no file."""

    def __init__(self, name: str | None, text: str) -> None:
        self.name, self.text = name, text
        self._breaks = [found.start() for found in re.finditer("\n", text)]

    def place(self, offset: int, *, excerpt: bool = False) -> Place:
        """Return the place of a character, with its line of text if that is not too long."""
        line = bisect_right(self._breaks, offset - 1)
        start = self._breaks[line - 1] + 1 if line else 0
        end = self._breaks[line] if line < len(self._breaks) else len(self.text)
        shown = self.text[start:end] if excerpt and end - start <= LONGEST_EXCERPT else None
        return Place(self.name, None, line + 1, offset - start + 1, shown)


class Weave:
    """Pieces of texts in a row.

    A piece is copied from a text, or stands for something at one place of it (the expansion
    of a macro).  Texts are told by a number; offsets count characters.
    """

    def __init__(self) -> None:
        self.length = 0
        self._parts: list[str] = []
        self._starts: list[int] = []
        self._origins: list[tuple[int, int, bool]] = []

    @property
    def text(self) -> str:
        """All of the text."""
        return "".join(self._parts)

    def copy(self, text: str, start: int, end: int, number: int = 0) -> None:
        """Add what stands from `start` to `end` of a text."""
        if start < end:
            self._add(text[start:end], (number, start, True))

    def put(self, piece: str, at: int, number: int = 0) -> None:
        """Add a piece that stands for something at one place of a text."""
        if piece:
            self._add(piece, (number, at, False))

    def _add(self, piece: str, origin: tuple[int, int, bool]) -> None:
        self._parts.append(piece)
        self._starts.append(self.length)
        self._origins.append(origin)
        self.length += len(piece)

    def origin(self, offset: int) -> tuple[int, int]:
        """Return the number of the text, and the offset in it, from which a character came."""
        piece = bisect_right(self._starts, offset) - 1
        if piece < 0:
            return 0, 0
        number, start, copied = self._origins[piece]
        return number, start + (offset - self._starts[piece] if copied else 0)

    def moved(self, offset: int) -> int:
        """Return where a character of the only text stands now, or what follows it."""
        piece = bisect_right(self._origins, offset, key=lambda origin: origin[1]) - 1
        if piece < 0:
            return 0
        _, start, copied = self._origins[piece]
        if offset == start:
            return self._starts[piece]
        end = self._starts[piece + 1] if piece + 1 < len(self._starts) else self.length
        return min(self._starts[piece] + offset - start, end) if copied else end
