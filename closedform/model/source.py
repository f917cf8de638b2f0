"""The text a model came from, to say in which line something stands."""

from __future__ import annotations

import re
from collections.abc import Callable, Iterator
from dataclasses import dataclass
from typing import NamedTuple, TypeVar

from closedform.errors import Place
from closedform.notation.errors import PlacedError

__all__ = ["Source"]

T = TypeVar("T")

QUOTES = ('"""', "'''", '"', "'")
HEADING = re.compile(
    r"""(?mx) ^[ \t]* (?P<open> \[\[? ) [ \t]*
    (?P<name> [A-Za-z_][\w-]* (?: [ \t]*\.[ \t]* (?: [\w-]+ | "[^"\n]*" | '[^'\n]*' ) )* )
    [ \t]* \]\]? [ \t]* (?: \#.* )? $"""
)
"""The heading of a table, such as ``[outputs]``, ``[parameters.k]`` or ``[[values]]``."""
PIECE = re.compile(
    r'''(?s)(?P<comment>\#[^\n]*)|(?P<blank>\s+)|(?P<open>[\[{])|(?P<close>[\]}])|(?P<comma>,)
    |"""(?:\\.|[^\\])*?"""|\'\'\'.*?\'\'\'|"(?:\\.|[^"\\])*"|'[^']*'|[^\s,\[\]{}\#"']+''',
    re.VERBOSE,
)
"""The pieces of a TOML value, as far as they matter for counting the entries of an array."""

Path = tuple[str | int, ...]
"""The parts of a key, entries counted from 1: ``values[2].m`` is ("values", 2, "m")."""


class _Section(NamedTuple):
    """A heading with the text below it; `name` is where its last part starts."""

    path: Path
    name: int
    start: int
    end: int


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
        """Return the place of a key or an entry: ``title``, ``matrix[2][3]``, ``values[2].m``.

        It has a line and a column if they can be told for certain: the key must be set
        in one line of the text only.  This searches the text, so it is for errors.
        """
        found = self._found(key)
        return self.named(key) if found is None else self._place(key, found[1])

    def at_name(self, key: str) -> Place:
        """Return the place of the key itself, or of its heading, as `at` does for its value."""
        if found := self._found(key):
            return self._place(key, found[0])
        path = _path(key)
        for section in self._sections():
            if path and section.path[: len(path)] == path:
                return self._place(key, section.name)
        return self.named(key)

    def read(self, text: str, key: str, work: Callable[[Place], T]) -> T:
        """Return what `work` makes of the formula that stands under a key.

        If it fails, it is made to fail again with the line and column at which the formula
        starts: the search for them is spared where nothing is wrong.
        """
        try:
            return work(self.named(key))
        except PlacedError:
            found = self._found(key)
            if found is None:
                raise
            start = found[1]
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

    def _sections(self) -> Iterator[_Section]:
        """Yield the text before the first heading, then each heading's."""
        headings = list(HEADING.finditer(self.text))
        starts = [0, *(heading.end() for heading in headings)]
        ends = [*(heading.start() for heading in headings), len(self.text)]
        yield _Section((), 0, starts[0], ends[0])
        rows: dict[str, int] = {}
        for heading, start, end in zip(headings, starts[1:], ends[1:], strict=True):
            parts = list(re.finditer(r"\"[^\"\n]*\"|'[^'\n]*'|[\w-]+", heading["name"]))
            path: Path = tuple(part[0].strip("\"'") for part in parts)
            if len(heading["open"]) > 1:
                name = heading["name"]
                rows[name] = rows.get(name, 0) + 1
                path = (*path, rows[name])
            yield _Section(path, heading.start("name") + parts[-1].start(), start, end)

    def _found(self, key: str) -> tuple[int, int] | None:
        """Return where a key, or an entry of an array, and where its value starts.

        The key may stand below a heading, be dotted, or belong to an inline table; there is
        none if several lines look like it.
        """
        path = _path(key)
        sections = list(self._sections())
        for head in range(len(path) - 1, -1, -1):
            below = [section for section in sections if section.path == path[:head]]
            if len(below) != 1:
                continue
            for tail in range(len(path), head, -1):
                if found := self._setting(path[head:tail], below[0]):
                    return self._inside(found.start("name"), found.end(), path[tail:])
        return None

    def _setting(self, parts: Path, section: _Section) -> re.Match[str] | None:
        """Return the match of ``a.b =`` below a heading, if there is one only."""
        if any(isinstance(part, int) for part in parts):
            return None
        dotted = r"[ \t]*\.[ \t]*".join(rf"""["']?{re.escape(str(part))}["']?""" for part in parts)
        pattern = re.compile(rf"(?m)^[ \t]*(?P<name>{dotted})[ \t]*=[ \t]*")
        found = list(pattern.finditer(self.text, section.start, section.end))
        return found[0] if len(found) == 1 else None

    def _inside(self, name: int, value: int, path: Path) -> tuple[int, int] | None:
        """Return where the part of a value, and where the value of that part starts."""
        for part in path:
            if isinstance(part, int):
                name = value = self._entry(value, part)
                continue
            found = self._member(value, part)
            if found is None:
                return None
            name, value = found.start(), found.end()
        return name, value

    def _entry(self, start: int, index: int) -> int:
        """Return where an entry, counted from 1, of the array that starts here starts."""
        for count, entry in enumerate(self._entries(start), start=1):
            if count == index:
                return entry
        return start

    def _member(self, start: int, name: str) -> re.Match[str] | None:
        """Return the match of ``name =`` in the inline table that starts here."""
        pattern = re.compile(rf"""["']?{re.escape(name)}["']?\s*=\s*""")
        if not self.text.startswith("{", start):
            return None
        found = (pattern.match(self.text, entry) for entry in self._entries(start))
        return next((match for match in found if match), None)

    def _entries(self, start: int) -> Iterator[int]:
        """Yield where each entry of the array or the inline table that starts here starts."""
        depth, fresh = 0, False
        for piece in PIECE.finditer(self.text, start):
            if piece.lastgroup in ("comment", "blank"):
                continue
            if fresh and depth == 1 and piece.lastgroup != "close":
                fresh = False
                yield piece.start()
            if piece.lastgroup == "comma":
                fresh = depth == 1
            elif piece.lastgroup == "open":
                depth += 1
                fresh = depth == 1
            elif piece.lastgroup == "close":
                depth -= 1
            if depth <= 0:
                return


def _path(key: str) -> Path:
    """Return the parts of a key."""
    return tuple(
        int(index) if index else name for name, index in re.findall(r"([^.\[\]]+)|\[(\d+)\]", key)
    )
