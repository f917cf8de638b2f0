"""Typed mathematics, as in mails, notes and comments, read into the tree of what was written.

How it reads where people might differ; where two readings are usual, the other is among
`others` of the `Reading` and the place among its ambiguities.

- ``-2^2`` is -4, ``2^-t`` is 2^(-t), ``1/2 t`` is (1/2) t, ``1/2t`` too; ``t/RC`` is t/(R C).
- ``2e^(-t)`` is twice the exponential, ``2e-3`` a number.
- A word is a declared name, else a function or constant, else a product of such (``at``).
- A comma between digits is a decimal comma, unless it stands in a list or there are points.
- ``[0 1; -5 -2]`` and ``[[0, 1], [-5, -2]]`` are matrices, ``(1, -2, 4)^T`` is a column.
"""

from __future__ import annotations

from closedform.errors import Place
from closedform.notation.reader import place_of
from closedform.notation.written.grammar import StoppedError
from closedform.notation.written.tree import Ambiguity, Declared, Reading, Statement
from closedform.notation.written.typed_places import Doubt, Signs
from closedform.notation.written.typed_scanner import Lexeme, Scanner, StrayError
from closedform.notation.written.typed_statements import statements_of
from closedform.notation.written.written_errors import (
    NotReadError,
    UnexpectedPartError,
    UnusableNotationError,
    WrittenLengthError,
)

__all__ = ["LONGEST", "read_typed"]

LONGEST = 20_000
"""Characters of one text."""
MOST_OTHERS = 8
"""Other readings that are given at most, each with one place read differently."""
NOWHERE = Place()
NOBODY = Declared()


def read_typed(text: str, declared: Declared = NOBODY, *, place: Place = NOWHERE) -> Reading:
    """Return the statements of a typed text, with the places that are read in two ways.

    `place` is where the text begins; without a line, errors count from 1 within the text.

    Raises:  NotReadError; nothing is guessed.
    """
    if len(text) > LONGEST:
        raise WrittenLengthError(place, len(text), LONGEST)
    try:
        scanner = Scanner(text, declared)
        lexemes = scanner.lexemes()
        if not lexemes:
            raise UnexpectedPartError(place_of(text, 0, place), "", "a formula")
        statements, doubts = _read(text, lexemes, declared, frozenset())
        doubts += [_comma(text, *bounds) for bounds in scanner.commas]
    except StrayError as error:
        raise UnusableNotationError(
            place_of(text, error.at, place), error.found, error.why
        ) from None
    except StoppedError as error:
        raise _refusal(error, text, place) from None
    return Reading(
        statements,
        tuple(Ambiguity(text[d.start : d.end], d.chosen, d.other, d.decided_by) for d in doubts),
        tuple(_others(text, lexemes, declared, statements, doubts)),
    )


def _read(
    text: str, lexemes: list[Lexeme], declared: Declared, flipped: frozenset[int]
) -> tuple[tuple[Statement, ...], list[Doubt]]:
    signs = Signs(text, list(lexemes), flipped)
    statements = statements_of(signs, declared)
    return statements, [signs.doubts[at] for at in sorted(signs.doubts)]


def _comma(text: str, start: int, end: int) -> Doubt:
    """Return the doubt about a comma between digits, which might part two numbers."""
    first, _, second = text[start:end].partition(",")
    return Doubt(start, end, f"{first}.{second}", f"{first} and {second}")


def _others(
    text: str,
    lexemes: list[Lexeme],
    declared: Declared,
    chosen: tuple[Statement, ...],
    doubts: list[Doubt],
) -> list[tuple[Statement, ...]]:
    """Return the readings with one doubtful place read in the other way, those that there are."""
    found: list[tuple[Statement, ...]] = []
    for doubt in doubts[:MOST_OTHERS]:
        try:
            other, _ = _read(text, lexemes, declared, frozenset({doubt.start}))
        except (StrayError, StoppedError):
            continue  # read so, the text is no formula: that is not what was meant
        if other != chosen and other not in found:
            found.append(other)
    return found


def _refusal(error: StoppedError, text: str, place: Place) -> NotReadError:
    start = error.found.start_pos if error.found is not None else len(text.rstrip())
    end = error.found.end_pos if error.found is not None else None
    where = place_of(text, start or 0, place)
    found = text[start : end or start]
    if error.why:
        return UnusableNotationError(where, found or text, error.why)
    operand = "ATOM" in error.expected
    return UnexpectedPartError(where, found, "a number or a name" if operand else "an operator")
