"""A TOML file about lines, and where in it each value stands."""

from __future__ import annotations

import re
import tomllib
from collections.abc import Mapping, Sequence
from difflib import get_close_matches
from pathlib import Path
from typing import Any

from closedform.checking.source.errors import SourceKeyError, SourceSyntaxError, SourceValueError
from closedform.checking.source.files import read_text
from closedform.errors import Place
from closedform.model.reading import LARGEST_FILE, LONG_DOTTED_KEY
from closedform.notation.documents.weaving import TextFile

__all__ = ["Table", "read_table"]

HEADING = re.compile(r"(?m)^[ \t]*\[(\[)?[ \t]*([\w-]+)[ \t]*\](?(1)\])[ \t]*(?:#.*)?$")
SETTING = re.compile(r"(?m)^[ \t]*([\w-]+)[ \t]*=[ \t]*")
QUOTES = ('"""', "'''", '"', "'")


class Table:
    """What a TOML file says, and where.

    `name` is that of the file as it is shown.  Keys are found by the text below the headings;
    where that is not certain, a place has a key and no line.
    """

    def __init__(self, name: str, text: str, content: Mapping[str, Any]) -> None:
        self.name, self.content = name, content
        self._file = TextFile(name, text)
        self._values: dict[str, int] = {}
        counts: dict[str, int] = {}
        headings = list(HEADING.finditer(text))
        starts = [0, *(heading.end() for heading in headings)]
        ends = [*(heading.start() for heading in headings), len(text)]
        for heading, start, end in zip((None, *headings), starts, ends, strict=True):
            prefix = ""
            if heading:
                counts[heading[2]] = counts.get(heading[2], 0) + 1
                row = f"{heading[2]}[{counts[heading[2]]}]" if heading[1] else heading[2]
                self._values.setdefault(row, heading.start())
                prefix = f"{row}."
            for setting in SETTING.finditer(text, start, end):
                key = prefix + setting[1]
                self._values[key] = -1 if key in self._values else setting.end()
        self._certain = {
            name
            for name, count in counts.items()
            if isinstance(rows := content.get(name), list) and len(rows) == count
        }

    def _start(self, key: str) -> int | None:
        """Return where a key's value begins, that of a text inside its quotes."""
        start = self._values.get(key, -1)
        if start < 0 or ("[" in key and key.partition("[")[0] not in self._certain):
            return None
        text = self._file.text
        quote = next((q for q in QUOTES if text.startswith(q, start)), "")
        start += len(quote)
        if len(quote) == 3 and text.startswith("\n", start):
            start += 1  # which TOML leaves out
        return min(start, len(text))

    def place(self, key: str) -> Place:
        """Return the place of a key's value; that of a text begins inside its quotes."""
        start = self._start(key)
        if start is None:
            return Place(self.name, key)
        found = self._file.place(start)
        return Place(self.name, key, found.line, found.column)

    def is_as_typed(self, key: str, value: str) -> bool:
        r"""Say whether no escape made a control character of a text: "\theta" holds a tab."""
        start = self._start(key)
        return value.isprintable() or (
            start is not None and self._file.text.startswith(value, start)
        )

    def text(self, table: Mapping[str, Any], key: str, within: str = "") -> str:
        """Return the text under a key of a table, empty if there is none; a number is a text too.

        Raises:  SourceValueError.
        """
        value = table.get(key, "")
        if isinstance(value, bool) or not isinstance(value, str | int):
            place = self.place(within + key)
            raise SourceValueError(place, _kind(value), "text in quotation marks")
        return str(value)

    def rows(self, key: str) -> Sequence[Mapping[str, Any]]:
        """Return the tables under a key, ``[[claim]]``.

        Raises:  SourceValueError.
        """
        value = self.content.get(key, [])
        if not isinstance(value, list) or not all(isinstance(row, Mapping) for row in value):
            raise SourceValueError(self.place(key), _kind(value), f"a list of tables, [[{key}]],")
        return value

    def check(self, table: Mapping[str, Any], known: tuple[str, ...], within: str = "") -> None:
        """Raise SourceKeyError for a key of a table that is not known."""
        for key in table:
            if key not in known:
                near = get_close_matches(key.lower()[:40], known, n=1)
                raise SourceKeyError(
                    self.place(within + key), key, near[0] if near else None, known
                )


def _kind(value: object) -> str:
    """Return what a value is, in words."""
    match value:
        case bool():
            return "true" if value else "false"
        case int():
            return "a number"
        case str():
            return "a text"
        case list():
            return "an array"
        case Mapping():
            return "a table"
    return "a date or time"


def read_table(path: Path, name: str) -> Table:
    """Return what a TOML file says; decimals are kept as they are typed.

    Raises:  SourceFileError, SourceEncodingError, SourceSyntaxError.
    """
    text = read_text(path, name, LARGEST_FILE)
    place = Place(name)
    if LONG_DOTTED_KEY.search(text):  # the TOML reader takes quadratic time for such a key
        raise SourceSyntaxError(place, "a key with dozens of parts")
    try:
        return Table(name, text, tomllib.loads(text, parse_float=str))
    except tomllib.TOMLDecodeError as error:
        reason, _, rest = str(error).partition(" (at ")
        at = re.search(r"line (\d+), column (\d+)", rest)
        if at:
            place = Place(name, None, int(at[1]), int(at[2]))
        raise SourceSyntaxError(place, reason[:1].lower() + reason[1:]) from None
    except RecursionError:
        reason = "arrays or tables are nested hundreds of levels deep"
        raise SourceSyntaxError(place, reason) from None
    except ValueError:  # the only other one: Python converts no integer of so many digits
        raise SourceSyntaxError(place, "an integer with thousands of digits") from None
