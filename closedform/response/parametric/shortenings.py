"""Abbreviations that results may be written with: the user's, and those of the trade."""

from __future__ import annotations

from collections.abc import Iterable, Iterator, Sequence
from dataclasses import dataclass

from closedform.algebra.branches import Branch
from closedform.algebra.domain import ParameterDomain
from closedform.algebra.field import Scalar
from closedform.algebra.parameter_field import ParameterField
from closedform.model.parametric import ParametricModel
from closedform.notation.expression import Call, Expression
from closedform.notation.rational_formula import rational_formula
from closedform.response.parametric.case import Origin
from closedform.response.parametric.modes import Mode, perfect_root
from closedform.response.parametric.quantities import Letters, Quantity, SquareRoot
from closedform.response.parametric.rewriting import Rewriting, rewriting_for

__all__ = [
    "Shortening",
    "rewritings_by_root",
    "sound_rewritings",
    "trade_shortenings",
    "user_shortenings",
]


@dataclass(frozen=True)
class Shortening:
    """An abbreviation that may be used: name^power = value, an element of K."""

    name: str
    value: Scalar
    power: int
    origin: Origin

    def formula(self, field: ParameterField) -> Expression:
        """Return the formula that defines the name."""
        value = rational_formula(field, self.value)
        return Call("sqrt", value) if self.power == 2 else value


def user_shortenings(model: ParametricModel, branch: Branch) -> Iterator[Shortening]:
    """Yield the abbreviations of the model, as they read on a branch."""
    for definition in model.abbreviations:
        value = model.field.substituted(definition.value, branch.values)
        if model.field.constant(value) is None:
            yield Shortening(definition.name, value, 1, "user")


def trade_shortenings(
    domain: ParameterDomain, modes: Sequence[Mode], letters: Letters
) -> Iterator[Shortening]:
    """The decay rate and the undamped frequency of a pair, and time constants."""
    field = domain.field
    pairs = [m for m in modes if m.regime.kind in {"circular", "double", "hyperbolic"}]
    damped = [m for m in pairs if m.factor.roots.centre]
    for k, mode in enumerate(damped, start=1):
        number = None if len(damped) == 1 else k
        rate = -mode.factor.roots.centre
        if len(field.names_in(rate)) > 1 and not _is_bare_product(rate):
            yield Shortening(letters.take("delta", number), rate, 1, "trade")
        square = mode.factor.p.nth(0)
        real = domain.sign_of(square).sign == "positive"
        if real and len(field.names_in(square)) > 1 and perfect_root(field, square) is None:
            yield Shortening(letters.take("omega_n", number), square, 2, "trade")
    repeated = [m for m in modes if m.regime.kind == "single" and m.factor.index > 1]
    if not damped and len(repeated) == 1:
        rate = -repeated[0].factor.roots.centre
        if len(field.names_in(rate)) > 1 and not _is_bare_product(rate):
            yield Shortening(letters.take("delta"), rate, 1, "trade")
    single = [m.factor.roots.centre for m in modes if m.regime.kind == "single"]
    constants = [1 / -rate for rate in single if rate and rate.numer.is_ground]
    constants = [c for c in constants if len(field.names_in(c)) > 1]
    for k, value in enumerate(constants, start=1):
        number = None if len(constants) == 1 else k
        yield Shortening(letters.take("tau", number), value, 1, "trade")


def _is_bare_product(element: Scalar) -> bool:
    """Whether an element is written as short as a name: zeta omega_n, without a number."""
    return bool(element.denom == 1 and len(element.numer) == 1 and element.numer.LC == 1)


def rewritings_by_root(
    field: ParameterField, writing: ParameterField, quantity: Quantity
) -> Iterator[Rewriting]:
    """A frequency that is a square root may stand for a parameter: k = m omega_n^2."""
    if isinstance(quantity.definition, SquareRoot):
        square = quantity.definition.square
        if writing.names_in(square) <= set(field.parameters):
            yield from rewriting_for(writing, quantity.name, square, 2)


def sound_rewritings(
    domain: ParameterDomain, rewritings: Iterable[Rewriting], below: frozenset[str]
) -> tuple[Rewriting, ...]:
    """Return the rewritings that divide by nothing that may vanish, and not by the name itself.

    m = c/(2 delta) is no way to write a mass: without damping both are zero.  Parameters that
    stand `below` are replaced by single terms only: T2 - tau would not be seen to be other
    than zero.  `domain` is over the writing field, with the names in it.
    """
    found = []
    for rewriting in rewritings:
        divisor = domain.field.of_polynomial(rewriting.replacement.denom)
        by_itself = rewriting.power == 1 and rewriting.name in domain.field.names_in(divisor)
        as_sum = rewriting.parameter in below and len(rewriting.replacement.numer) > 1
        if not by_itself and not as_sum and domain.sign_of(divisor).never_zero:
            found.append(rewriting)
    return tuple(found)
