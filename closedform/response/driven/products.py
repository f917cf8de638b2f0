"""Products of written formulas: factors cancelled, powers joined, cosh and sinh for two powers."""

from __future__ import annotations

from collections.abc import Sequence
from fractions import Fraction

from closedform.notation.expression import (
    ONE,
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
    power_of,
    product,
)
from closedform.notation.terms import negated, opened, sum_of

__all__ = ["amount_of_power", "multiplied", "with_hyperbolic"]


def with_hyperbolic(formula: Expression) -> Expression:
    """Return a formula with 2 cosh(u) for e^u + e^-u, and 2 sinh(u) for their difference."""
    match formula:
        case Sum((Call("exp", up), Call("exp", down))) if negated(down) == up:
            inside = up.operand if isinstance(up, Negation) else up
            return Product((number(2), Call("cosh", inside)))
        case Sum((Call("exp", up), Negation(Call("exp", down)))) if negated(down) == up:
            if isinstance(up, Negation):
                return Negation(Product((number(2), Call("sinh", up.operand))))
            return Product((number(2), Call("sinh", up)))
        case Negation(operand):
            return negated(with_hyperbolic(operand))
        case Sum(terms):
            return sum_of([with_hyperbolic(term) for term in terms])
        case Product(factors):
            signs, parts = 0, list[Expression]()
            for factor in map(with_hyperbolic, factors):
                minus = isinstance(factor, Negation)
                signs += minus
                parts.append(factor.operand if isinstance(factor, Negation) else factor)
            whole = product(parts)
            return Negation(whole) if signs % 2 else whole
        case Quotient(above, below):
            top = with_hyperbolic(above)
            if isinstance(top, Negation):
                return Negation(Quotient(top.operand, below))
            return Quotient(top, below)
        case _:
            return formula


def multiplied(front: Expression, formula: Expression) -> Expression:
    """Return front · formula as one fraction, its sign outside; equal factors are cancelled."""
    if isinstance(formula, Sum):
        inside = _multiplied(front, formula)
        apart = opened(sum_of([multiplied(front, term) for term in formula.terms]))
        return min((inside, apart), key=operations)
    return _multiplied(front, formula)


def amount_of_power(term: Expression) -> tuple[Expression, Expression] | None:
    """Return (amount, u) of a term amount · e^u, None for another."""
    inside = term.operand if isinstance(term, Negation) else term
    factors = list(factors_of(inside))
    powers = [f for f in factors if isinstance(f, Call) and f.function == "exp"]
    if len(powers) != 1:
        return None
    factors.remove(powers[0])
    amount = product(factors) if factors else ONE
    return (negated(amount) if isinstance(term, Negation) else amount), powers[0].argument


def _in_powers(factors: Sequence[Expression]) -> list[Expression]:
    """The factors, names that come more than once as powers."""
    counts: dict[Expression, int] = {}
    for factor in factors:
        base, exponent = factor, 1
        match factor:
            case Power(Name() as name, Number(value)) if value.denominator == 1:
                base, exponent = name, int(value)
        counts[base] = counts.get(base, 0) + exponent
    return [power_of(base, exponent) for base, exponent in counts.items()]


def _multiplied(front: Expression, formula: Expression) -> Expression:
    sign, amount = 1, Fraction(1)
    above: list[Expression] = []
    below: list[Expression] = []
    for part in (front, formula):
        own = part
        if isinstance(own, Negation):
            sign, own = -sign, own.operand
        top, bottom = (own.numerator, own.denominator) if isinstance(own, Quotient) else (own, ONE)
        if isinstance(top, Negation):
            sign, top = -sign, top.operand
        above += factors_of(top)
        below += factors_of(bottom)
    exponents = [f.argument for f in above if isinstance(f, Call) and f.function == "exp"]
    if len(exponents) > 1:
        place = next(k for k, f in enumerate(above) if isinstance(f, Call) and f.function == "exp")
        above = [f for f in above if not (isinstance(f, Call) and f.function == "exp")]
        above.insert(place, Call("exp", opened(sum_of(exponents))))
    for held, power in ((above, 1), (below, -1)):
        for numeral in [f for f in held if isinstance(f, Number)]:
            held.remove(numeral)
            amount *= numeral.value**power
    for factor in list(above):
        if factor in below:
            above.remove(factor)
            below.remove(factor)
    top = product((number(amount.numerator), *_in_powers(above)))
    bottom = product((number(amount.denominator), *_in_powers(below)))
    whole = top if bottom == ONE else Quotient(top, bottom)
    return negated(whole) if sign < 0 else whole
