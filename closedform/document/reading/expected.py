"""The normal form of what a derivation says: of sides, symbols, matrices and statements."""

from __future__ import annotations

import re
from collections.abc import Callable, Iterable
from dataclasses import dataclass
from fractions import Fraction

from closedform.derivation.step import IMAGINARY_UNIT, Matrix, Side, Statement, Symbol
from closedform.document.reading.normal import named, normal
from closedform.document.reading.values import (
    Value,
    atom,
    exponential,
    inverted,
    number,
    plus,
    raised,
    times,
)
from closedform.document.symbols import index_text
from closedform.notation.expression import Call, Expression, Name
from closedform.notation.latex.names import printed_key
from closedform.notation.written.from_expression import written_from
from closedform.notation.written.tree import Apply, Jet, Written, changed
from closedform.notation.written.tree import Symbol as Letter

__all__ = ["Chain", "Expected", "both_signs", "entry", "functions_of", "one_sided", "residue_sum"]

ENDING = re.compile(r"(?P<base>.*?)(?P<dots>_d{0,3}dot|_dot[0-9]+)?")
MINUS_ONE = number(-1)


@dataclass(frozen=True, slots=True)
class Chain:
    """Members, and what relates each to the next, in the words of a `Statement`."""

    members: tuple[Value, ...]
    relations: tuple[str, ...] = ()


def entry(body: Value, indices: str) -> Value:
    """Return the form of an entry of a matrix, or of columns of it."""
    return atom(("entry", body, indices), matrix=True)


def one_sided(function: Value, at: Value, sign: str) -> Value:
    """Return the form of the limit of a function at an instant from one side."""
    return atom(("one-sided", function, at, sign))


def residue_sum(over: Value, body: Value) -> Value:
    """Return the form of a sum over the zeros of a polynomial."""
    return atom(("residue sum", over, body), matrix=True)


def functions_of(time: str, tree: Written) -> Written:
    """Return a formula with its functions at the time bare: x for x(t), and steps as functions."""

    def change(node: Written) -> Written | None:
        match node:
            case Jet(name, order, at) if at is not None:
                inner = functions_of(time, at)
                return Jet(name, order, None if inner == Letter(time) else inner)
            case Apply("step" | "delta" as function, (argument,)):
                return change(Jet(STEPS[function], 0, argument))
        return None

    return changed(tree, change)


STEPS = {"step": "varepsilon", "delta": "delta"}
"""The letters of the unit step and the unit impulse."""


