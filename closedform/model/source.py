"""The text a model came from, to say in which line something stands."""

from __future__ import annotations

import re
from collections.abc import Callable
from dataclasses import dataclass
from typing import TypeVar

from closedform.errors import Place
from closedform.notation.errors import PlacedError

__all__ = ["Source"]

T = TypeVar("T")

QUOTES = ('"""', "'''", '"', "'")
HEADING = re.compile(r"(?m)^[ \t]*\[[ \t]*([A-Za-z_][\w-]*)[ \t]*\][ \t]*(?:#.*)?$")
"""The heading of a table, such as ``[outputs]``."""
PIECE = re.compile(
    r'''(?s)(?P<comment>\#[^\n]*)|(?P<blank>\s+)|(?P<open>[\[{])|(?P<close>[\]}])|(?P<comma>,)
    |"""(?:\\.|[^\\])*?"""|\'\'\'.*?\'\'\'|"(?:\\.|[^"\\])*"|'[^']*'|[^\s,\[\]{}\#"']+''',
    re.VERBOSE,
)
"""The pieces of a TOML value, as far as they matter for counting the entries of an array."""


@dataclass(frozen=True, slots=True)
class Source:
    """Where a model was stated: `place` names the file, `text` is what it holds.

    The text is valid TOML.  A model that was built from Python values has none; its errors
    name keys only.
    """

    place: Place
    text: str = ""

    def named(self, key: str) -> Place:
        """Return the place of a key without its line."""
        return Place(self.place.file, f"{self.place.key}.{key}" if self.place.key else key)

    def at(self, key: str) -> Place:
        """Return the place of a key or an entry: ``title``, ``matrix[2][3]``, ``outputs.drift``.

        It has a line and a column if they can be told for certain: the key must be set
        in one line of the text only.  This searches the text, so it is for errors.
        """
        start = self._value(key)
        return self.named(key) if start is None else self._place(key, start)

    def at_name(self, key: str) -> Place:
        """Return the place of the key itself, as `at` does for its value."""
        if found := self._setting(key):
            return self._place(key, found.start("name"))
        for heading in HEADING.finditer(self.text):
            if heading[1] == key:
                return self._place(key, heading.start(1))
        return self.named(key)

    def read(self, text: str, key: str, work: Callable[[Place], T]) -> T:
        """Return what `work` makes of the formula that stands under a key.

        If it fails, it is made to fail again with the line and column at which the formula
        starts: the search for them is spared where nothing is wrong.
        """
        try:
            return work(self.named(key))
        except PlacedError:
            start = self._value(key)
            if start is None:
                raise
            quote = next((q for q in QUOTES if self.text.startswith(q, start)), "")
            start += len(quote)
            if len(quote) > 1 and self.text.startswith("\n", start):
                start += 1  # which TOML leaves out
            if not self.text.startswith(text, start):  # it was written with escapes
                raise
            return work(self._place(key, start))

    def _place(self, key: str, start: int) -> Place:
        line = self.text.count("\n", 0, start) + 1
        column = start - self.text.rfind("\n", 0, start)
        excerpt = self.text.split("\n")[line - 1]
        return Place(self.place.file, self.named(key).key, line, column, excerpt)

    def _value(self, key: str) -> int | None:
        """Return where the value of a key, or the entry of an array, starts in the text."""
        name, *indices = re.split(r"[\[\]]+", key.rstrip("]"))
        found = self._setting(name)
        if found is None:
            return None
        start = found.end()
        for index in indices:
            start = self._entry(start, int(index))
        return start

    def _setting(self, key: str) -> re.Match[str] | None:
        """Return the match of ``key =`` in the part of the text below the key's heading.

        There is none for keys of an inline table, and none if several lines look like it.
        """
        table, _, name = key.rpartition(".")
        headings = list(HEADING.finditer(self.text))
        names = ["", *(heading[1] for heading in headings)]
        if names.count(table) != 1:
            return None
        k = names.index(table)
        start = headings[k - 1].end() if k else 0
        end = headings[k].start() if k < len(headings) else len(self.text)
        pattern = rf"""(?m)^[ \t]*(?P<name>["']?{re.escape(name)}["']?)[ \t]*=[ \t]*"""
        found = list(re.compile(pattern).finditer(self.text, start, end))
        return found[0] if len(found) == 1 else None

    def _entry(self, start: int, index: int) -> int:
        """Return where an entry, counted from 1, of the array that starts here starts."""
        depth, count, fresh = 0, 0, False
        for piece in PIECE.finditer(self.text, start):
            if piece.lastgroup in ("comment", "blank"):
                continue
            if fresh and depth == 1:
                count, fresh = count + 1, False
                if count == index:
                    return piece.start()
            if piece.lastgroup == "comma":
                fresh = depth == 1
            elif piece.lastgroup == "open":
                depth += 1
                fresh = depth == 1
            elif piece.lastgroup == "close":
                depth -= 1
        return start
