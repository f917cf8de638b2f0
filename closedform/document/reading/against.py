"""The statements of a document aligned with those of the rendering that it ought to be."""

from __future__ import annotations

from collections.abc import Iterator, Sequence
from dataclasses import dataclass, replace
from difflib import SequenceMatcher
from itertools import groupby

from closedform.checking.claim import SourceLine
from closedform.checking.verdict import LineVerdict, Word
from closedform.document.display import RELATIONS
from closedform.document.printed import Printed
from closedform.document.reading.back import reader_for
from closedform.document.reading.comparing import read_chain
from closedform.document.reading.decimals import cells_of
from closedform.document.reading.expected import Chain
from closedform.document.reading.found import displays_in, line_at, tables_in
from closedform.document.reading.rows import SideTexts, statements_of
from closedform.document.reading.sides import SideReader, UnreadSideError
from closedform.errors import Place
from closedform.notation.written.tree import Statement

__all__ = ["verdicts"]

MISSING = "The write-up of the model has a display here that the document has not: {}."
STRANGE = "The write-up of the model has no such statement, so that it was not judged."
OTHERWISE = "The write-up of the model says otherwise here."
WRITTEN_RELATIONS = {"<=": "≤", ">=": "≥", "!=": "≠", "~~": "≈"}
LEAST_LIKENESS = 0.4
"""Texts that are less alike are not taken for one that was edited."""


@dataclass(frozen=True)
class _Item:
    """A statement as it stands in a document; `chain` is None if it is not read, and why.

    `display` is the number of the display in the rendering, for those that are to be there.
    """

    texts: SideTexts
    place: int
    display: int = 0
    says: str = ""
    chain: Chain | None = None
    unread: str = ""
    read: tuple[Statement, ...] = ()

    @property
    def latex(self) -> str:
        """The statement in one line."""
        signs = [RELATIONS[word] for word in self.texts.relations]
        pairs = zip(self.texts.sides, [*signs, ""], strict=True)
        return " ".join(part for pair in pairs for part in pair if part)


def verdicts(
    text: str, path: str, fresh: str, printed: Printed, time: str
) -> tuple[LineVerdict, ...]:
    """Return a verdict on each displayed statement of a document, and on tables of decimals.

    `fresh` is the text that the document ought to be, which prints `printed` and was read
    back.  A statement that is set otherwise but says the same holds; one that is missing is
    told at the line of the next.
    """
    wanted = list(_items_of(fresh, printed, time))
    found = list(_items_in(text, wanted, printed, time))
    results = [*_compared(wanted, found, len(text)), *_tables(text, fresh)]
    lines = text.splitlines()
    numbered: list[LineVerdict] = []
    for number, (item, verdict) in enumerate(results, start=1):
        at = line_at(text, min(item.place, max(len(text) - 1, 0)))
        place = Place(file=path, line=at, excerpt=lines[at - 1] if at <= len(lines) else "")
        line = SourceLine(number, item.latex, place)
        numbered.append(replace(verdict, line=line, says=item.says, read=item.read))
    return tuple(numbered)


def _items_of(fresh: str, printed: Printed, time: str) -> Iterator[_Item]:
    """Return the statements of a rendering, each with what it says."""
    pairs = zip(displays_in(fresh), printed.displays, strict=True)
    for number, (display, shown) in enumerate(pairs):
        reader = reader_for(shown.statements, time)
        texts = statements_of(display.body, aligned=display.aligned)
        for place, each in enumerate(texts):
            says = shown.statements[min(place, len(shown.statements) - 1)].says
            yield replace(_read(each, 0, reader), says=says, display=number)


def _items_in(text: str, wanted: Sequence[_Item], printed: Printed, time: str) -> Iterator[_Item]:
    """Return the statements of a document; what is set as in the rendering is read as there."""
    known = {(item.texts.sides, item.texts.relations): item for item in wanted}
    reader = reader_for([s for shown in printed.displays for s in shown.statements], time)
    for display in displays_in(text):
        for each in statements_of(display.body, aligned=display.aligned):
            at = display.inside + each.start
            same = known.get((each.sides, each.relations))
            yield replace(same, place=at) if same is not None else _read(each, at, reader)


