r"""A document as one text: the files that it takes in, without comments and listings.

What TeX does not set is left out: comments, ``verbatim`` and its like, ``\iffalse`` to
``\fi``, and what stands behind ``\end{document}``.  The branches of other conditionals are all
kept, since which of them is set cannot be told from the text.
"""

from __future__ import annotations

import re
from collections.abc import Callable
from dataclasses import dataclass

from closedform.errors import Place
from closedform.notation.documents.errors import (
    DocumentSizeError,
    IncludedFileError,
    UnendedError,
)
from closedform.notation.documents.weaving import TextFile, Weave

__all__ = ["Comment", "Flat", "Opener", "flattened"]

MOST_FILES = 200
LARGEST_TEXT = 8_000_000
"""Characters of a document, all its files together."""
MOST_MARKS = 1_000_000
MOST_REMARKS = 10_000
LONGEST_VERB = 1_000
LISTINGS = frozenset(
    (
        *("verbatim", "verbatim*", "Verbatim", "Verbatim*", "BVerbatim", "LVerbatim"),
        *("lstlisting", "minted", "comment", "alltt", "filecontents", "filecontents*"),
        "tikzpicture",
    )
)
PICTURES = (".pdf_tex", ".eps_tex", ".pgf", ".tikz")
MARK = re.compile(
    r"""(?sx) (?:\\[^a-zA-Z])+ | (?P<comment>%[^\n]*)
    | \\ (?P<word> begin | end | input | include | endinput | iffalse | verb | lstinline
         | mintinline | import | subimport | subfile | subfileinclude ) (?![a-zA-Z@])"""
)
ENVIRONMENT = re.compile(r"\s*\{([^{}\n]*)\}")
FILE_NAME = re.compile(r"\s*\{([^{}\n]*)\}|[ \t]+([^\s{}\\%]+)")
VERB = re.compile(r"(?:\*|[ \t]*\[[^\]\n]*\])?(?:\{([^{}\n]*)\})?([^\sa-zA-Z])")
CONDITIONAL = re.compile(
    r"""(?sx) %[^\n]* | \\[^a-zA-Z] | \\newif\s*\\[a-zA-Z@]+ | \\ (?P<word> else | fi
    | if (?: | cat | num | dim | odd | [vh]mode | mmode | inner | void | [vh]box | x | eof | true
    | false | case | defined | csname | fontchar ) ) (?![a-zA-Z@])"""
)
"""The conditionals of TeX itself; ``\\iff`` and ``\\ifthenelse`` are none of them."""
REMARK = re.compile(r"%+[ \t]*closedform[ \t]*:(.*)")

Opener = Callable[[str, Place], TextFile]
"""Opens the file of a name that is written at a place; raises an InputError if it cannot."""


@dataclass(frozen=True, slots=True)
class Comment:
    """A comment addressed to this program: what follows ``% closedform:``.

    `offset` is where it stood in the flat text; `alone` says that its line holds nothing else.
    """

    text: str
    place: Place
    offset: int
    alone: bool


@dataclass(frozen=True)
class Flat:
    """A document in one text.  `body` is where its text proper begins, 0 for a fragment."""

    text: str
    files: tuple[TextFile, ...]
    comments: tuple[Comment, ...]
    body: int
    weave: Weave

    def place(self, offset: int, *, excerpt: bool = False) -> Place:
        """Return the file, line and column from which a character came."""
        number, start = self.weave.origin(offset)
        return self.files[number].place(start, excerpt=excerpt)


def flattened(file: TextFile, opener: Opener) -> Flat:
    r"""Return a document with the files that it takes in.

    Raises:  UnendedError for a listing or ``\iffalse`` without end, IncludedFileError for a
             file that takes itself in, DocumentSizeError, and what `opener` raises.
    """
    work = _Flattening(opener)
    work.add(file)
    return Flat(
        work.weave.text, tuple(work.files), tuple(work.comments), max(work.body, 0), work.weave
    )