class Expected:
    """Gives normal forms; the time is what functions have for their argument if it is left out."""

    def __init__(self, time: str) -> None:
        self.time = time
        self._t = named(time)

    def statement(self, statement: Statement) -> Chain:
        """Return the chain that a statement is."""
        sides = tuple(map(self.side, statement.sides))
        return Chain(sides, (statement.relation,) * (len(sides) - 1))

    def chain(self, item: Side | Statement | str) -> Chain:
        """Return the chain of what is put into a sentence; a text is a name."""
        if isinstance(item, Statement):
            if len(item.sides) == 1:
                return self.chain(item.sides[0])
            return self.statement(item)
        if isinstance(item, str):
            return Chain((named(item),))
        if isinstance(item, Symbol) and item.kind == "interval":
            return self.interval(item)
        return Chain((self.side(item),))

    def side(self, side: Side) -> Value:
        """Return the form of one side of a relation."""
        if isinstance(side, Symbol):
            return self._symbol(side)
        if isinstance(side, Matrix):
            rows = tuple(tuple(map(self.formula, row)) for row in side.rows)
            return times((self.front(side), atom(("array", rows), matrix=True)))
        if isinstance(side, tuple):
            return self._product(side)
        return self.formula(side)

    def front(self, matrix: Matrix) -> Value:
        """Return the form of what stands before a matrix."""
        return number(1) if matrix.front is None else self.formula(matrix.front)

    def formula(self, expression: Expression) -> Value:
        """Return the form of a formula."""
        return normal(functions_of(self.time, written_from(expression)))

    def interval(self, symbol: Symbol) -> Chain:
        """Return the chain of comparisons that an interval is."""
        t = self._instant(symbol)
        bounds = tuple(map(self.side, symbol.parts))
        match symbol.indices[0]:
            case "both":
                return Chain((bounds[0], t, bounds[1]), ("<=", "<"))
            case "from":
                return Chain((t, bounds[0]), (">=",))
            case "until":
                return Chain((t, bounds[0]), ("<",))
        return Chain(())

    def _product(self, members: Iterable[Side]) -> Value:
        first, *others = members
        if isinstance(first, Symbol) and first.kind == "time derivative" and others:
            variable = first.argument or Name(self.time)
            inside = self._product(others)
            return atom(("derivative", inside, getattr(variable, "text", ""), 1))
        return times([self.side(first), *map(self.side, others)])

    def _symbol(self, symbol: Symbol) -> Value:
        return FORMS[symbol.kind](self, symbol)

    def _at(self, symbol: Symbol) -> Value | None:
        """Return the argument, None where it is the time or left out."""
        if symbol.argument is None or symbol.argument == Name(self.time):
            return None
        return self.formula(symbol.argument)

    def _instant(self, symbol: Symbol) -> Value:
        """Return the argument, the time where it is left out."""
        at = self._at(symbol)
        return self._t if at is None else at

    def lettered(self, symbol: Symbol, letter: str, *, bold: bool = True) -> Value:
        """Return the form of a letter with its indices, primes and argument."""
        found = ENDING.fullmatch(printed_key((symbol.letter or letter).replace("_hat", "hat")))
        base, dots = (found["base"], found["dots"] or "") if found else (symbol.letter, "")
        text = "_".join([base, *filter(None, symbol.indices)]) + dots + "'" * symbol.order
        return named(text, bold=bold, argument=self._at(symbol))

    def bare(self, symbol: Symbol, letter: str) -> Value:
        """Return the form of the matrix alone that a symbol is made of."""
        return self.lettered(Symbol("matrix", symbol.indices, letter=symbol.letter), letter)

    def derived(self, symbol: Symbol) -> Value:
        """Return the form of a vector with dots or primes, one if none are told."""
        order = max(symbol.order, 1)
        made = Symbol("vector", symbol.indices, symbol.argument, symbol.letter, order)
        return self.lettered(made, "x")

    def exponential(self, symbol: Symbol, letter: str) -> Value:
        """Return the form of e to a matrix times a time."""
        exponent = times((self.bare(symbol, letter), self._instant(symbol)))
        return exponential(exponent)

    def difference(self, symbol: Symbol, variable: str) -> Value:
        """Return the form of lambda I - A."""
        argument = self.formula(symbol.argument or Name(variable))
        first = times((argument, named("I", bold=True)))
        return plus((first, times((MINUS_ONE, self.bare(symbol, "A")))))

    def shifted(self, symbol: Symbol) -> Value:
        """Return the form of A less a multiple of I, or a power of that."""
        amount = self.formula(symbol.argument) if symbol.argument else number(0)
        less = times((MINUS_ONE, amount, named("I", bold=True)))
        value = plus((self.bare(symbol, "A"), less))
        return raised(value, number(symbol.order)) if symbol.order > 1 else value

    def polynomial(self, symbol: Symbol) -> Value:
        """Return the form of a polynomial at its variable, or at a matrix."""
        letter = Symbol("scalar", symbol.indices, symbol.argument or Name("lambda"), symbol.letter)
        if not symbol.parts:
            return self.lettered(letter, "p", bold=False)
        text = "_".join([symbol.letter or "p", *filter(None, symbol.indices)])
        return named(text, argument=self.side(symbol.parts[0]))

    def pair(self, symbol: Symbol) -> Value:
        """Return the form of a real part plus or minus i times a frequency."""
        real, frequency = symbol.parts
        unit = self.formula(IMAGINARY_UNIT)
        return both_signs(self.side(real), times((unit, self.side(frequency))))

    def sinusoid(self, symbol: Symbol) -> Value:
        """Return the form of an amplitude times a sine or cosine of an angle less a phase."""
        amplitude, angle, phase = map(self.side, symbol.parts)
        inside = plus((angle, times((MINUS_ONE, phase))))
        return times((amplitude, atom(("sin" if symbol.indices == ("sin",) else "cos", inside))))

    def arc(self, symbol: Symbol) -> Value:
        """Return the form of an arc tangent, beside a part of a turn."""
        *turns, ratio = map(self.side, symbol.parts)
        value = atom(("atan", ratio))
        signed = times((MINUS_ONE, value)) if symbol.indices == ("-",) else value
        return plus((*turns, signed))

    def cases(self, symbol: Symbol) -> Value:
        """Return the form of values with the ranges in which they apply."""
        values = map(self.side, symbol.parts[::2])
        places = [self.interval(p) for p in symbol.parts[1::2] if isinstance(p, Symbol)]
        return atom(("cases", tuple(zip(values, map(_range, places), strict=True))))

    def residues(self, symbol: Symbol) -> Value:
        """Return the form of the sum of N e^(lambda t)/p' over the zeros of p."""
        variable = self.side(symbol.parts[0] if symbol.parts else Name("lambda"))
        above = named(symbol.letter or "N", bold=True, argument=variable)
        below = named("p'", argument=variable)
        exponent = times((variable, self._instant(symbol)))
        body = times((above, inverted(below), exponential(exponent)))
        return residue_sum(named("p", argument=variable), body)


