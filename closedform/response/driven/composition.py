"""Formulas of the driven solution: columns shifted to their origins, and added up."""

from __future__ import annotations

from collections.abc import Mapping, Sequence
from dataclasses import replace
from fractions import Fraction

from closedform.algebra.field import BaseField, Scalar
from closedform.algebra.parameter_field import ParameterField
from closedform.algebra.waves import Constant
from closedform.notation.expression import (
    ONE,
    ZERO,
    Call,
    Expression,
    Name,
    Negation,
    Number,
    Power,
    Product,
    Quotient,
    Sum,
    factors_of,
    number,
    operations,
    product,
)
from closedform.notation.rational_formula import rational_formula
from closedform.notation.terms import negated, opened, sum_of, surd_formula
from closedform.response.driven.functions import Interval, Summand, Switch

__all__ = [
    "constant_formula",
    "element_formula",
    "in_front",
    "interval_formula",
    "put_in_place",
    "renamed",
    "scaled",
    "shifted",
    "step_formula",
    "summed",
]

Rows = tuple[tuple[Expression, ...], ...]


def element_formula(field: BaseField, element: Scalar) -> Expression:
    """Return an element of the field of a model as a formula."""
    if isinstance(field, ParameterField):
        return rational_formula(field, element)
    return surd_formula(field.surds(element))


def constant_formula(field: BaseField, constant: Constant) -> Expression | None:
    """Return e^growth · kernel(angle) as a formula, None for 1."""
    factors: list[Expression] = []
    if constant.growth:
        factors.append(Call("exp", element_formula(field, constant.growth)))
    if constant.kernel != "one":
        factors.append(Call(constant.kernel, element_formula(field, constant.angle)))
    return product(factors) if factors else None


def shifted(formula: Expression, time: str, origin: Expression) -> Expression:
    """Return a formula with t - origin in the place of the time t.

    A product c t with the origin b/c becomes c t - b: sin(w t + phi), not sin(w (t + phi/w)).
    """
    if origin == ZERO:
        return formula
    return _put(formula, {time: sum_of([Name(time), negated(origin)])}, (time, origin))


def renamed(formula: Expression, old: str, new: str) -> Expression:
    """Return a formula with one name in the place of another."""
    return _put(formula, {old: Name(new)}, None)


def put_in_place(formula: Expression, given: Mapping[str, Expression]) -> Expression:
    """Return a formula with formulas in the place of names, all at once."""
    return _put(formula, given, None)


def _put(
    formula: Expression, given: Mapping[str, Expression], origin: tuple[str, Expression] | None
) -> Expression:
    def put(node: Expression) -> Expression:
        match node:
            case Name(text):
                return given.get(text, node)
            case Number():
                return node
            case Negation(operand):
                return replace(node, operand=put(operand))
            case Sum(terms):
                return sum_of([put(term) for term in terms])
            case Product(factors):
                turned = None if origin is None else _turned(node, *origin)
                return turned or product(put(f) for f in factors)
            case Quotient(above, below):
                return Quotient(put(above), put(below))
            case Power(base, exponent):
                return Power(put(base), put(exponent))
            case Call(function, argument):
                return Call(function, put(argument))

    return put(formula)


def _turned(node: Product, time: str, origin: Expression) -> Expression | None:
    """The product less an angle b, for a product c t and the origin b/c; else None."""
    rest = [f for f in node.factors if f != Name(time)]
    inside = origin.operand if isinstance(origin, Negation) else origin
    if len(rest) != len(node.factors) - 1:
        return None
    match product(rest), inside:
        case Number(rate), Number(delay) if delay.denominator != 1:
            turned = rate * delay
            if turned.denominator >= delay.denominator:
                return None
            angle: Expression = Number(turned)
        case rate, Quotient(above, below) if rate == below:
            angle = above
        case _:
            return None
    return sum_of([node, angle if isinstance(origin, Negation) else negated(angle)])


def interval_formula(
    field: BaseField, columns: Rows, row: int, interval: Interval, time: str
) -> Expression:
    """Return one row of the solution in one interval."""
    return summed(field, columns, row, interval.summands, time)


def step_formula(
    field: BaseField,
    columns: Rows,
    row: int,
    first: Interval,
    switches: Sequence[Switch],
    time: str,
) -> Expression:
    """Return one row of the solution for all times, with step(t - a) for what joins at a."""
    terms = [summed(field, columns, row, first.summands, time)]
    for switch in switches:
        joined = summed(field, columns, row, switch.summands, time)
        if joined == ZERO:
            continue
        at = sum_of([Name(time), negated(element_formula(field, switch.at))])
        terms.append(scaled(Call("step", at), joined))
    kept = [term for term in terms if term != ZERO]
    return opened(sum_of(kept)) if kept else ZERO


