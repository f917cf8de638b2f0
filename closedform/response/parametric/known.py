"""The names of a case at exact values of the parameters: exact where that can be, else balls."""

from __future__ import annotations

from collections.abc import Mapping
from dataclasses import dataclass, field
from fractions import Fraction
from functools import lru_cache

from flint import arb, ctx

from closedform.algebra.enclosure import ball_of, certified_decimal, value_at
from closedform.algebra.field import BaseField, Polynomial, Scalar
from closedform.algebra.parameter_field import PI, ParameterField
from closedform.algebra.parts import residue_value
from closedform.algebra.roots import enclosed_roots
from closedform.algebra.surds import SurdSum
from closedform.algebra.value_field import element_at, value_field
from closedform.notation.evaluation import enclose
from closedform.notation.expression import (
    Call,
    Expression,
    Name,
    Negation,
    Number,
    Power,
    Product,
    Quotient,
    Sum,
)
from closedform.notation.terms import square_root_of_surd
from closedform.response.parametric.case import Case
from closedform.response.parametric.quantities import Part, ResidueDefinition, RootDefinition
from closedform.response.sampling import surd_decimal

__all__ = ["Known", "Root", "known_at"]

_MOST_TERMS = 16
"""Square roots in an exact value; beyond, a number is known by its balls alone."""
_MOST_TERMS_BELOW = 4
"""The same of a divisor: its inverse has up to twice as many for each independent root."""
_ZERO, _ONE = SurdSum(()), SurdSum.rational(1)


@dataclass(frozen=True)
class Root:
    """A part of a root of a polynomial in numbers; `which` counts by real, then imaginary part."""

    field: BaseField
    polynomial: Polynomial
    which: int
    part: Part | None = None

    def ball(self) -> arb:
        """Return a ball around the number at FLINT's current precision."""
        root = enclosed_roots(self.field, self.polynomial)[self.which - 1]
        return root.imag if self.part == "imaginary" else root.real

    def exact(self) -> SurdSum | None:
        """Return a real root if it is a surd by a linear or quadratic factor, else None."""
        if self.part is not None:
            return None
        ball = self.ball()
        for part, _ in self.polynomial.factor_list()[1]:
            for candidate in _surd_roots(self.field, part.monic()):
                # balls of different roots do not meet
                if ball.overlaps(ball_of(candidate)):
                    return candidate
        return None


@dataclass(frozen=True)
class Residue:
    """`weight` times a part of numerator/(p' beside) at a root of p, all in numbers."""

    field: BaseField
    polynomial: Polynomial
    which: int
    part: Part
    numerator: Polynomial
    weight: int
    beside: Polynomial

    def ball(self) -> arb:
        """Return a ball around the number at FLINT's current precision."""
        return _residue_ball(self, ctx.prec)

    def exact(self) -> SurdSum | None:
        """Return nothing: the number is known by its balls."""
        return None


@lru_cache(maxsize=1024)
def _residue_ball(residue: Residue, _bits: int) -> arb:
    field, p, which = residue.field, residue.polynomial, residue.which
    value = residue_value(field, p, which, residue.numerator)
    beside = [field.enclose(c) for c in residue.beside.to_list()]
    value /= value_at(beside, enclosed_roots(field, p)[which - 1])
    return residue.weight * (value.real if residue.part == "real" else value.imag)


def _surd_roots(field: BaseField, p: Polynomial) -> list[SurdSum]:
    last, mean = field.number(p.nth(0)), field.number(p.nth(1))
    if last is None or mean is None:
        return []
    if p.degree() == 1:
        return [-last]
    if p.degree() != len("bc"):
        return []
    half = mean * SurdSum.rational(Fraction(-1, 2))
    square = half * half - last
    if field.sign(field.scalar(square)) < 0:
        return []
    root = square_root_of_surd(square)
    return [] if root is None else [half + root, half - root]


