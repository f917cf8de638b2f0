"""The inputs that a model declares: formulas, pieces, repeats."""

from __future__ import annotations

from collections.abc import Mapping, Sequence
from dataclasses import dataclass, replace
from fractions import Fraction
from typing import Generic, TypeVar

from closedform.algebra.field import Scalar
from closedform.errors import Place
from closedform.model.driven.arrangement import cut
from closedform.model.driven.input_formulas import InputFormulas
from closedform.model.driven.instants import Order, Signs, order_of_numbers, signs_of_numbers
from closedform.model.driven.piece_errors import (
    ImpulseOutsideError,
    OutsidePeriodError,
    PeriodError,
    PeriodMissingError,
    PieceOrderError,
    PiecesOverlapError,
    RepeatCountError,
    TwoFormsError,
)
from closedform.model.driven.signal import Repeat, Signal
from closedform.model.driven.signal_algebra import added
from closedform.model.entries import number_from
from closedform.model.errors import MissingKeyError, WrongKindError
from closedform.model.keys import check_table, refuse_misplaced
from closedform.model.naming import Names, named_in
from closedform.model.source import Source
from closedform.model.statement import array_of, table_of, text_of
from closedform.notation.arithmetic import Arithmetic
from closedform.notation.expression import Expression, names_in
from closedform.notation.plain import plain
from closedform.notation.terms import surd_formula

__all__ = ["Declared", "declared_inputs"]

T = TypeVar("T")
NOWHERE = Place()

PIECE_KEYS = ("from", "to", "is")
REPEAT_KEYS = ("period", "count", "start")
TABLE_KEYS = (*PIECE_KEYS, "pieces", "unit", "meaning", *REPEAT_KEYS)
USUAL_KEYS = {
    "formula": "is",
    "expression": "is",
    "value": "is",
    "f": "is",
    "begin": "from",
    "since": "from",
    "end": "to",
    "until": "to",
    "repeat": "period",
    "every": "period",
    "number": "count",
    "repeats": "count",
    "units": "unit",
    "description": "meaning",
    "name": "meaning",
}


@dataclass(frozen=True, slots=True)
class Declared:
    """An input as declared; its signal has values of the arithmetic with which it was read.

    `definition` is its formula, None where it has pieces.  `names` are those of the
    parameters, pi among them, in any of its formulas.
    """

    name: str
    definition: Expression | None
    signal: Signal
    unit: str = ""
    meaning: str = ""
    names: frozenset[str] = frozenset()


def declared_inputs(
    value: object,
    names: Names,
    source: Source,
    arithmetic: Arithmetic[T],
    signs: Signs | None = None,
) -> tuple[tuple[Declared, ...], Names]:
    """Return the inputs in the order of their declaration, and the names with theirs.

    `signs` tells the signs of elements with parameters, as far as they are known.

    Raises:  the errors of ``piece_errors`` and ``signal_errors``, those of names, keys and
             kinds of values, and what the reader and the arithmetic raise.
    """
    table = table_of(value, "a table with a formula for each input", "inputs", source)
    for name in table:
        refuse_misplaced(str(name), "inputs", source)
    names = named_in(table, "inputs", "an input", names, source)
    formulas = InputFormulas(names, source, arithmetic, signs or signs_of_numbers(arithmetic))
    return tuple(
        _Declaring(formulas, f"inputs.{name}").input(name, given) for name, given in table.items()
    ), names


@dataclass(frozen=True, slots=True)
class _Piece:
    """A formula with its window; `text` quotes it, `names` are those of its parameters."""

    formula: Expression
    signal: Signal
    start: Scalar | None
    end: Scalar | None
    text: str
    names: frozenset[str]


