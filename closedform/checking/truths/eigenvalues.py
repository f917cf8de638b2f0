"""Eigenvalues by real and imaginary part, from the modes of a response."""

from __future__ import annotations

from collections.abc import Callable, Iterator, Mapping, Sequence
from dataclasses import dataclass

from flint import arb

from closedform.algebra.spectrum import Factor
from closedform.algebra.surds import SurdSum
from closedform.checking.truth import Eigenvalue
from closedform.checking.truths.formulas import written_from
from closedform.notation.evaluation import enclose
from closedform.notation.expression import ONE, ZERO, Expression, Name, Quotient, names_in, product
from closedform.notation.expression import Negation as Minus
from closedform.notation.plain import plain
from closedform.notation.terms import negated, opened, radical_formula, sum_of, surd_formula
from closedform.notation.written.tree import IMAGINARY, Negation, Product, Sum, Written
from closedform.response.driven.composition import put_in_place
from closedform.response.modes import Mode
from closedform.response.names import NamedConstant, Radical, ResiduePart, RootPart

__all__ = ["Root", "eigenvalue_of", "eigenvalues_in_numbers", "formula_of", "pair"]

Balls = Callable[[], Mapping[str, arb]]


@dataclass(frozen=True)
class Root:
    """real + i imaginary, formulas in parameters and named quantities."""

    real: Expression
    imaginary: Expression = ZERO


def pair(mean: Expression, half: Expression, *, circular: bool) -> tuple[Root, Root]:
    """Return mean ± i half if circular, else mean ± half; the upper sign first."""
    if circular:
        return Root(mean, half), Root(mean, negated(half))
    up, down = (opened(sum_of([p for p in (mean, h) if p != ZERO])) for h in (half, negated(half)))
    return Root(up), Root(down)


def eigenvalue_of(
    root: Root,
    multiplicities: tuple[int, int, int],
    unknown: frozenset[str],
    balls: Balls | None,
) -> Eigenvalue:
    """Return an eigenvalue with its algebraic and geometric multiplicity and its index.

    It has no value if one of the `unknown` names is in it, which have no formula.
    """

    def ball() -> tuple[arb, arb]:
        known = balls() if balls is not None else {}
        return enclose(root.real, known), enclose(root.imaginary, known)

    algebraic, geometric, index = multiplicities
    is_open = bool((names_in(root.real) | names_in(root.imaginary)) & unknown)
    return Eigenvalue(
        None if is_open else _written(root),
        algebraic,
        geometric,
        index,
        _named(root) if is_open else "",
        None if balls is None else ball,
    )


def _written(root: Root) -> Written:
    if root.imaginary == ZERO:
        return written_from(root.real)
    below = isinstance(root.imaginary, Minus)
    size = negated(root.imaginary) if below else root.imaginary
    part: Written = IMAGINARY if size == ONE else Product((IMAGINARY, written_from(size)))
    part = Negation(part) if below else part
    return part if root.real == ZERO else Sum((written_from(root.real), part))


def _named(root: Root) -> str:
    if root.imaginary == ZERO:
        return plain(root.real)
    below = isinstance(root.imaginary, Minus)
    part = product((negated(root.imaginary) if below else root.imaginary, Name("i")))
    terms = [root.real, negated(part) if below else part]
    return plain(opened(sum_of([term for term in terms if term != ZERO])))


def formula_of(constant: NamedConstant) -> Expression | None:
    """Return what a named constant is: square roots of numbers, else nothing."""
    definition = constant.definition
    if isinstance(definition, Radical):
        return definition.formula
    if isinstance(definition, RootPart) and int(definition.polynomial.degree()) == len("bc"):
        return _of_quadratic(definition)
    if isinstance(definition, ResiduePart) and int(definition.polynomial.degree()) == len("bc"):
        return _at_real_root(definition)
    return None


def _at_real_root(residue: ResiduePart) -> Expression:
    """Weight · (n_1 x + n_0)/(2 x + b) at a real root x = m ± r of x^2 + b x + c."""
    p, field, numerator = residue.polynomial, residue.base, residue.numerator
    mean = -p.nth(1) / field.domain.convert(2)
    half = radical_formula(field.surds(mean * mean - p.nth(0)))
    sign = SurdSum.rational(1 if residue.which == len("bc") else -1)
    whole = field.surds(numerator.nth(1) * mean + numerator.nth(0)) * sign
    slope = field.surds(numerator.nth(1))
    weight = SurdSum.rational(residue.weight / 2)
    terms: list[Expression] = []
    if not whole.is_zero:
        terms.append(Quotient(surd_formula(whole * weight), half))
    if not slope.is_zero:
        terms.append(surd_formula(slope * weight))
    return opened(sum_of(terms))


def _of_quadratic(root: RootPart) -> Expression:
    """The part of a root of x^2 + b x + c, which is one of two real ones, or of a pair."""
    p, field = root.polynomial, root.base
    mean = -p.nth(1) / field.domain.convert(2)
    square = mean * mean - p.nth(0)
    centre = surd_formula(field.surds(mean))
    circular = field.sign(square) < 0
    half = radical_formula(field.surds(-square if circular else square))
    upper, lower = pair(centre, half, circular=circular)
    found = upper if root.which == len("bc") else lower
    return found.imaginary if root.part == "imaginary" else found.real


def _roots_of(mode: Mode, formulas: Mapping[str, Expression]) -> tuple[Root, ...]:
    """Return the one or two roots of a mode in numbers, names with formulas put in."""
    rate = _number(mode.rate, formulas)
    if mode.kind == "real" or mode.frequency is None:
        return (Root(rate),)
    frequency = _number(mode.frequency, formulas)
    return pair(rate, frequency, circular=mode.kind == "circular")


def _number(value: SurdSum | str, formulas: Mapping[str, Expression]) -> Expression:
    if isinstance(value, str):
        return put_in_place(Name(value), formulas)
    return surd_formula(value)


def eigenvalues_in_numbers(
    factors: Sequence[Factor],
    modes: Sequence[Sequence[Mode]],
    constants: Sequence[NamedConstant],
    balls: Balls,
) -> Iterator[Eigenvalue]:
    """Yield the eigenvalues of factors with their modes, in the order of these."""
    formulas = {c.name: f for c in constants if (f := formula_of(c)) is not None}
    unknown = frozenset(c.name for c in constants) - set(formulas)
    for factor, of_factor in zip(factors, modes, strict=True):
        counts = (factor.multiplicity, len(factor.blocks), factor.index)
        for mode in of_factor:
            for root in _roots_of(mode, formulas):
                yield eigenvalue_of(root, counts, unknown, balls)
