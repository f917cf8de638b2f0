"""That driven formulas divide by nothing that vanishes in a case of the parameters.

Divisors that are rational in the parameters and the names of a case are taken apart as those
of other formulas are.  Where a constant of the solution is a quotient, there may be functions in
a divisor: each is taken for a number of its own, of which no more than the sign is known.
"""

from __future__ import annotations

from collections.abc import Iterator
from dataclasses import dataclass, field

from closedform.algebra.adjoined import adjoined
from closedform.algebra.domain import Comparison, ParameterDomain
from closedform.algebra.field import Scalar
from closedform.algebra.parameter_field import ParameterField
from closedform.errors import Place
from closedform.notation import plain, read_signal_formula
from closedform.notation.errors import FormulaError
from closedform.notation.expression import (
    Call,
    Expression,
    Name,
    Negation,
    Power,
    Product,
    Quotient,
    Sum,
)
from closedform.notation.rational import rational_value
from closedform.response.parametric.case import Case
from closedform.response.parametric.response import ParametricResponse
from closedform.verification.driven.setting import Setting
from closedform.verification.driven.written import formulas_of
from closedform.verification.parametric.defined import (
    divisor_check,
    divisors_in,
    facts_of_names,
)
from closedform.verification.record import Check

__all__ = ["defined_checks"]


def defined_checks(response: ParametricResponse, setting: Setting) -> Iterator[Check]:
    """Yield the checks that no divisor in the driven formulas of a case vanishes."""
    case, points = setting.solution.case, setting.solution.points
    if case is None:
        raise ValueError("without parameters no divisor is open")
    formulas = list(formulas_of(setting))
    formulas += [] if points is None else [c.formula for c in points.constants]

    def divisors() -> Iterator[Expression]:
        for formula in formulas:
            read = read_signal_formula(
                plain(formula), time=setting.model.time, constants=setting.names
            )
            yield from divisors_in(read)

    told = [] if points is None else [f for f in points.provided if not _has_call(f)]

    def apart(below: Expression) -> bool:
        return _has_call(below) or _is_provided(setting, below, told)

    def rational() -> Iterator[Expression]:
        return (below for below in divisors() if not apart(below))

    yield divisor_check("driven formulas defined", response, case, rational)
    if points is not None:
        yield _called_check(setting, case, (below for below in divisors() if apart(below)))


def _is_provided(setting: Setting, below: Expression, told: list[Expression]) -> bool:
    """Whether a divisor without functions has a factor that is stated not to be zero."""
    if not told:
        return False
    field = ParameterField(parameters=tuple(sorted(setting.names)))
    try:
        own, *others = (rational_value(e, field, Place()) for e in (below, *told))
    except FormulaError:  # the other check says so
        return False
    factors = set(_factors(field, own))
    return any(f in factors for other in others for f in _factors(field, other))


def _called_check(setting: Setting, case: Case, divisors: Iterator[Expression]) -> Check:
    item = "divisors with functions"
    points = setting.solution.points
    try:
        given = list(dict.fromkeys(divisors))
        told = [] if points is None else list(points.provided)
        numbers = _Numbers(setting, case)
        bare = [numbers.bare(formula) for formula in (*given, *told)]
        domain = numbers.domain()
        elements = [rational_value(formula, domain.field, Place()) for formula in bare]
    except FormulaError as error:
        return Check(item, "not attempted", f"a divisor was not read: {error}")
    provided = {f for e in elements[len(given) :] for f in _factors(domain.field, e)}
    factors = dict.fromkeys(f for e in elements[: len(given)] for f in _factors(domain.field, e))
    known = [f for f in factors if domain.sign_of(f).never_zero]
    for factor in factors:
        if factor not in known and factor not in provided:
            if numbers.is_by_powers(factor, provided):
                continue
            how = f"it was not decided whether {numbers.told(factor)} may vanish"
            return Check(item, "not attempted", how)
    left = len(factors) - len(known)
    how = f"{len(known)} factors vanish nowhere in the case"
    if left:
        how += f"; where {' or '.join(map(plain, told))} is 0 there is no such solution"
    return Check(item, "proved", how)


