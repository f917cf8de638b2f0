"""That the formulas of a case divide by nothing that vanishes, anywhere in the case.

The identities are proved for the coefficients as rational functions.  A formula as it is
written may divide by more: by what was put in the place of a parameter, say.  So every
divisor in its text is taken apart, and each factor is shown not to vanish on the case.
"""

from __future__ import annotations

from collections.abc import Callable, Iterable, Iterator
from itertools import combinations

from closedform.algebra.domain import Comparison, ParameterDomain
from closedform.algebra.equations import linear_solution
from closedform.algebra.field import Scalar
from closedform.algebra.parameter_field import ParameterField
from closedform.errors import Place
from closedform.model.parametric import ParametricModel
from closedform.notation.errors import FormulaError
from closedform.notation.expression import (
    Call,
    Expression,
    Negation,
    Power,
    Product,
    Quotient,
    Sum,
    names_in,
)
from closedform.notation.rational import rational_value
from closedform.response.parametric.case import Case
from closedform.response.parametric.modes import Mode, value_at_pair
from closedform.response.parametric.response import ParametricResponse
from closedform.verification.parametric.values import read_back
from closedform.verification.record import Check

__all__ = [
    "defined_check",
    "divisor_check",
    "divisors_in",
    "facts_of_names",
    "undefined_name",
]

_ITEM = "formulas defined"

MOST_TURNED = 12
"""Polynomials with more terms than this are not multiplied by their opposites in a name."""


def defined_check(response: ParametricResponse, case: Case) -> Check:
    """No divisor in the formulas of a case, and in the definitions of its names, vanishes."""
    missing = undefined_name(response, case)
    if missing is not None:
        return Check(_ITEM, "refuted", f"{missing} has no definition")

    def divisors() -> Iterator[Expression]:
        for formula in _formulas(case):
            yield from divisors_in(read_back(response.model, case, formula))

    return divisor_check(_ITEM, response, case, divisors)


def divisor_check(
    item: str,
    response: ParametricResponse,
    case: Case,
    divisors: Callable[[], Iterable[Expression]],
) -> Check:
    """None of the divisors vanishes anywhere in a case.

    They are formulas in the parameters and the names of the case; what raises a FormulaError
    when they are read leaves the check open.
    """
    model = response.model
    names = tuple(q.name for q in case.quantities)
    field = ParameterField(parameters=(*model.field.parameters, *names))
    domain = _with_names(model, field, case)
    factors: dict[Scalar, None] = {}
    try:
        for below in divisors():
            element = rational_value(below, field, Place())
            factors |= dict.fromkeys(_factors(field, element))
    except FormulaError as error:  # its text is longer or deeper than what is read
        return Check(item, "not attempted", f"a formula was not read back: {error}")
    solved = [
        {name: model.field.into(field, value)}
        for name, value in _solved_equations(model.field, case)
    ]
    ways: list[dict[str, Scalar]] = [{}, _rational_definitions(field, case), *solved]
    squares = _squares(field, case)
    undecided = [
        d
        for d in factors
        if not any(domain.sign_of(field.substituted(d, put)).never_zero for put in ways)
        and not domain.sign_of(_with_squares(field, d, squares)).never_zero
    ]
    if undecided:
        how = f"it was not decided whether {undecided[0]} may vanish"
        return Check(item, "not attempted", how)
    return Check(
        item,
        "proved",
        f"every divisor in the formulas was taken apart, {len(factors)} factors in all: none of "
        "them vanishes in this case",
    )


def undefined_name(response: ParametricResponse, case: Case) -> str | None:
    """Return a name that is used in a case without a definition before, if there is one."""
    known = set(response.model.field.parameters)
    for quantity in case.quantities:
        used = frozenset() if quantity.formula is None else names_in(quantity.formula)
        if unknown := used - known:
            return min(unknown)
        known.add(quantity.name)
    known.add(response.model.time)
    used = frozenset(name for mode in case.modes for name in mode.names)
    unknown = used.union(*map(names_in, _formulas(case))) - known
    return min(unknown, default=None)


