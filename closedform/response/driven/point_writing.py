"""Formulas of numbers in which e^b, cosines and sines at instants stand.

Exponentials of both signs are put together to cosh and sinh where that is shorter.
"""

from __future__ import annotations

from collections.abc import Mapping, Sequence
from dataclasses import dataclass, replace
from fractions import Fraction
from functools import cached_property, reduce
from itertools import product as every_choice
from operator import mul
from typing import Any

from closedform.algebra.adjoined import Adjoined, AdjoinedNumber
from closedform.algebra.equations import linear_solution
from closedform.algebra.field import Scalar
from closedform.algebra.parameter_field import ParameterField
from closedform.algebra.surds import SurdSum
from closedform.errors import Place
from closedform.notation.errors import FormulaError
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
    number,
    operations,
    product,
)
from closedform.notation.rational import rational_value
from closedform.notation.rational_formula import rational_formula
from closedform.notation.terms import negated, opened, radical_formula, sum_of, surd_formula
from closedform.response.driven.composition import element_formula, in_front, scaled
from closedform.response.driven.products import (
    amount_of_power,
    multiplied,
    with_hyperbolic,
)
from closedform.response.parametric.case import Case
from closedform.response.parametric.modes import perfect_root

__all__ = ["PointWriter"]

_MOST = 3
"""Exponentials of which every way to write them is tried."""