@dataclass(frozen=True)
class Known:
    """Parameters and named quantities at one point of a case; the number pi is known by balls.

    `exact` holds the names whose value is a surd sum, `squares` others whose square is one;
    `definitions` says what the names are that are not in `exact`, in their order.
    """

    exact: dict[str, SurdSum]
    squares: dict[str, SurdSum] = field(default_factory=dict)
    definitions: dict[str, Expression | Root | Residue] = field(default_factory=dict)

    def balls(self) -> dict[str, arb]:
        """Return a ball for every name at FLINT's current precision."""
        found = {PI: arb.pi()}
        found |= {name: ball_of(value) for name, value in self.exact.items()}
        for name, definition in self.definitions.items():
            found[name] = (
                definition.ball()
                if isinstance(definition, Root | Residue)
                else enclose(definition, found)
            )
        return found

    def decimal(self, formula: Expression, digits: int) -> str:
        """Return a formula without the time, correctly rounded.

        Raises UnsettledError for one that is 0 without this being known exactly.
        """
        exact = self.value(formula)
        if exact is not None:
            return surd_decimal(exact, digits)
        return certified_decimal(lambda: enclose(formula, self.balls()), digits)

    def value(self, formula: Expression) -> SurdSum | None:
        """Return the exact value of a formula without the time, or None if none is found."""
        match formula:
            case Number(value):
                found: SurdSum | None = SurdSum.rational(value)
            case Name(text):
                found = self.exact.get(text)
            case Negation(operand):
                value_of = self.value(operand)
                found = None if value_of is None else -value_of
            case Sum(terms):
                found = self._sum(terms)
            case Product(factors):
                found = self._product(factors)
            case Quotient(above, below):
                found = self._product((above, Power(below, Negation(Number(Fraction(1))))))
            case Power(base, exponent):
                found = self._power(base, exponent)
            case Call(function, argument):
                found = self._called(function, argument)
        return None if found is None or len(found.terms) > _MOST_TERMS else found

    def _sum(self, terms: tuple[Expression, ...]) -> SurdSum | None:
        total = _ZERO
        for term in terms:
            value = self.value(term)
            if value is None:
                return None
            total += value
        return total

    def _product(self, factors: tuple[Expression, ...]) -> SurdSum | None:
        values = [self.value(factor) for factor in factors]
        if any(value is not None and value.is_zero for value in values):
            return _ZERO  # whatever the others are: all are finite
        total = _ONE
        for value in values:
            if value is None or len(total.terms) > _MOST_TERMS:
                return None
            total *= value
        return total

    def _power(self, base: Expression, exponent: Expression) -> SurdSum | None:
        times = self.value(exponent)
        if times is None or not times.is_rational or times.as_fraction().denominator != 1:
            return None
        count, value = int(times.as_fraction()), self.value(base)
        if value is None and count % 2 == 0:
            value, count = self.square(base), count // 2
        if value is None or (count < 0 and len(value.terms) > _MOST_TERMS_BELOW):
            return None
        return value.power(count)

    def _called(self, function: str, argument: Expression) -> SurdSum | None:
        value = self.value(argument)
        if value is None:
            return None
        if function == "sqrt":
            return value if value.is_zero else square_root_of_surd(value)
        if value.is_zero:
            return _ONE if function in ("exp", "cos", "cosh") else _ZERO
        return None

    def square(self, formula: Expression) -> SurdSum | None:
        """Return the exact value of the square of a formula, or None if none is found."""
        match formula:
            case Name(text) if text in self.squares:
                return self.squares[text]
            case Call("sqrt", argument):
                return self.value(argument)
            case Negation(operand):
                return self.square(operand)
            case Quotient(above, below):
                over, under = self.square(above), self.square(below)
                if over is None or under is None or len(under.terms) > _MOST_TERMS_BELOW:
                    return None
                return over / under
            case Product(factors):
                total = _ONE
                for factor in factors:
                    value = self.square(factor)
                    if value is None:
                        return None
                    total *= value
                return total
        value = self.value(formula)
        return None if value is None else value * value


def known_at(field: ParameterField, case: Case, values: Mapping[str, SurdSum]) -> Known:
    """Return what is known of the names of a case at a point of it.

    Raises TooManyRootsError where a named root needs a field with too many square roots.
    """
    known = Known({name: values[name] for name in field.free})
    for quantity in case.quantities:
        name, definition = quantity.name, quantity.formula
        if definition is not None:
            found: Expression | Root | Residue = definition
            exact = known.value(definition)
            square = known.square(definition) if exact is None else None
            if square is not None:
                known.squares[name] = square
        else:
            root = _root_at(field, quantity.root, values)
            exact, found = root.exact(), root
        if exact is not None:
            known.exact[name] = exact
        else:
            known.definitions[name] = found
    return known


def _root_at(
    field: ParameterField,
    root: RootDefinition | ResidueDefinition | None,
    values: Mapping[str, SurdSum],
) -> Root | Residue:
    if root is None:
        raise TypeError("a quantity without a formula is a root")
    above = root.numerator + root.beside if isinstance(root, ResidueDefinition) else ()
    base = value_field(field, [*root.polynomial, *above], values)

    def over(coefficients: tuple[Scalar, ...]) -> Polynomial:
        return base.polynomial([element_at(field, c, values, base) for c in coefficients])

    if isinstance(root, RootDefinition):
        return Root(base, over(root.polynomial), root.which, root.part)
    return Residue(
        base,
        over(root.polynomial),
        root.which,
        root.part,
        over(root.numerator),
        root.weight,
        over(root.beside),
    )
