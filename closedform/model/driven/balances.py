"""From an equation as typed to its linear form, everything on the left."""

from __future__ import annotations

from collections.abc import Callable, Sequence
from dataclasses import dataclass, field
from fractions import Fraction
from typing import Generic, NamedTuple, TypeVar

from closedform.errors import Place
from closedform.model.driven.balance_errors import (
    DelayedUnknownError,
    InputInstantError,
    NoUnknownError,
    NoUnknownsError,
    UnknownAtInstantError,
    UnusedUnknownError,
)
from closedform.model.driven.model import Jet
from closedform.model.driven.roles import Roles
from closedform.model.driven.term_errors import TermErrors
from closedform.model.source import Source
from closedform.notation.arithmetic import Arithmetic
from closedform.notation.errors import NonlinearTermError
from closedform.notation.expression import (
    ZERO,
    Call,
    Expression,
    Name,
    Negation,
    Product,
    Quotient,
    Sum,
    product,
)
from closedform.notation.jets import found_jets, jet_of
from closedform.notation.linear import affine
from closedform.notation.plain import plain

__all__ = ["LinearBalance", "Roles", "Shifted", "linear_balance", "unknowns_of"]

T = TypeVar("T")


class Shifted(NamedTuple, Generic[T]):
    """An input's derivative of an order, at the time less a delay."""

    name: str
    order: int
    delay: T


@dataclass(frozen=True, slots=True)
class LinearBalance(Generic[T]):
    """Weights of unknowns, weights of inputs and what is left: their sum is zero.

    Unknowns come in their order and with falling derivatives, inputs as they first occur; no
    weight is zero.  `literal` is a function of the time or a constant, None where it is zero.
    """

    of_unknowns: tuple[tuple[Jet, T], ...]
    of_inputs: tuple[tuple[Shifted[T], T], ...]
    literal: Expression | None


def unknowns_of(
    equations: Sequence[tuple[Expression, Expression]],
    known_names: frozenset[str],
    time: str,
    given_states: Sequence[str] | None,
    source: Source,
) -> tuple[str, ...]:
    """Return the unknowns of equations: those given, or the names that are nothing else.

    `known_names` are parameters and inputs.  Without `given_states` the order is that in
    which the unknowns first occur.

    Raises:  UnusedUnknownError for a given one that stands in no equation,
             NoUnknownsError if there is none.
    """
    sides = (side for equation in equations for side in equation)
    found = dict.fromkeys(name for side in sides for name, _ in found_jets(side))
    if given_states is not None:
        for k, name in enumerate(given_states, start=1):
            if name not in found:
                raise UnusedUnknownError(source.at(f"states[{k}]"), name)
        return tuple(given_states)
    unknowns = tuple(name for name in found if name not in known_names and name != time)
    if not unknowns:
        raise NoUnknownsError(source.at("equations"))
    return unknowns


def linear_balance(
    left: Expression,
    right: Expression,
    roles: Roles,
    arithmetic: Arithmetic[T],
    place: Place,
    text: str = "",
) -> LinearBalance[T]:
    """Return the linear form of an equation: left - right as weights of jets and inputs.

    `arithmetic` gives the values of constant formulas.  `text` is the equation as typed, which
    begins at `place`: errors quote it and point at the term in it.

    Raises:  NonlinearBalanceError, TimeVaryingError, InputTimesUnknownError,
             NonlinearInputError, DelayedUnknownError, UnknownAtInstantError,
             InputInstantError, NoUnknownError, and what `arithmetic` raises.

    >>> from closedform.notation import read_equation
    >>> from closedform.notation.exact import NUMBERS
    >>> sides = read_equation("2*x' = t - 3*x", time="t", constants=frozenset(), functions=None)
    >>> balance = linear_balance(*sides, Roles(("x",), frozenset(), "t"), NUMBERS, Place())
    >>> [(jet.text, int(weight.as_fraction())) for jet, weight in balance.of_unknowns]
    [("x'", 2), ('x', 3)]
    >>> plain(balance.literal)
    '-t'
    """
    equation = text or f"{plain(left)} = {plain(right)}"
    errors = TermErrors(roles, place, text, equation)
    form = _Walk(roles, arithmetic, place, errors).form(Sum((left, Negation(right))))
    zero = arithmetic.number(Fraction(0))
    places = {name: k for k, name in enumerate(roles.unknowns)}
    of_unknowns = [(jet, weight) for jet, weight in form.unknowns.items() if weight != zero]
    if not of_unknowns:
        raise NoUnknownError(place, equation)
    of_unknowns.sort(key=lambda item: (places[item[0].name], -item[0].order))
    of_inputs = tuple((i, weight) for i, weight in form.inputs.items() if weight != zero)
    return LinearBalance(tuple(of_unknowns), of_inputs, _literal(form.literals))


@dataclass(frozen=True, slots=True)
class _Form(Generic[T]):
    """weights . jets + weights . inputs + the sum of the literals."""

    unknowns: dict[Jet, T] = field(default_factory=dict)
    inputs: dict[Shifted[T], T] = field(default_factory=dict)
    literals: tuple[Expression, ...] = ()