@dataclass(frozen=True)
class PointWriter:
    """Writes elements of a field with adjoined numbers; `case` is None without parameters.

    `chosen` are parameters with what stands for them in every formula, of the writing field.
    """

    numbers: Adjoined
    case: Case | None
    chosen: tuple[tuple[str, Scalar], ...] = ()

    def formula(self, element: Scalar) -> Expression:
        """Return an element in the shortest form that is tried."""
        put = self._put(element)
        return self._written(self._writing.substituted(put, dict(self.chosen)))

    def others(self) -> list[PointWriter]:
        """Return writers that put a frequency of the case for a parameter: k = m omega^2."""
        return [replace(self, chosen=tuple(own.items())) for own in self._by_letters]

    @cached_property
    def _by_letters(self) -> list[dict[str, Scalar]]:
        base, writing = self.numbers.base, self._writing
        if self.case is None or not isinstance(base, ParameterField):
            return []
        found: list[dict[str, Scalar]] = []
        for mode in self.case.modes:
            if mode.regime.kind not in ("circular", "hyperbolic") or not mode.names:
                continue
            square = mode.factor.roots.discriminant
            square = square if mode.regime.kind == "hyperbolic" else -square
            equation = writing.symbol(mode.names[0]) ** 2 - base.into(writing, square)
            for name in base.free:
                solved = linear_solution(writing, equation, name)
                if solved is not None and not solved.denom.is_ground:
                    continue
                if solved is not None:
                    found.append({name: solved})
        return found

    def _forms(self, element: Scalar) -> list[Scalar]:
        """The element, and the same with the abbreviations of the case, over the writing field."""
        forms = [element]
        for name, solved in self._abbreviations:
            forms += [self._writing.substituted(form, {name: solved}) for form in forms]
        return forms

    @cached_property
    def _abbreviations(self) -> list[tuple[str, Scalar]]:
        """Parameters, each by the abbreviation that stands for it."""
        base, writing = self.numbers.base, self._writing
        if self.case is None or not isinstance(base, ParameterField):
            return []
        formulas = {q.name: q.formula for q in self.case.quantities if q.origin != "roots"}
        found = []
        for name, parameter, _ in self.case.abbreviated:
            formula = formulas.get(name)
            if formula is None or parameter not in base.parameters:
                continue
            try:
                value = rational_value(formula, base, Place())
            except FormulaError:  # it has a root in it
                continue
            equation = writing.symbol(name) - base.into(writing, value)
            solved = linear_solution(writing, equation, parameter)
            if solved is not None:
                found.append((parameter, solved))
        return found

    def hyperbolic(self, formula: Expression) -> Expression:
        """Return a formula with cosh and sinh for exponentials of both signs, where shorter."""
        formula = with_hyperbolic(formula)
        match formula:
            case Negation(operand):
                return negated(self.hyperbolic(operand))
            case Quotient(above, below):
                return multiplied(self.hyperbolic(above), Quotient(ONE, below))
            case Product((*fronts, Sum() as last)):
                return multiplied(product(fronts), self.hyperbolic(last))
            case Sum((first, second)):
                return min(formula, self._paired(first, second) or formula, key=operations)
            case _:
                return formula

    def _paired(self, first: Expression, second: Expression) -> Expression | None:
        """A e^u + b e^-u as (a + b) cosh u + (a - b) sinh u."""
        parts = [amount_of_power(first), amount_of_power(second)]
        if parts[0] is None or parts[1] is None:
            return None
        (one, up), (other, down) = parts[0], parts[1]
        if negated(up) != down:
            return None
        try:
            a, b = (rational_value(e, self._writing, Place()) for e in (one, other))
        except FormulaError:  # it has a root in it
            return None
        if isinstance(up, Negation):
            a, b, up = b, a, up.operand
        terms = [
            multiplied(rational_formula(self._writing, amount), Call(function, up))
            for amount, function in ((a + b, "cosh"), (a - b, "sinh"))
            if amount
        ]
        fronts, whole = in_front(terms)
        return product((*fronts, whole)) if fronts else whole

    # The field in which formulas are written

    @cached_property
    def _letters(self) -> dict[Scalar, tuple[Scalar, int]]:
        """For each core: sqrt(± core) as an element of the writing field, and its sign."""
        found: dict[Scalar, tuple[Scalar, int]] = {}
        for core in dict.fromkeys(n.core for n in self.numbers.numbers if n.kind == "even"):
            found[core] = (self._root(core), self.sign_of(core))
        return found

    @cached_property
    def _writing(self) -> ParameterField:
        letters: list[str] = []
        first: list[str] = []
        base = self.numbers.base
        if self.case is not None and isinstance(base, ParameterField):
            letters = [n for m in self.case.modes for n in m.names]
            letters += [q.name for q in self.case.quantities if q.name not in letters]
            entries = [e for row in self.case.branch.matrix.to_list() for e in row]
            held = frozenset().union(*map(base.names_in, entries))
            first = [n for n in base.parameters if n in held]
        rest = [n for n in self.numbers.field.parameters if n not in first]
        roots = [_root_token(k) for k, _ in enumerate(self._cores)]
        return ParameterField((), (*first, *letters, *rest, *roots))

    @cached_property
    def _cores(self) -> tuple[Scalar, ...]:
        return tuple(dict.fromkeys(n.core for n in self.numbers.numbers if n.kind == "even"))

    def sign_of(self, core: Scalar) -> int:
        """Return the sign of what stands below the root of an angle."""
        field = self.numbers.base
        if self.case is None or not isinstance(field, ParameterField):
            return field.sign(core)
        known = field.number_sign(core)
        if known is not None:
            return known
        values = self.case.domain.sign_of(core).values
        if len(values) != 1:
            raise ValueError(f"the sign of {core} is open in the case")
        return min(values)

    def _root(self, core: Scalar) -> Scalar:
        """sqrt(|core|), up to its sign: what it is for is even in it."""
        writing, field = self._writing, self.numbers.base
        if core in (field.domain.one, -field.domain.one):
            return writing.domain.one
        if self.case is not None and isinstance(field, ParameterField):
            for mode in self.case.modes:
                if mode.factor.degree != 2 or not mode.names:
                    continue
                ratio = perfect_root(field, mode.factor.roots.discriminant / core)
                if ratio is None:
                    continue
                held = writing.symbol(mode.names[0])
                if mode.regime.kind == "decaying":
                    held = (held - writing.symbol(mode.names[1])) / 2
                return held / field.into(writing, ratio)
        return writing.symbol(_root_token(self._cores.index(core)))

    def _put(self, element: Scalar) -> Scalar:
        """The element with S = sin(…)/sqrt(…), over the writing field."""
        writing = self._writing
        lifted = self.numbers.field.into(writing, element)
        values: dict[str, Scalar] = {}
        for n in self.numbers.numbers:
            if n.kind not in ("even", "odd"):
                continue
            root, sign = self._letters[n.core]
            if sign == 0:
                amount = self.numbers.field.into(writing, self.numbers.lift(n.amount))
                values[n.name] = writing.domain.one if n.kind == "even" else amount
            elif n.kind == "odd":
                values[n.name] = writing.symbol(n.name) / root
        return writing.substituted(lifted, values)

    # Exponentials of both signs

    def _written(self, element: Scalar) -> Expression:
        if not element:
            return number(0)
        exponentials = [n for n in self.numbers.numbers if n.kind == "exp"]
        used = [n for n in exponentials if n.name in self._writing.symbols_in(element)]
        forms = []
        choices = every_choice((True, False), repeat=len(used)) if len(used) <= _MOST else [()]
        for chosen in choices:
            turned = [n for n, yes in zip(used, chosen, strict=False) if yes]
            forms.append(self._with(element, used, turned))
        return min(forms, key=operations)

    def _with(
        self, element: Scalar, used: Sequence[AdjoinedNumber], turned: Sequence[AdjoinedNumber]
    ) -> Expression:
        """The element with cosh and sinh in the place of the exponentials `turned`."""
        wide = self._hyperbolic(element, turned)
        above, first = _balanced(wide, self._writing, element.numer, used, turned)
        below, second = _balanced(wide, self._writing, element.denom, used, turned)
        formula = self._told(rational_formula(wide, above / below))
        exponents = []
        for n in used:
            left = first.get(n.name, Fraction(0)) - second.get(n.name, Fraction(0))
            if left:
                exponents.append(self._multiple(left, n.amount))
        if exponents:
            formula = multiplied(Call("exp", opened(sum_of(exponents))), formula)
        return formula

    def _hyperbolic(self, element: Scalar, turned: Sequence[AdjoinedNumber]) -> ParameterField:
        names: list[str] = []
        for n in turned:
            place = self._writing.parameters.index(n.name)
            most = max(_span(polynomial, place) for polynomial in (element.numer, element.denom))
            for twice in range(1, most + 1):
                names += [f"{n.name}_cosh{twice}", f"{n.name}_sinh{twice}"]
        return ParameterField((), (*self._writing.parameters, *names))

    # From names to formulas

    def _told(self, formula: Expression) -> Expression:
        """The formula with what the names of numbers stand for."""
        known = {n.name: n for n in self.numbers.numbers}

        def put(node: Expression) -> Expression:
            match node:
                case Name(text) if text in known:
                    return self._meaning(known[text])
                case Name(text) if text.startswith("@exp") and "_" in text:
                    return self._pair(known, text)
                case Name(text) if text.startswith("@sqrt"):
                    return self._square_root(self._cores[int(text[5:])])
                case Name() | Number():
                    return node
                case Power(Name(text), Number(exponent)) if text.startswith("@exp") and (
                    text in known
                ):
                    return Call("exp", self._multiple(exponent, known[text].amount))
                case Negation(inside):
                    return Negation(put(inside))
                case Sum(terms):
                    return Sum(tuple(map(put, terms)))
                case Product(factors):
                    return product(map(put, factors))
                case Quotient(above, below):
                    return Quotient(put(above), put(below))
                case Power(base, exponent):
                    return Power(put(base), exponent)
                case Call(function, argument):
                    return Call(function, put(argument))

        return put(formula)

    def _meaning(self, n: AdjoinedNumber) -> Expression:
        match n.kind:
            case "exp":
                return Call("exp", self._multiple(Fraction(1), n.amount))
            case "root":
                return Call("sqrt", number(n.number))
            case "cosine":
                return Call("cos", Quotient(Name("pi"), number(n.number)))
        _, sign = self._letters[n.core]
        names = {"even": ("cos", "cosh"), "odd": ("sin", "sinh")}[n.kind]
        return Call(names[int(sign > 0)], self._angle(n))

    def _pair(self, known: Mapping[str, AdjoinedNumber], text: str) -> Expression:
        name, _, kind = text.partition("_")
        amount = self._multiple(Fraction(int(kind[4:]), 2), known[name].amount)
        return Call(kind[:4], amount)

    def _angle(self, n: AdjoinedNumber) -> Expression:
        base = self.numbers.base
        if isinstance(base, ParameterField):
            root, _ = self._letters[n.core]
            angle = root * base.into(self._writing, n.amount)
            return self._told(self._shortest(angle))
        core, amount = base.surds(n.core), base.surds(n.amount)
        if core.is_rational:
            size = abs(core.as_fraction())
            return surd_formula(SurdSum.of({int(size): Fraction(1)}) * amount)
        return scaled(surd_formula(amount), self._square_root(n.core))

    def _square_root(self, core: Scalar) -> Expression:
        base = self.numbers.base
        if isinstance(base, ParameterField):
            sign = self.sign_of(core)
            return Call("sqrt", rational_formula(base, core * sign))
        value = base.surds(core)
        return radical_formula(value if base.sign(core) > 0 else -value)

    def _multiple(self, count: Fraction, element: Scalar) -> Expression:
        base = self.numbers.base
        whole = element * base.scalar(count)
        if isinstance(base, ParameterField):
            return self._shortest(base.into(self._writing, whole))
        return element_formula(base, whole)

    def _shortest(self, element: Scalar) -> Expression:
        forms = [rational_formula(self._writing, form) for form in self._forms(element)]
        return min(forms, key=operations)


