"""The names that a display uses: those of numbers, and those that an argument may follow."""

from __future__ import annotations

from collections.abc import Iterable

from closedform.derivation.step import Matrix, Side, Statement, Symbol
from closedform.document.reading.expected import STEPS
from closedform.document.reading.spelling import BOLD, spelled_name
from closedform.notation.expression import FUNCTIONS, SIGNALS, Call, Expression, names_in, rebuilt
from closedform.notation.jets import jet_of
from closedform.notation.latex.names import IMAGINARY, dot_ending, printed_key
from closedform.notation.written.tree import Declared

__all__ = ["Vocabulary"]

BOLD_KINDS = {"matrix": "A", "vector": "x", "derivative": "x", "dotted": "x"}
"""Symbols in bold, with the letters they have by default."""


NUMBERS = frozenset({IMAGINARY, "pi"})
"""Names of numbers that everybody knows."""


class Vocabulary:
    """Collects names from what is to be printed."""

    def __init__(self, items: Iterable[Side | Statement | str], time: str) -> None:
        self.time = time
        self.numbers: set[str] = set()
        self.functions: set[str] = set()
        for item in items:
            self.add(item)

    @property
    def declared(self) -> Declared:
        """The names as the reader of formulas wants them; a function's name is no number's."""
        functions = frozenset(self.functions)
        numbers = frozenset(self.numbers) - functions - {self.time}
        return Declared(
            parameters=frozenset(map(spelled_name, numbers)),
            functions=frozenset(map(spelled_name, functions)),
            time=spelled_name(self.time),
        )

    def add(self, item: Side | Statement | str) -> None:
        """Take in the names of what is to be printed."""
        match item:
            case str():
                self._name(item)
            case Statement(_, sides):
                self._all(sides)
            case tuple():
                self._all(item)
            case Matrix(rows, front):
                self._all(entry for row in rows for entry in row)
                self._all([] if front is None else [front])
            case Symbol():
                self._symbol(item)
            case _:
                self._formula(item)

    def _all(self, items: Iterable[Side]) -> None:
        for item in items:
            self.add(item)

    def _name(self, text: str) -> None:
        base, order = jet_of(text)
        key = printed_key(base)
        for ending in (dot_ending(1), dot_ending(2)):
            if key.endswith(ending):
                self.functions.add(key.removesuffix(ending))
        if order:
            self.functions.add(key)
        elif text not in NUMBERS and base.isidentifier():
            self.numbers.add(base)

    def _formula(self, expression: Expression) -> None:
        def see(node: Expression) -> None:
            signal = isinstance(node, Call) and node.function in SIGNALS
            if isinstance(node, Call) and (signal or node.function not in FUNCTIONS):
                name = STEPS.get(node.function, jet_of(node.function)[0])
                self.functions.add(printed_key(name))

        rebuilt(expression, see)
        for text in sorted(names_in(expression)):
            self._name(text)

    def _symbol(self, symbol: Symbol) -> None:
        self._all(symbol.parts)
        if symbol.argument is not None:
            self._formula(symbol.argument)
        letter = symbol.letter or BOLD_KINDS.get(symbol.kind, "")
        match symbol.kind:
            case "characteristic polynomial":
                self._function(symbol.letter or "p", symbol)
            case "residue sum":
                self.functions |= {"p", BOLD + (symbol.letter or "N")}
            case "step":
                self.functions.add(STEPS["step"])
            case "one-sided":
                self._function(letter, Symbol("scalar"))
            case kind if kind in BOLD_KINDS and (
                symbol.argument or kind in ("derivative", "dotted")
            ):
                self._function(letter, symbol, BOLD)
            case "scalar" if symbol.argument or symbol.order:
                self._function(letter, symbol)
            case "scalar":
                self._name(letter)

    def _function(self, letter: str, symbol: Symbol, mark: str = "") -> None:
        key = printed_key(jet_of(letter.replace("_hat", "hat"))[0])
        for ending in (dot_ending(1), dot_ending(2), dot_ending(3)):
            key = key.removesuffix(ending)
        indices = [i.replace(",", "_") for i in symbol.indices if i]
        self.functions.add(mark + "_".join([key, *indices]))