class _Flattening:
    """The state of one walk through the files of a document."""

    def __init__(self, opener: Opener) -> None:
        self.opener = opener
        self.weave = Weave()
        self.files: list[TextFile] = []
        self.comments: list[Comment] = []
        self.body = -1
        self.size = self.marks = 0
        self.open: list[str | None] = []
        self.ended = False

    def add(self, file: TextFile) -> None:
        """Add a file, up to its end or that of the document."""
        number, text = len(self.files), file.text
        self.files.append(file)
        self.open.append(file.name)
        self.size += len(text)
        if self.size > LARGEST_TEXT:
            raise DocumentSizeError(
                Place(file.name),
                f"the document has more than {LARGEST_TEXT} characters",
                "that many are read",
            )
        position: int | None = 0
        while position is not None and (found := MARK.search(text, position)):
            self.marks += 1
            if self.marks > MOST_MARKS:
                raise DocumentSizeError(
                    Place(file.name),
                    f"the document has more than {MOST_MARKS} comments and commands",
                    "that many are read",
                )
            if found["comment"]:
                position = self._comment(number, position, found)
            elif found["word"]:
                self.weave.copy(text, position, found.start(), number)
                position = self._word(number, found)
            else:
                self.weave.copy(text, position, found.end(), number)
                position = found.end()
        if position is not None:
            self.weave.copy(text, position, len(text), number)
        self.open.pop()

    def _comment(self, number: int, position: int, found: re.Match[str]) -> int:
        """Leave a comment out, with the end of its line if it fills the line."""
        file = self.files[number]
        start = found.start()
        line = max(file.text.rfind("\n", position, start) + 1, position)
        at_start = line == 0 or file.text[line - 1] == "\n"
        alone = at_start and not file.text[line:start].strip()
        self.weave.copy(file.text, position, line if alone else start, number)
        if remark := REMARK.match(found[0]):
            place = file.place(start, excerpt=True)
            if len(self.comments) >= MOST_REMARKS:
                raise DocumentSizeError(
                    place,
                    f"the document has more than {MOST_REMARKS} comments to this program",
                    "that many are read",
                )
            self.comments.append(Comment(remark[1].strip(), place, self.weave.length, alone))
        return min(found.end() + alone, len(file.text))

    def _word(self, number: int, found: re.Match[str]) -> int | None:
        r"""Return where to go on after a command; None ends the file."""
        file, word = self.files[number], found["word"]
        match word:
            case "begin" | "end":
                return self._environment(number, found)
            case "endinput":
                return None
            case "iffalse":
                return _end_of_false(file, found)
            case "verb" | "lstinline" | "mintinline":
                return _end_of_verb(file.text, found.end())
        name = FILE_NAME.match(file.text, found.end())
        if name is None:
            return found.end()
        self._take_in(word, name[1] or name[2] or "", file.place(found.start(), excerpt=True))
        return None if self.ended else name.end()

    def _environment(self, number: int, found: re.Match[str]) -> int | None:
        r"""Return where to go on after \begin{..} or \end{..}."""
        file = self.files[number]
        named = ENVIRONMENT.match(file.text, found.end())
        name = named[1] if named else ""
        end = named.end() if named else found.end()
        if name == "document":
            if found["word"] == "end":
                self.ended = True
                return None
            if self.body < 0:
                self.body = self.weave.length
        elif found["word"] == "begin" and name in LISTINGS:
            closing = rf"\end{{{name}}}"
            stop = file.text.find(closing, end)
            if stop < 0:
                place = file.place(found.start(), excerpt=True)
                raise UnendedError(place, found[0] + f"{{{name}}}", closing)
            return stop + len(closing)
        else:
            self.weave.copy(file.text, found.start(), end, number)
        return end

    def _take_in(self, word: str, name: str, place: Place) -> None:
        r"""Add the file that \input or \include names."""
        name = name.strip().strip('"')
        if "#" in name or name.endswith(PICTURES):  # within a definition, or a picture
            return
        if word not in ("input", "include"):
            reason = rf"\{word} is not followed; write \input"
            raise IncludedFileError(place, name, reason)
        if not name or "\\" in name:
            raise IncludedFileError(place, name, "its name must be written out")
        if len(self.files) >= MOST_FILES:
            raise IncludedFileError(place, name, f"at most {MOST_FILES} files are taken in")
        file = self.opener(name, place)
        if file.name in self.open:
            raise IncludedFileError(place, name, "it takes itself in; break the circle")
        self.add(file)


def _end_of_false(file: TextFile, found: re.Match[str]) -> int:
    r"""Return where the text that \iffalse hides ends: behind its \fi or \else."""
    depth = 1
    for mark in CONDITIONAL.finditer(file.text, found.end()):
        word = mark["word"]
        if word == "fi":
            depth -= 1
        elif word and word != "else":
            depth += 1
        if depth == 0 or (word == "else" and depth == 1):
            return mark.end()
    raise UnendedError(file.place(found.start(), excerpt=True), r"\iffalse", r"\fi")


def _end_of_verb(text: str, start: int) -> int:
    r"""Return where the text of ``\verb|..|`` ends; it never runs over the end of a line."""
    found = VERB.match(text, start)
    if found is None:
        return start
    closing = "}" if found[2] == "{" else found[2]
    stop = text.find(closing, found.end(), found.end() + LONGEST_VERB)
    return start if stop < 0 or "\n" in text[found.end() : stop] else stop + 1
