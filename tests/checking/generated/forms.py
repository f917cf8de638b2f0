"""Formulas of the generator: as they are to be written, and what they are worth in numbers."""
# ruff: noqa: C901, PLR0912, E741

from __future__ import annotations

from collections.abc import Callable, Iterator, Mapping
from dataclasses import dataclass
from decimal import ROUND_DOWN, ROUND_HALF_UP, Context, Decimal
from fractions import Fraction
from typing import Any

import mpmath

from tests.checking.generated.surds import Surd

__all__ = ["F", "T"]


@dataclass(frozen=True)
class F:
    """An operation and its arguments: formulas, or a number, a text, a name."""

    op: str
    args: tuple[Any, ...] = ()

    @property
    def parts(self) -> tuple[F, ...]:
        """The arguments that are formulas and are written."""
        return () if self.op == "dec" else tuple(a for a in self.args if isinstance(a, F))


T, I, PI, INF = F("t"), F("i"), F("pi"), F("oo")


def num(value: int | Fraction) -> F:
    """Return a number; a negative one as a negation."""
    value = Fraction(value)
    return neg(F("num", (-value,))) if value < 0 else F("num", (value,))


def name(key: str) -> F:
    """Return a parameter or another name."""
    return F("name", (key,))


def neg(x: F) -> F:
    """Return the opposite."""
    return x.args[0] if x.op == "neg" else F("neg", (x,))


def add(*terms: F) -> F:
    """Return a sum."""
    return terms[0] if len(terms) == 1 else F("add", terms)


def mul(*factors: F) -> F:
    """Return a product."""
    kept = tuple(f for f in factors if f != num(1))
    sign = sum(f.op == "neg" for f in kept) % 2
    kept = tuple(f.args[0] if f.op == "neg" else f for f in kept)
    kept = tuple(f for f in kept if f != num(1))
    flat = tuple(g for f in kept for g in (f.args if f.op == "mul" else (f,)))
    inner = num(1) if not flat else (flat[0] if len(flat) == 1 else F("mul", flat))
    return neg(inner) if sign else inner


def div(a: F, b: F) -> F:
    """Return a quotient."""
    if a.op == "neg":
        return neg(div(a.args[0], b))
    return a if b == num(1) else F("div", (a, b))


def power(a: F, n: int) -> F:
    """Return an integer power."""
    return a if n == 1 else F("pow", (a, n))


def exp(x: F) -> F:
    """Return e^x."""
    return F("exp", (x,))


def fn(which: str, x: F) -> F:
    """Return a function of one formula."""
    return F("fn", (which, x))


def sqrt(x: F) -> F:
    """Return a square root."""
    return F("sqrt", (x,))


def rows_of(matrix: tuple[tuple[F, ...], ...]) -> F:
    """Return a matrix."""
    return F("mat", tuple(F("row", tuple(row)) for row in matrix))


FUNCTIONS: Mapping[str, Callable] = {
    "cos": mpmath.cos,
    "sin": mpmath.sin,
    "cosh": mpmath.cosh,
    "sinh": mpmath.sinh,
    "arctan": mpmath.atan,
    "arccos": mpmath.acos,
    "arcsin": mpmath.asin,
    "ln": mpmath.log,
    "tanh": mpmath.tanh,
}


def value(f: F, env: Mapping[str, Any], *, exact: bool = False) -> Any:
    """Return a number, or a matrix as rows; printed decimals as printed, or as they ought to be."""
    op, args = f.op, f.args
    if op == "mat":
        return tuple(tuple(value(e, env, exact=exact) for e in row.args) for row in args)
    if op == "num":
        return mpmath.mpf(args[0].numerator) / args[0].denominator
    if op == "dec":
        return value(args[1], env, exact=True) if exact else mpmath.mpf(args[0])
    if op in ("t", "name"):
        return env["t" if op == "t" else args[0]]
    if op == "fn":
        return FUNCTIONS[args[0]](value(args[1], env, exact=exact))
    if op == "pow":
        return value(args[0], env, exact=exact) ** args[1]
    if op == "step":
        argument = value(args[0], env, exact=exact)
        return mpmath.mpf(1 if argument >= 0 else 0)
    if op == "jet":
        return env[args[0]]
    if op == "shift":
        return env["t"] - value(args[0], env, exact=exact)
    if op == "num_of":
        return args[0].number()
    if op == "at":
        return args[0](env)
    values = [value(a, env, exact=exact) for a in args]
    match op:
        case "neg":
            return _scaled(-1, values[0])
        case "add":
            return sum(values[1:], values[0])
        case "mul":
            total = values[0]
            for v in values[1:]:
                total = _scaled(total, v)
            return total
        case "div":
            return _scaled(1 / values[1], values[0])
        case "exp":
            return mpmath.exp(values[0])
        case "sqrt":
            return mpmath.sqrt(values[0])
        case "atan2":
            return mpmath.atan2(values[0].real, values[1].real)
        case "i":
            return mpmath.mpc(0, 1)
        case "pi":
            return mpmath.pi
    raise ValueError(op)


def _scaled(factor: Any, v: Any) -> Any:
    return (
        tuple(tuple(factor * e for e in row) for row in v) if isinstance(v, tuple) else factor * v
    )


def put(f: F, change: Callable[[F], F | None]) -> F:
    """Return a formula with nodes replaced, from the outside in."""
    new = change(f)
    if new is not None:
        return new
    if f.op in ("dec", "num", "at", "num_of"):
        return f
    return F(f.op, tuple(put(a, change) if isinstance(a, F) else a for a in f.args))


def nodes(f: F, path: tuple[int, ...] = ()) -> Iterator[tuple[tuple[int, ...], F]]:
    """Yield every written node with the way to it."""
    yield path, f
    if f.op != "dec":
        for k, a in enumerate(f.args):
            if isinstance(a, F):
                yield from nodes(a, (*path, k))


def replaced(f: F, path: tuple[int, ...], new: F) -> F:
    """Return a formula with the node at the end of a way replaced."""
    if not path:
        return new
    k = path[0]
    args = (*f.args[:k], replaced(f.args[k], path[1:], new), *f.args[k + 1 :])
    return F(f.op, args)


def decimal_of(x: mpmath.mpf) -> Decimal:
    """Return a real number to 50 digits."""
    with mpmath.workdps(60):
        return Decimal(mpmath.nstr(mpmath.mpf(x), 55, strip_zeros=False, min_fixed=0, max_fixed=0))


CONTEXT = Context(prec=60)


def rounded(x: mpmath.mpf, digits: int, *, down: bool = False) -> Decimal:
    """Return a positive number to so many significant digits, rounded or cut."""
    exact = decimal_of(x)
    place = Decimal(1).scaleb(exact.adjusted() - digits + 1)
    how = ROUND_DOWN if down else ROUND_HALF_UP
    return exact.quantize(place, rounding=how, context=CONTEXT)


def dec(text: Decimal, exact: F) -> F:
    """Return a printed decimal and what it stands for."""
    return F("dec", (str(text), exact))


def number(x: Surd) -> F:
    """Return a number as a node without a way of writing it, for decimals to stand for."""
    return F("num_of", (x,))
