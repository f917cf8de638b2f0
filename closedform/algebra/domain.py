"""The values that parameters may take, and what follows from them: signs, with the reason.

A domain is a finite set of conditions, each a rational function of the parameters
compared with 0.  Signs are decided by arguments that a reader can follow: a condition,
terms of one sign, squares, factors.  Where none of them applies the answer is "unknown";
it is never a guess.
"""

from __future__ import annotations

from dataclasses import dataclass
from functools import cached_property

from closedform.algebra.conditions import Conditions
from closedform.algebra.field import Scalar
from closedform.algebra.parameter_field import ParameterField
from closedform.algebra.sample import PointValue, sample_points
from closedform.algebra.sign_argument import (
    Comparison,
    Relation,
    Sign,
    SignArgument,
    relation_values,
)
from closedform.algebra.signs import Facts

__all__ = ["Comparison", "ParameterDomain", "Relation", "Sign", "SignArgument"]


@dataclass(frozen=True)
class ParameterDomain:
    """All points of the field's parameters at which every condition holds.

    A condition holds only where its element is defined.
    """

    field: ParameterField
    conditions: tuple[Comparison, ...]

    @cached_property
    def _facts(self) -> Facts:
        return Facts(Conditions(self.field, self.conditions))

    def sign_of(self, element: Scalar) -> SignArgument:
        """Return the sign that an element has wherever it is defined here, and the reason."""
        return self._facts.sign_of(element)

    def excludes(self, comparison: Comparison) -> SignArgument | None:
        """Return why the comparison holds nowhere here, or None if no reason is found.

        It tells the sign of the element, or that its denominator is zero everywhere.
        Where the domain is found to be empty, it is why one of its own conditions fails.
        """
        argument = _sign_against(self, comparison)
        wrong = self._facts.in_one_parameter.contradiction() if argument is None else None
        for condition in wrong or ():
            others = tuple(c for c in wrong or () if c is not condition)
            argument = argument or _sign_against(ParameterDomain(self.field, others), condition)
        return argument

    def implies(self, comparison: Comparison) -> SignArgument | None:
        """Return why the comparison holds everywhere here, or None if no reason is found.

        Its element has to be defined everywhere too.
        """
        argument = self.sign_of(comparison.element)
        if not argument.values <= relation_values(comparison.relation):
            return None
        below = self.sign_of(self.field.of_polynomial(comparison.element.denom))
        return argument if below.never_zero else None

    def contradiction(self) -> tuple[Comparison, ...] | None:
        """Return conditions that cannot hold together, or None if none are found.

        None of those returned can be left out without losing the argument.
        """
        found = self._facts.in_one_parameter.contradiction()
        if found is not None:
            return found
        for place, condition in enumerate(self.conditions):
            others = self.conditions[:place] + self.conditions[place + 1 :]
            if not _sign_against(ParameterDomain(self.field, others), condition):
                continue
            needed = list(others)
            for other in others:
                fewer = tuple(c for c in needed if c is not other)
                if _sign_against(ParameterDomain(self.field, fewer), condition):
                    needed.remove(other)
            return tuple(c for c in self.conditions if c is condition or c in needed)
        return None

    def narrowed(self, *comparisons: Comparison) -> ParameterDomain:
        """Return the part where these hold too; what is implied already is not added."""
        domain = self
        for comparison in comparisons:
            if not domain.implies(comparison):
                domain = ParameterDomain(self.field, (*domain.conditions, comparison))
        return domain

    def substituted(self, name: str, element: Scalar) -> ParameterDomain:
        """Return the domain of the other parameters, with an element in the place of one.

        Conditions that become implied by those before them are dropped; one that becomes
        false stays, and is a contradiction.  Raises ZeroDivisionError where a condition
        is defined nowhere then.
        """
        put = [
            Comparison(self.field.substituted(c.element, {name: element}), c.relation)
            for c in self.conditions
        ]
        return ParameterDomain(self.field, ()).narrowed(*put)

    def sample(self, count: int, seed: int) -> list[dict[str, PointValue]]:
        """Return up to `count` points of the domain, rational and short; the same each time.

        Every parameter has a value; one that an equation gives may have the number pi in it.
        Fewer points, or none, are returned where a bounded
        search finds no more: this does not say that the domain is empty.
        """
        return sample_points(self.field, self.conditions, count, seed)


def _sign_against(domain: ParameterDomain, comparison: Comparison) -> SignArgument | None:
    """The sign with which a comparison holds nowhere: of its element, or of the denominator."""
    argument = domain.sign_of(comparison.element)
    if not argument.values & relation_values(comparison.relation):
        return argument
    below = domain.sign_of(domain.field.of_polynomial(comparison.element.denom))
    return below if below.sign == "zero" else None
