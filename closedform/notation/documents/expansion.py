r"""A document with its own macros expanded.

Macros are expanded as TeX does it: the body stands in the place of the macro, no braces are
put around it, and what comes of it is looked at again together with what follows.  Definitions
hold from where they stand to the end of their group.
"""

from __future__ import annotations

import re
from dataclasses import dataclass

from closedform.notation.documents.arguments import (
    ENDS_IN_WORD,
    LONGEST,
    Feed,
    Frame,
    StrandedError,
    filled,
)
from closedform.notation.documents.definitions import (
    DEFINERS,
    Definition,
    Macro,
    read_definition,
)
from closedform.notation.documents.errors import DocumentSizeError
from closedform.notation.documents.flattening import Flat
from closedform.notation.documents.weaving import Weave

__all__ = ["Expanded", "Unfollowed", "expanded"]

MOST_WORK = 10_000_000
"""Characters of arguments and bodies looked at, in all of a document."""
MOST_MARKS = 1_000_000
MOST_CALLS = 1_000
"""Macros that may be expanded in the place of one."""
DEEPEST = 200
MARK = re.compile(r"(?s)\\([a-zA-Z@]+)|(?:\\[^a-zA-Z@])+|[{}]+")
ENVIRONMENT = re.compile(r"\s*\{([^{}\n]*)\}")
ENDLESS = Macro(refused="its expansion does not end, or is too long")
KNOWN = {"ensuremath": Macro("#1", 1), "xspace": Macro()}


@dataclass(frozen=True, slots=True)
class Unfollowed:
    """A macro that is used at an offset, and whose definition was refused."""

    offset: int
    name: str
    reason: str


@dataclass(frozen=True)
class Expanded:
    """The text of a document with its macros expanded; `body` is where the text proper begins."""

    text: str
    body: int
    unfollowed: tuple[Unfollowed, ...]
    weave: Weave


def expanded(flat: Flat) -> Expanded:
    """Return the text with its macros expanded, without their definitions.

    Macros whose definition is refused stay; so does one whose expansion is too long or does
    not end.

    Raises:  DocumentSizeError where all expansions together are too long.
    """
    work = _Expansion(flat)
    work.run()
    return Expanded(
        work.weave.text, work.weave.moved(flat.body), tuple(work.unfollowed), work.weave
    )