@dataclass(frozen=True, slots=True)
class _Walk(Generic[T]):
    """What stays the same while an equation is walked through."""

    roles: Roles
    arithmetic: Arithmetic[T]
    place: Place
    errors: TermErrors

    def form(self, expression: Expression) -> _Form[T]:
        """Return the linear form of a part of the equation."""
        match expression:
            case Sum(terms):
                return self._added([self.form(term) for term in terms], expression)
            case Negation(operand):
                minus = self.arithmetic.number(Fraction(-1))
                return self._scaled(self.form(operand), minus, _negated, expression)
        if not self.roles.acts(expression):
            return _Form(literals=() if expression == ZERO else (expression,))
        match expression:
            case Name(text):
                return self._named(text)
            case Call(function, argument) if self.roles.of(function):
                return self._shifted(function, argument, expression)
            case Product(factors):
                return self._product(factors, expression)
            case Quotient(above, below) if not self.roles.within(below):
                value = self.arithmetic.value(below, self.place)
                weight = self.arithmetic.inverted(value, expression, self.place)
                return self._scaled(
                    self.form(above), weight, lambda term: Quotient(term, below), expression
                )
        raise self.errors.nonlinear(expression)

    def _named(self, text: str) -> _Form[T]:
        name, order = jet_of(text)
        one = self.arithmetic.number(Fraction(1))
        if name in self.roles.unknowns:
            return _Form({Jet(name, order): one})
        return _Form(inputs={Shifted(name, order, self.arithmetic.number(Fraction(0))): one})

    def _shifted(self, function: str, argument: Expression, whole: Expression) -> _Form[T]:
        """Return the form of an unknown or an input with something in brackets."""
        name, order = jet_of(function)
        one, zero = (self.arithmetic.number(Fraction(n)) for n in (1, 0))
        unknown = name in self.roles.unknowns
        kinds = self.roles.within(argument)
        if unknown and not kinds:
            raise self.errors.error(UnknownAtInstantError, whole)
        try:
            (weight,), constant = affine(argument, (self.roles.time,), self.arithmetic, self.place)
        except NonlinearTermError:
            weight, constant = zero, zero
        if weight == one and constant == zero:
            return self._named(function)
        if unknown:
            raise self.errors.error(DelayedUnknownError, whole)
        if weight != one:
            raise self.errors.error(InputInstantError, whole)
        return _Form(inputs={Shifted(name, order, self.arithmetic.negated(constant)): one})

    def _product(self, factors: Sequence[Expression], whole: Expression) -> _Form[T]:
        carrying = [factor for factor in factors if self.roles.acts(factor)]
        others = [factor for factor in factors if not self.roles.acts(factor)]
        if len(carrying) > 1 or any(map(self.roles.within, others)):
            raise self.errors.nonlinear(whole)
        weight = self.arithmetic.number(Fraction(1))
        for factor in others:
            value = self.arithmetic.value(factor, self.place)
            weight = self.arithmetic.multiplied(weight, value, factor, self.place)
        return self._scaled(
            self.form(carrying[0]), weight, lambda term: product([*others, term]), whole
        )

    def _scaled(
        self,
        form: _Form[T],
        weight: T,
        wrapped: Callable[[Expression], Expression],
        whole: Expression,
    ) -> _Form[T]:
        def scaled(one: T) -> T:
            return self.arithmetic.multiplied(one, weight, whole, self.place)

        return _Form(
            {jet: scaled(one) for jet, one in form.unknowns.items()},
            {shifted: scaled(one) for shifted, one in form.inputs.items()},
            tuple(_outside(wrapped, literal) for literal in form.literals),
        )

    def _added(self, forms: Sequence[_Form[T]], whole: Expression) -> _Form[T]:
        total: _Form[T] = _Form()
        for form in forms:
            for jet, weight in form.unknowns.items():
                total.unknowns[jet] = self._sum(total.unknowns.get(jet), weight, whole)
            for shifted, weight in form.inputs.items():
                total.inputs[shifted] = self._sum(total.inputs.get(shifted), weight, whole)
        literals = tuple(literal for form in forms for literal in form.literals)
        return _Form(total.unknowns, total.inputs, literals)

    def _sum(self, one: T | None, other: T, whole: Expression) -> T:
        if one is None:
            return other
        return self.arithmetic.added(one, other, whole, self.place)


def _negated(expression: Expression) -> Expression:
    return expression.operand if isinstance(expression, Negation) else Negation(expression)


def _outside(wrapped: Callable[[Expression], Expression], term: Expression) -> Expression:
    """Return a wrapped term, its sign outside."""
    return _negated(wrapped(term.operand)) if isinstance(term, Negation) else wrapped(term)


def _literal(terms: Sequence[Expression]) -> Expression | None:
    if len(terms) > 1:
        return Sum(tuple(terms))
    return terms[0] if terms else None