def _formulas(case: Case) -> Iterator[Expression]:
    yield from case.solution
    yield from case.outputs
    for row in (*case.transition, *case.fronted[1]):
        yield from row
    if case.fronted[0] is not None:
        yield case.fronted[0]
    for quantity in case.quantities:
        if quantity.formula is not None:
            yield quantity.formula


def divisors_in(expression: Expression) -> Iterator[Expression]:
    """Yield what a formula divides by, at every depth."""
    match expression:
        case Quotient(above, below):
            yield below
            yield from divisors_in(above)
            yield from divisors_in(below)
        case Power(base, exponent):
            if isinstance(exponent, Negation):
                yield base
            yield from divisors_in(base)
        case Negation(inside) | Call(_, inside):
            yield from divisors_in(inside)
        case Sum(several) | Product(several):
            for part in several:
                yield from divisors_in(part)
        case _:
            pass


def _factors(field: ParameterField, element: Scalar) -> Iterator[Scalar]:
    if field.number_sign(element) is None:
        for polynomial, _ in field.factored(element).factors:
            yield field.of_polynomial(polynomial)


def _with_names(model: ParametricModel, field: ParameterField, case: Case) -> ParameterDomain:
    """The domain of the case, what it excludes, and what its regimes say about the names.

    What is assumed of the model holds in the case too, if it was put in or not.

    Frequencies are positive, roots of one factor are in their order, and none of them is a
    root of another factor: the resultant of the two does not vanish on the case.
    """
    base = model.field
    known = [
        *case.domain.conditions,
        *model.domain.conditions,
        *_with_equations_put_in(base, case),
        *(
            Comparison(e.polynomials[0], "!=")
            for e in case.branch.exceptional
            if e.fate == "excluded" and len(e.polynomials) == 1
        ),
    ]
    conditions = [Comparison(base.into(field, c.element), c.relation) for c in known]
    for mode in case.modes:
        conditions += facts_of_names(field, mode)
        for other in case.modes:
            if other is not mode and mode.regime.kind in _SIGNS:
                conditions += _apart(base, field, mode, other)
            elif other is not mode and mode.regime.kind == "known roots":
                conditions += _apart_from_known(base, field, mode, other)
    for quantity in case.quantities:
        formula = quantity.formula
        if quantity.origin != "roots" and formula is not None and not _has_root(formula):
            value = rational_value(formula, field, Place())
            sign = ParameterDomain(field, tuple(conditions)).sign_of(value).sign
            if sign in ("positive", "negative"):
                symbol = field.symbol(quantity.name)
                conditions.append(Comparison(symbol if sign == "positive" else -symbol, ">"))
            elif sign == "nonzero":
                conditions.append(Comparison(field.symbol(quantity.name), "!="))
        elif quantity.origin != "roots":
            conditions.append(Comparison(field.symbol(quantity.name), ">"))
    return ParameterDomain(field, tuple(dict.fromkeys(conditions)))


def _rational_definitions(field: ParameterField, case: Case) -> dict[str, Scalar]:
    """The names that stand for rational functions of the parameters, and these."""
    found: dict[str, Scalar] = {}
    for quantity in case.quantities:
        formula = quantity.formula
        if quantity.origin != "roots" and formula is not None and not _has_root(formula):
            value = rational_value(formula, field, Place())
            found[quantity.name] = field.substituted(value, found)
    return found


def _squares(field: ParameterField, case: Case) -> dict[str, Scalar]:
    """The names that stand for a square root, each with its square."""
    return {
        quantity.name: rational_value(quantity.formula.argument, field, Place())
        for quantity in case.quantities
        if isinstance(quantity.formula, Call)
        and quantity.formula.function == "sqrt"
        and not _has_root(quantity.formula.argument)
    }