@dataclass(frozen=True)
class _Declaring(Generic[T]):
    """What stays the same while one input is read; `key` is its own."""

    formulas: InputFormulas[T]
    key: str

    @property
    def source(self) -> Source:
        return self.formulas.source

    def order(self, place: Place) -> Order:
        return order_of_numbers(self.formulas.arithmetic, place, self.formulas.signs)

    def input(self, name: str, given: object) -> Declared:
        if isinstance(given, Mapping):
            return self._of_table(name, given)
        if isinstance(given, str) or not isinstance(given, Sequence):
            piece = self._piece({"is": given}, self.key, whole=True)
            return Declared(name, piece.formula, piece.signal, names=piece.names)
        pieces = self._pieces(given, self.key)
        return self._joined(name, pieces, None, frozenset())

    def _of_table(self, name: str, table: Mapping[str, object]) -> Declared:
        check_table(table, TABLE_KEYS, self.key, self.source, usual=USUAL_KEYS)
        if "pieces" in table:
            if any(key in table for key in PIECE_KEYS):
                raise TwoFormsError(self.source.at_name(self.key), name)
            pieces = self._pieces(table["pieces"], f"{self.key}.pieces")
        else:
            pieces = (self._piece(table, self.key),)
        repeat, used = self._repeat(table)
        declared = self._joined(name, pieces, repeat, used)
        if "is" in table and not {"from", "to"} & set(table):
            declared = replace(declared, definition=pieces[0].formula)
        return replace(
            declared,
            unit=text_of(table.get("unit", ""), f"{self.key}.unit", self.source),
            meaning=text_of(table.get("meaning", ""), f"{self.key}.meaning", self.source),
        )

    def _pieces(self, given: object, key: str) -> tuple[_Piece, ...]:
        expected = 'an array of pieces, as [{from = "0", to = "2", is = "5"}],'
        array = array_of(given, expected, key, self.source)
        if not array:
            raise WrongKindError(self.source.at(key), expected, "an empty array")
        pieces = []
        for k, entry in enumerate(array, start=1):
            own = f"{key}[{k}]"
            table = table_of(
                entry, 'a piece, as {from = "0", to = "2", is = "5"},', own, self.source
            )
            check_table(table, PIECE_KEYS, own, self.source, usual=USUAL_KEYS)
            pieces.append(self._piece(table, own))
        self._refuse_overlaps(pieces)
        return tuple(pieces)

    def _piece(self, table: Mapping[str, object], key: str, *, whole: bool = False) -> _Piece:
        """Read a formula, between two instants where these are given.

        `whole` says that the formula stands under the key itself, not below it.
        """
        if "is" not in table:
            raise MissingKeyError(self.source.at_name(key), "is", 'is = "F0*sin(w*t)"')
        formula, signal = self.formulas.formula(table["is"], key if whole else f"{key}.is")
        used = names_in(formula) - {self.formulas.names.time}
        bounds: list[Scalar | None] = []
        text = f"'{plain(formula)}'"
        for word in ("from", "to"):
            bound = None
            if word in table:
                tree, bound = self.formulas.number(table[word], f"{key}.{word}")
                used |= names_in(tree)
                text += f" {word} {plain(tree)}"
            bounds.append(bound)
        start, end = bounds
        if start is not None and end is not None:
            signs = self.formulas.signs(end - start)
            if signs != {1}:
                first, last = map(self.formulas.arithmetic.text, (start, end))
                place, known = self.source.at_name(key), 1 not in signs
                raise PieceOrderError(place, text, first, last, known=known)
        within = self._cut(signal, start, end, f"the piece {text}")
        return _Piece(formula, within, start, end, text, used)

    def _cut(self, signal: Signal, start: Scalar | None, end: Scalar | None, text: str) -> Signal:
        if start is None and end is None:
            return signal

        def work(place: Place) -> Signal:
            return cut(signal, start, end, self.order(place))

        within = self.source.read("", self.key, work)
        if len(within.impulses) < len(signal.impulses):
            raise ImpulseOutsideError(self.source.at_name(self.key), text)
        return within

    def _refuse_overlaps(self, pieces: Sequence[_Piece]) -> None:
        """Raise PiecesOverlapError unless one of two pieces is known to end before the other."""
        if all(map(self._apart, pieces, pieces[1:])):
            return  # as each piece begins before it ends, all follow one another
        for k, other in enumerate(pieces):
            for one in pieces[:k]:
                if not self._apart(one, other) and not self._apart(other, one):
                    place = self.source.at_name(self.key)
                    self._compared(one, other, place)
                    raise PiecesOverlapError(place, one.text, other.text)

    def _apart(self, one: _Piece, other: _Piece) -> bool:
        """Whether one piece is known to end before another begins, or as it does."""
        if one.end is None or other.start is None:
            return False
        return self.order(NOWHERE).not_after(one.end, other.start)

    def _compared(self, one: _Piece, other: _Piece, place: Place) -> None:
        """Raise UnknownOrderError where pieces overlap for want of a condition only."""
        order = self.order(place)
        for end, start in ((one.end, other.start), (other.end, one.start)):
            if end is not None and start is not None:
                order.compared(end, start)

    def _joined(
        self, name: str, pieces: Sequence[_Piece], repeat: Repeat | None, used: frozenset[str]
    ) -> Declared:
        signal = added(piece.signal for piece in pieces)
        if repeat is not None:
            end = repeat.start + repeat.period
            for piece in pieces:
                self._refuse_outside(piece, repeat.start, end)
            signal = self._cut(signal, repeat.start, end, f"the first period of '{name}'")
            signal = replace(signal, repeat=repeat)
        return Declared(name, None, signal, names=used.union(*(piece.names for piece in pieces)))

    def _refuse_outside(self, piece: _Piece, start: Scalar, end: Scalar) -> None:
        begins = piece.start is None or self.order(NOWHERE).not_after(start, piece.start)
        ends = piece.end is None or self.order(NOWHERE).not_after(piece.end, end)
        if not (begins and ends):
            shown = map(self.formulas.arithmetic.text, (start, end))
            raise OutsidePeriodError(self.source.at_name(self.key), piece.text, *shown)

    def _repeat(self, table: Mapping[str, object]) -> tuple[Repeat | None, frozenset[str]]:
        if "period" not in table:
            for key in REPEAT_KEYS:
                if key in table:
                    raise PeriodMissingError(self.source.at_name(f"{self.key}.{key}"), key)
            return None, frozenset()
        tree, period = self.formulas.number(table["period"], f"{self.key}.period")
        signs = self.formulas.signs(period)
        if signs != {1}:
            place = self.source.at(f"{self.key}.period")
            raise PeriodError(place, plain(tree), known=1 not in signs)
        start, used = self.formulas.arithmetic.number(Fraction(0)), names_in(tree)
        if "start" in table:
            tree, start = self.formulas.number(table["start"], f"{self.key}.start")
            used |= names_in(tree)
        return Repeat(period, start, self._count(table)), used

    def _count(self, table: Mapping[str, object]) -> int | None:
        if "count" not in table:
            return None
        key = f"{self.key}.count"
        number = number_from(table["count"], key, self.source)
        count = number.as_fraction() if number.is_rational else Fraction(0)
        if count.denominator != 1 or count < 1:
            raise RepeatCountError(self.source.at(key), plain(surd_formula(number)))
        return int(count)