class _Expansion:
    """The state of one walk through a text."""

    def __init__(self, flat: Flat) -> None:
        self.flat = flat
        self.base = Frame(flat.text)
        self.feed = Feed(self.base, self._spend)
        self.weave = Weave()
        self.macros: dict[str, Macro] = dict(KNOWN)
        self.undo: list[tuple[int, str, Macro | None]] = []
        self.depth = self.work = self.calls = self.marks = 0
        self.unfollowed: list[Unfollowed] = []

    def run(self) -> None:
        """Walk through the text to its end."""
        text, base = self.flat.text, self.base
        copied = 0
        while found := MARK.search(text, base.position):
            self._spend(0)
            start, base.position = found.start(), found.end()
            word = found[1]
            if word is None:
                self._braces(found[0])
            elif word in DEFINERS:
                self.weave.copy(text, copied, start)
                copied = start
                definition = read_definition(word, text, found.end())
                self._spend(definition.end - start if definition else LONGEST)
                if definition:
                    self._define(definition)
                    copied = base.position = definition.end
            else:
                name = self._name(word, text, found.end())
                if word in ("begin", "begingroup", "bgroup"):
                    self.depth += 1
                if macro := self.macros.get(name):
                    self.weave.copy(text, copied, start)
                    copied = self._use(name, macro, start)
                if word in ("end", "endgroup", "egroup"):
                    self._close(1)
        self.weave.copy(text, copied, len(text))

    def _name(self, word: str, text: str, end: int) -> str:
        """Return the name under which a command is looked up; an environment has two."""
        if word in ("begin", "end") and (found := ENVIRONMENT.match(text, end)):
            return f"{word}{{{found[1].strip()}}}"
        return word

    def _use(self, name: str, macro: Macro, start: int) -> int:
        """Put what a macro stands for, and return from where to copy on."""
        base, at = self.base, self.base.position
        if not macro.refused:
            self.calls = 0
            try:
                result = self._expansion(name, macro)
            except StrandedError as error:
                self.feed.frames = [base]
                base.position = at
                if error.macro is None:
                    return start
                self._set(name, error.macro, lasting=False)
                macro = error.macro
            else:
                self.weave.put(_apart(result), start)
                return base.position
        self.unfollowed.append(Unfollowed(self.weave.length, name, macro.refused))
        return start

    def _expansion(self, name: str, macro: Macro) -> str:
        """Return all that comes of a macro; it may take arguments from the text behind it."""
        pieces: list[str] = []
        length = 0

        def add(piece: str) -> None:
            nonlocal length
            if not piece:
                return
            if pieces and piece[:1].isalpha() and ENDS_IN_WORD.search(pieces[-1]):
                pieces.append(" ")
            pieces.append(piece)
            length += len(piece)
            if length > LONGEST:
                raise StrandedError(ENDLESS)

        first = self._call(name, macro)
        if macro.final:
            return first
        self.feed.frames.append(Frame(first))
        while len(self.feed.frames) > 1:
            frame = self.feed.frames[-1]
            found = MARK.search(frame.text, frame.position)
            if found is None:
                add(frame.text[frame.position :])
                self.feed.frames.pop()
                continue
            self._spend(0)
            add(frame.text[frame.position : found.start()])
            frame.position = found.end()
            inner = self._name(found[1], frame.text, found.end()) if found[1] else ""
            if found[1] in DEFINERS:
                self._poison(found[1], frame)
            known = self.macros.get(inner)
            if known is None:
                add(found[0])
            elif known.refused:
                self.unfollowed.append(Unfollowed(self.weave.length, inner, known.refused))
                add(found[0])
            elif known.final:
                add(known.body)
            else:
                body = self._call(inner, known)
                if len(self.feed.frames) > DEEPEST:
                    raise StrandedError(ENDLESS)
                self.feed.frames.append(Frame(body))
        return "".join(pieces)

    def _call(self, name: str, macro: Macro) -> str:
        """Return the body of a macro with the arguments that follow put in."""
        self.calls += 1
        if self.calls > MOST_CALLS:
            raise StrandedError(ENDLESS)
        if "{" in name:  # the name of an environment is read once more
            frame = self.feed.frames[-1]
            named = ENVIRONMENT.match(frame.text, frame.position)
            frame.position = named.end() if named else frame.position
        arguments = self.feed.arguments(macro.arguments, macro.default)
        self._spend(len(macro.body))
        return filled(macro.body, arguments)

    def _define(self, definition: Definition) -> None:
        """Give macros their meaning, until the group ends if that is all they last."""
        for name, macro in definition.macros:
            meant = self.macros.get(definition.copies, macro) if definition.copies else macro
            if not (definition.weak and name in self.macros):
                self._set(name, meant, lasting=definition.lasting)

    def _set(self, name: str, macro: Macro, *, lasting: bool) -> None:
        if self.depth and not lasting:
            self.undo.append((self.depth, name, self.macros.get(name)))
        self.macros[name] = macro

    def _poison(self, word: str, frame: Frame) -> None:
        """Refuse what is defined in the argument of a macro."""
        if definition := read_definition(word, frame.text, frame.position):
            for name, _ in definition.macros:
                self._set(name, Macro(refused="it is defined inside a macro"), lasting=True)

    def _braces(self, run: str) -> None:
        if run[0] == "\\":
            return
        if not self.undo:
            self.depth = max(0, self.depth + run.count("{") - run.count("}"))
            return
        for brace in run:
            if brace == "{":
                self.depth += 1
            else:
                self._close(1)

    def _close(self, groups: int) -> None:
        """Leave groups, with what was defined inside."""
        self.depth = max(0, self.depth - groups)
        while self.undo and self.undo[-1][0] > self.depth:
            _, name, macro = self.undo.pop()
            if macro is None:
                self.macros.pop(name, None)
            else:
                self.macros[name] = macro

    def _spend(self, characters: int) -> None:
        self.work += characters
        self.marks += 1
        if self.work > MOST_WORK or self.marks > MOST_MARKS:
            raise DocumentSizeError(
                self.flat.place(min(self.base.position, max(len(self.base.text) - 1, 0))),
                "the macros of the document lead to too much text",
                f"{MOST_WORK} characters and {MOST_MARKS} commands are followed",
            )


def _apart(text: str) -> str:
    """Return a text behind which a letter may stand."""
    return f"{text} " if ENDS_IN_WORD.search(text) else text