def _root_token(place: int) -> str:
    return f"@sqrt{place}"


def _span(polynomial: Any, place: int) -> int:
    exponents = [monomial[place] for monomial in polynomial.itermonoms()]
    return int(max(exponents) - min(exponents))


def _balanced(
    wide: ParameterField,
    writing: ParameterField,
    polynomial: Any,
    used: Sequence[AdjoinedNumber],
    turned: Sequence[AdjoinedNumber],
) -> tuple[Scalar, dict[str, Fraction]]:
    """A polynomial in exponentials as an element and what is left as their exponents.

    The middle exponent of each stands outside; inside, a E^k + b E^-k is
    (a + b) cosh(k b) + (a - b) sinh(k b) for those that are `turned`.
    """
    places = {n.name: writing.parameters.index(n.name) for n in used}
    chosen = {n.name for n in turned}
    outside: dict[str, Fraction] = {}
    for name, place in places.items():
        exponents = [monomial[place] for monomial in polynomial.itermonoms()]
        low, high = min(exponents), max(exponents)
        outside[name] = Fraction(low + high, 2) if name in chosen else Fraction(low)
    total = wide.domain.zero
    for monomial, coefficient in polynomial.iterterms():
        factors = [wide.domain.convert(coefficient)]
        for place, exponent in enumerate(monomial):
            name = writing.parameters[place]
            if name not in places:
                factors.append(wide.symbol(name) ** exponent if exponent else wide.domain.one)
                continue
            left = exponent - outside[name]
            if name not in chosen:
                factors.append(wide.symbol(name) ** int(left))
            elif left:
                twice = int(2 * abs(left))
                even = wide.symbol(f"{name}_cosh{twice}")
                odd = wide.symbol(f"{name}_sinh{twice}")
                factors.append(even + odd if left > 0 else even - odd)
        total += reduce(mul, factors)
    return total, outside