def both_signs(middle: Value, half: Value) -> Value:
    """Return the form of something plus or minus something."""
    return plus((middle, atom(("both signs", half, 1))))


SIGNS = {"<=": "≤", ">=": "≥", "<": "<"}


def _range(chain: Chain) -> tuple[object, ...] | None:
    if not chain.members:
        return None
    return ((chain.members, tuple(SIGNS[sign] for sign in chain.relations)),)


def _turn(_: Expected, symbol: Symbol) -> Value:
    above, below = map(int, symbol.indices)
    return times((number(Fraction(above, below)), normal(written_from(Name("pi")))))


def _blocks(expected: Expected, symbol: Symbol) -> Value:
    columns = int(symbol.indices[0])
    parts = tuple(map(expected.side, symbol.parts))
    rows = tuple(parts[k : k + columns] for k in range(0, len(parts), columns))
    return atom(("array", rows), matrix=True)


FORMS: dict[str, Callable[[Expected, Symbol], Value]] = {
    "matrix": lambda e, s: e.lettered(s, "A"),
    "vector": lambda e, s: e.lettered(s, "x"),
    "scalar": lambda e, s: e.lettered(s, "", bold=False),
    "identity": lambda e, s: e.lettered(s, "I"),
    "zero": lambda _e, _s: number(0),
    "inverse": lambda e, s: inverted(e.bare(s, "P")),
    "derivative": Expected.derived,
    "dotted": Expected.derived,
    "transition": lambda e, s: e.exponential(s, "A"),
    "exponential": lambda e, s: e.exponential(s, "J"),
    "characteristic polynomial": Expected.polynomial,
    "determinant": lambda e, s: atom(("det", e.difference(s, "lambda"))),
    "resolvent": lambda e, s: inverted(e.difference(s, "s")),
    "adjugate": lambda e, s: atom(("adj", e.difference(s, "s")), matrix=True),
    "residue sum": Expected.residues,
    "shifted": Expected.shifted,
    "entry": lambda e, s: entry(e.side(s.parts[0]), index_text(s)),
    "pair": Expected.pair,
    "real pair": lambda e, s: both_signs(*map(e.side, s.parts)),
    "sum": lambda e, s: plus(map(e.side, s.parts)),
    "quotient": lambda e, s: times((e.side(s.parts[0]), inverted(e.side(s.parts[1])))),
    "step": lambda e, s: e.formula(Call("step", s.argument or Name(e.time))),
    "one-sided": lambda e, s: one_sided(
        named(s.letter), e.formula(s.argument or Name(e.time)), s.indices[0]
    ),
    "blocks": _blocks,
    "cases": Expected.cases,
    "sinusoid": Expected.sinusoid,
    "turn": _turn,
    "arc": Expected.arc,
    "angle of": lambda e, s: atom(("atan2", *map(e.side, s.parts))),
}