def summed(
    field: BaseField,
    columns: Rows,
    row: int,
    summands: Sequence[Summand],
    time: str,
) -> Expression:
    """Return one row of a sum of columns, each shifted to its origin."""
    terms = []
    for summand in summands:
        formula = columns[row][summand.place]
        if formula == ZERO:
            continue
        moved = shifted(formula, time, element_formula(field, summand.origin))
        constant = constant_formula(field, summand.constant)
        terms.append(moved if constant is None else scaled(constant, moved))
    if any(summand.constant.named for summand in summands):
        terms = _over_one([_tidied(term) for term in terms])
    return opened(sum_of(terms)) if terms else ZERO


def _tidied(formula: Expression) -> Expression:
    """The formula with numbers in sums added up, and opposite terms left out."""
    match formula:
        case Negation(operand):
            return negated(_tidied(operand))
        case Sum(terms):
            return _added([_tidied(term) for term in terms])
        case Product(factors):
            return product(map(_tidied, factors))
        case Quotient(above, below):
            return Quotient(_tidied(above), _tidied(below))
        case Power(base, exponent):
            return Power(_tidied(base), exponent)
        case Call(function, argument):
            return Call(function, _tidied(argument))
        case Name() | Number():
            return formula


def _added(terms: Sequence[Expression]) -> Expression:
    total, kept = Fraction(0), list[Expression]()
    for term in terms:
        match term:
            case Number(value):
                total += value
            case Negation(Number(value)):
                total -= value
            case _ if negated(term) in kept:
                kept.remove(negated(term))
            case _:
                kept.append(term)
    if total or not kept:
        kept.insert(0 if total > 0 else len(kept), number(total))
    whole = opened(sum_of(kept))
    apart = [part for term in kept for part in _distributed(term)]
    return whole if len(apart) == len(kept) else min(whole, _added(apart), key=operations)


def _distributed(term: Expression) -> list[Expression]:
    """The terms of a product of a sum with one factor."""
    match term:
        case Negation(operand):
            return [negated(part) for part in _distributed(operand)]
        case Product((factor, Sum(terms))):
            return [
                Negation(product((factor, part.operand)))
                if isinstance(part, Negation)
                else product((factor, part))
                for part in terms
            ]
        case _:
            return [term]


def _over_one(terms: Sequence[Expression]) -> list[Expression]:
    """The terms, those of one denominator put together where that is shorter."""
    alike: dict[Expression, list[Expression]] = {}
    for term in terms:
        inside, minus = (term.operand, True) if isinstance(term, Negation) else (term, False)
        below = inside.denominator if isinstance(inside, Quotient) else ONE
        above = inside.numerator if isinstance(inside, Quotient) else inside
        alike.setdefault(below, []).append(negated(above) if minus else above)
    found: list[Expression] = []
    for below, several in alike.items():
        fronts, whole = in_front(several)
        above = product((*fronts, whole)) if fronts else whole
        if below != ONE and isinstance(above, Negation):
            found.append(Negation(Quotient(above.operand, below)))
        else:
            found.append(above if below == ONE else Quotient(opened(above), below))
    shorter = min((list(terms), found), key=lambda form: operations(sum_of(form)))
    return [_with_difference_turned(term) for term in shorter]


def _with_difference_turned(term: Expression) -> Expression:
    """-f (a - b) as f (b - a)."""
    if not isinstance(term, Negation):
        return term
    inside = term.operand
    above = inside.numerator if isinstance(inside, Quotient) else inside
    factors = list(factors_of(above))
    for place, factor in enumerate(factors):
        if isinstance(factor, Sum) and any(isinstance(t, Negation) for t in factor.terms):
            turned = opened(sum_of([negated(t) for t in factor.terms]))
            whole = product([*factors[:place], turned, *factors[place + 1 :]])
            return Quotient(whole, inside.denominator) if isinstance(inside, Quotient) else whole
    return term


def in_front(terms: Sequence[Expression]) -> tuple[list[Expression], Expression]:
    """Return the factors that all terms share, and the sum of what is left of them."""
    if len(terms) < 2:
        return [], sum_of(terms)
    parts = [list(factors_of(t.operand if isinstance(t, Negation) else t)) for t in terms]
    shared = [f for f in parts[0] if all(f in own for own in parts[1:])]
    if not shared or len(set(shared)) < len(shared):
        return [], sum_of(terms)
    left = []
    for term, own in zip(terms, parts, strict=True):
        rest = product([f for f in own if f not in shared])
        left.append(Negation(rest) if isinstance(term, Negation) else rest)
    return shared, sum_of(left)


def scaled(factor: Expression, formula: Expression) -> Expression:
    """Return factor · formula, its sign outside and a denominator below both."""
    if isinstance(formula, Quotient):
        above = scaled(factor, formula.numerator)
        if isinstance(above, Negation):
            return Negation(Quotient(above.operand, formula.denominator))
        return Quotient(above, formula.denominator)
    if isinstance(formula, Negation):
        return Negation(scaled(factor, formula.operand))
    if isinstance(formula, Sum) and all(isinstance(t, Negation) for t in formula.terms):
        return Negation(product((factor, Sum(tuple(map(negated, formula.terms))))))
    match formula:
        case Product((Number() as amount, *others)):  # a number stays in front
            return product((amount, factor, *others))
    return product((factor, formula))