def _read(texts: SideTexts, at: int, reader: SideReader) -> _Item:
    item = _Item(texts, at)
    try:
        chain = read_chain(texts, reader)
    except UnreadSideError as error:
        return replace(item, unread=error.reason)
    trees = [reader.tree(side) for side in texts.sides]
    signs = tuple(WRITTEN_RELATIONS.get(word, word) for word in texts.relations)
    known = tuple(tree for tree in trees if tree is not None)
    read = (Statement(known, signs),) if len(known) == len(trees) else ()
    return replace(item, chain=chain, read=read)


_Judged = list[tuple[_Item, LineVerdict]]


def _compared(wanted: Sequence[_Item], found: Sequence[_Item], end: int) -> _Judged:
    """Return a verdict on each statement found, and on each that is missing, in order."""
    keys = [item.chain for item in wanted]
    others = [item.chain if item.chain is not None else item.place for item in found]
    present, due = set(others), set(keys)
    results: _Judged = []
    matcher = SequenceMatcher(None, keys, others, autojunk=False)
    for _, first, last, begin, stop in matcher.get_opcodes():
        missing = [item for item in wanted[first:last] if item.chain not in present]
        strange = [k for k in range(begin, stop) if others[k] not in due]
        partners = _partners(missing, [found[k] for k in strange])
        edited = dict(zip(strange, partners, strict=True))
        for k in range(begin, stop):
            results.append(
                _judged(found[k], edited[k]) if k in edited else (found[k], _verdict("holds"))
            )
        at = found[stop].place if stop < len(found) else end
        left = [item for item in missing if not any(item is own for own in partners)]
        results += _missing(left, at)
    return results


def _missing(items: Sequence[_Item], at: int) -> Iterator[tuple[_Item, LineVerdict]]:
    """Return one verdict for each display of which statements are missing."""
    for _, group in groupby(items, key=lambda item: item.display):
        first, *others = group
        says = ", ".join(dict.fromkeys(item.says for item in (first, *others)))
        verdict = _verdict("fails", MISSING.format(says))
        right = first.read[0].members[-1] if first.read and not others else None
        yield replace(first, place=at, says=says, read=()), replace(verdict, right=right)


def _partners(missing: Sequence[_Item], strange: Sequence[_Item]) -> list[_Item | None]:
    """Return, for each statement that ought not to be there, the one that it was, if any.

    As many as are missing are taken in their order; else each takes the one most like it.
    """
    if len(missing) == len(strange):
        return list(missing)
    free = list(missing)
    partners: list[_Item | None] = []
    for item in strange:
        likeness = [SequenceMatcher(None, item.latex, own.latex).ratio() for own in free]
        best = max(likeness, default=0.0)
        partners.append(free.pop(likeness.index(best)) if best >= LEAST_LIKENESS else None)
    return partners


def _judged(item: _Item, own: _Item | None) -> tuple[_Item, LineVerdict]:
    said = replace(item, says=own.says if own else "display")
    if item.chain is None:
        return said, _verdict("not read", f"It is not read: {item.unread}")
    if own is None:
        return said, _verdict("not read", STRANGE)
    verdict = _verdict("fails", OTHERWISE)
    right = own.read[0].members[-1] if own.read else None
    return said, replace(verdict, right=right)


def _verdict(word: Word, reason: str = "") -> LineVerdict:
    return LineVerdict(SourceLine(0, ""), "", word, reason)


def _tables(text: str, fresh: str) -> _Judged:
    """Return a verdict on each table of decimals; it fails by its first row that is otherwise."""
    wanted, found = tables_in(fresh), tables_in(text)
    results: _Judged = []
    for place, table in enumerate(found):
        item = _Item(SideTexts(("",), ()), table.start, says="table of values")
        if place >= len(wanted):
            results.append((item, _verdict("not read", STRANGE)))
            continue
        verdict = _verdict("holds")
        for number, (row, own) in enumerate(zip(table.rows, wanted[place].rows, strict=False)):
            if cells_of(row) != cells_of(own):
                verdict = _verdict("fails", f"Row {number} of the values is otherwise.")
                texts = SideTexts((" & ".join(row),), ())
                item = replace(item, texts=texts, place=table.starts[number])
                break
        else:
            if len(table.rows) != len(wanted[place].rows):
                verdict = _verdict("fails", "Rows of the values are missing, or too many.")
        results.append((item, verdict))
    for _ in wanted[len(found) :]:
        item = _Item(SideTexts(("",), ()), len(text), says="table of values")
        results.append((item, _verdict("fails", MISSING.format(item.says))))
    return results