@dataclass
class _Numbers:
    """Functions of the parameters, each with a name in the place of it."""

    setting: Setting
    case: Case
    names: dict[Call, str] = field(default_factory=dict)

    def bare(self, formula: Expression) -> Expression:
        """Return a formula with a name for each function in it."""
        match formula:
            case Call():
                name = self.names.setdefault(formula, f"call_{len(self.names) + 1}")
                return Name(name)
            case Negation(inside):
                return Negation(self.bare(inside))
            case Sum(parts):
                return Sum(tuple(map(self.bare, parts)))
            case Product(parts):
                return Product(tuple(map(self.bare, parts)))
            case Quotient(above, below):
                return Quotient(self.bare(above), self.bare(below))
            case Power(base, exponent):
                return Power(self.bare(base), exponent)
            case _:
                return formula

    def domain(self) -> ParameterDomain:
        """Return the domain of the case with these names: exp and cosh are positive."""
        base = self.case.domain.field
        wider = ParameterField(
            parameters=(*base.parameters, *sorted(self.setting.names - {*base.parameters}))
        )
        conditions = [
            Comparison(base.into(wider, c.element), c.relation) for c in self.case.domain.conditions
        ]
        conditions += [fact for mode in self.case.modes for fact in facts_of_names(wider, mode)]
        inner = ParameterDomain(wider, tuple(dict.fromkeys(conditions)))
        whole = ParameterField(parameters=(*wider.parameters, *self.names.values()))
        found = [Comparison(wider.into(whole, c.element), c.relation) for c in inner.conditions]
        for call, name in self.names.items():
            symbol = whole.symbol(name)
            if call.function in ("exp", "cosh"):
                found.append(Comparison(symbol, ">"))
            elif call.function in ("sinh", "sqrt") and not _has_call(call.argument):
                signs = inner.sign_of(rational_value(call.argument, wider, Place())).values
                if signs in ({1}, {-1}):
                    found.append(Comparison(symbol * whole.scalar(min(signs)), ">"))
        return ParameterDomain(whole, tuple(found))

    def is_by_powers(self, factor: Scalar, provided: set[Scalar]) -> bool:
        """Whether a factor is one that is provided, with cosh and sinh by powers of e."""
        own = self._by_powers(factor)
        held = {f for p in provided for f in self._by_powers(p)}
        return bool(own) and all(f in held for f in own)

    def _by_powers(self, element: Scalar) -> list[Scalar]:
        """The factors of an element with powers of e in all functions, but for these powers."""
        whole = self.domain().field
        arguments = {
            name: (call.function, rational_value(call.argument, whole, Place()))
            for call, name in self.names.items()
            if call.function in ("exp", "cosh", "sinh") and not _has_call(call.argument)
        }
        numbers = adjoined(whole, [u for _, u in arguments.values()], [])
        wide, put = numbers.field, {}
        for name, (function, u) in arguments.items():
            up, two = numbers.power(u), wide.scalar(2)
            forms = {"exp": up, "cosh": (up + 1 / up) / two, "sinh": (up - 1 / up) / two}
            put[name] = forms[function]
        value = wide.substituted(numbers.lift(element), put)
        units = {wide.symbol(n.name) for n in numbers.numbers}
        return [f for f in _factors(wide, wide.of_polynomial(value.numer)) if f not in units]

    def told(self, factor: Scalar) -> str:
        """Return a factor in words, its functions spelled out."""
        text = str(factor)
        for call, name in reversed(self.names.items()):
            text = text.replace(name, plain(call))
        return text


def _factors(whole: ParameterField, element: Scalar) -> Iterator[Scalar]:
    if whole.number_sign(element) is None:
        for polynomial, _ in whole.factored(element).factors:
            yield whole.of_polynomial(polynomial)


def _has_call(formula: Expression) -> bool:
    match formula:
        case Call():
            return True
        case Negation(inside):
            return _has_call(inside)
        case Sum(parts) | Product(parts):
            return any(map(_has_call, parts))
        case Quotient(left, right) | Power(left, right):
            return _has_call(left) or _has_call(right)
        case _:
            return False