def _with_squares(field: ParameterField, element: Scalar, squares: dict[str, Scalar]) -> Scalar:
    """A polynomial that vanishes wherever the given one does, with squares of names put in.

    Where a name stands in odd powers, it is the product of the given one with that of the
    opposite name: of (w - r)(w + r) = w^2 - r^2.
    """
    for name, square in reversed(squares.items()):
        place = field.parameters.index(name)
        if element.denom != 1:
            continue
        if any(monomial[place] % 2 for monomial in element.numer.itermonoms()):
            if len(element.numer) > MOST_TURNED:
                continue
            element *= field.substituted(element, {name: -field.symbol(name)})
        halved = {
            (*monomial[:place], monomial[place] // 2, *monomial[place + 1 :]): c
            for monomial, c in element.numer.iterterms()
        }
        own = field.of_polynomial(element.numer.ring.from_dict(halved))
        element = field.of_polynomial(field.substituted(own, {name: square}).numer)
    return element


def _with_equations_put_in(base: ParameterField, case: Case) -> Iterator[Comparison]:
    """The conditions once more, with the equations among them solved for a parameter."""
    for name, value in _solved_equations(base, case):
        for condition in case.domain.conditions:
            put_in = base.substituted(condition.element, {name: value})
            if condition.relation != "=" or put_in:
                yield Comparison(put_in, condition.relation)


def _solved_equations(base: ParameterField, case: Case) -> Iterator[tuple[str, Scalar]]:
    """The equations among the conditions, each solved for a parameter in it."""
    for equation in case.domain.conditions:
        if equation.relation != "=":
            continue
        for name in base.parameters:
            value = linear_solution(base, equation.element, name)
            slope = base.derivative(equation.element, name)
            if value is not None and case.domain.sign_of(slope).never_zero:
                yield name, value


_SIGNS = {"decaying": -1, "real roots": 1}


def facts_of_names(field: ParameterField, mode: Mode) -> Iterator[Comparison]:
    """Yield what is said of the names of one mode: their signs, and their order."""
    names = [field.symbol(name) for name in mode.names]
    match mode.regime.kind:
        case "circular" | "hyperbolic" | "quartet":
            yield from (Comparison(name, ">") for name in names)
        case "decaying":
            yield from (Comparison(name, ">") for name in names)
            yield from (Comparison(a - b, ">") for a, b in combinations(names, 2))
        case "real roots":
            yield from (Comparison(a - b, ">") for a, b in combinations(names, 2))
        case "squares":
            yield from (Comparison(name, ">") for name in names)
            if len(set(mode.regime.signs)) == 1:
                yield from (Comparison(b - a, ">") for a, b in combinations(names, 2))
        case "root and pair":
            yield Comparison(names[2], ">")
        case "known roots":
            frequencies = (name for _, _, name in mode.named_roots if name is not None)
            yield from (Comparison(field.symbol(name), ">") for name in frequencies)
        case _:
            pass


def _apart(
    base: ParameterField, field: ParameterField, mode: Mode, other: Mode
) -> Iterator[Comparison]:
    """q(lambda) is not 0 for the named roots lambda of a mode and the factor q of another.

    So where q has named roots too, no difference of the two vanishes.
    """
    sign = _SIGNS[mode.regime.kind]
    for name in mode.names:
        root = field.symbol(name) * field.scalar(sign)
        if other.regime.kind in _SIGNS:
            turn = field.scalar(_SIGNS[other.regime.kind])
            yield from (Comparison(root - turn * field.symbol(n), "!=") for n in other.names)
            continue
        value = field.domain.zero
        for c in other.factor.polynomial:
            value = value * root + base.into(field, c)
        yield Comparison(value, "!=")


def _apart_from_known(
    base: ParameterField, field: ParameterField, mode: Mode, other: Mode
) -> Iterator[Comparison]:
    """|q(lambda)|^2 is positive for the known roots lambda of a mode and another factor q."""
    coefficients = [base.into(field, c) for c in other.factor.polynomial]
    for _, rate, frequency in mode.named_roots:
        centre = base.into(field, mode.factor.roots.centre)
        place = centre if rate is None else field.symbol(rate)
        turn = field.domain.zero if frequency is None else field.symbol(frequency)
        u, v = value_at_pair(field, coefficients, place, turn)
        yield Comparison(u, "!=") if frequency is None else Comparison(u**2 + v**2, ">")


def _has_root(expression: Expression) -> bool:
    match expression:
        case Call():
            return True
        case Negation(inside):
            return _has_root(inside)
        case Sum(several) | Product(several):
            return any(map(_has_root, several))
        case Quotient(left, right) | Power(left, right):
            return _has_root(left) or _has_root(right)
    return False
