"""Where sums over periods divide by something that may vanish: a pair meets the period.

A sum over k of q^k is divided by 1 - q.  For a root r other than 0, q = e^(r T) is 1 only if
r T is a multiple of 2 pi i.  No algebraic number other than 0 is one (F. Lindemann, Ueber die
Zahl pi, 1882); with pi and parameters, the ratio of w T to 2 pi is an element of a field, and
so it is told exactly whether it is an integer.
"""

from __future__ import annotations

from dataclasses import dataclass
from fractions import Fraction
from math import isqrt
from typing import Literal

from closedform.algebra.field import Scalar
from closedform.algebra.hurwitz import HurwitzTest
from closedform.algebra.parameter_field import PI, ParameterField
from closedform.errors import InputError
from closedform.model.driven.model import DrivenModel
from closedform.notation.expression import Negation
from closedform.notation.plain import plain
from closedform.notation.rational_formula import rational_formula
from closedform.response.by_mode import ModePart, TermsOfMode
from closedform.response.driven.stability import Stability
from closedform.response.parametric.case import Case
from closedform.response.parametric.modes import Mode

__all__ = ["Guards", "VanishingRateError"]

Meeting = Literal["always", "never", "perhaps"]


class VanishingRateError(InputError):
    """A rate of a model with a repeating input that may be zero."""

    def __init__(self, model: str, condition: str, element: str) -> None:
        super().__init__(model, condition, element)
        self.model, self.condition, self.element = model, condition, element

    def __str__(self) -> str:
        where = "" if self.condition == "true" else f", in the case {self.condition}"
        return (
            f"{self.model}: an input repeats, and it is not known whether {self.element} is "
            f"zero{where}; the sum over the periods is another one then. State the condition "
            f"{self.element} != 0, or one from which that follows."
        )


@dataclass(frozen=True)
class Guards:
    """What is known of the modes of a solution where an input repeats."""

    model: DrivenModel
    case: Case | None
    stability: Stability
    period: Scalar

    def require_rates(self) -> None:
        """Raises VanishingRateError where a root may be 0 and is not 0 throughout the case."""
        if self.case is None:
            return
        pairs = [m.factor.p.to_list() for m in self.case.modes if m.regime.kind in _PAIRS]
        for test in self.stability.factors:
            settled = test.manner in ("decays", "rests", "oscillates")
            if settled or list(test.polynomial) in pairs:
                continue
            last = test.polynomial[-1]
            if not self.case.domain.sign_of(last).never_zero:
                shown = rational_formula(self.case.domain.field, last)
                shown = shown.operand if isinstance(shown, Negation) else shown
                raise VanishingRateError(self.model.name, self.case.condition, plain(shown))

    def meeting(self, part: ModePart) -> Meeting:
        """Return whether w T is a multiple of 2 pi, for the frequency w of a part."""
        if part.kind != "circular" or not isinstance(part.exact, TermsOfMode):
            return "never"
        writing, frequency = part.exact.writing, part.exact.terms[0].frequency
        field = self.model.field
        if not isinstance(field, ParameterField):
            raise TypeError("terms with parameters belong to a model with these")
        found = _whole(writing, frequency * field.into(writing, self.period))
        mode = self._mode(writing, frequency)
        if found == "perhaps" and mode is not None and mode.factor.degree == 2:
            square = -mode.factor.roots.discriminant * self.period**2
            return _whole_root(field, square)
        return found

    def may_vanish(self, part: ModePart) -> bool:
        """Return whether what the sum of a part is divided by may be 0 somewhere in the case."""
        if self.meeting(part) != "perhaps" or not isinstance(part.exact, TermsOfMode):
            return False
        if self.stability.verdict == "stable" or self.case is None:
            return False
        mode = self._mode(part.exact.writing, part.exact.terms[0].frequency)
        if mode is None:
            return True
        test = self._test(mode)
        if test is not None and test.manner == "decays":
            return False
        centre = mode.factor.roots.centre
        named = mode.factor.degree > 2
        return named or not self.case.domain.sign_of(centre).never_zero

    def _mode(self, writing: ParameterField, frequency: Scalar) -> Mode | None:
        for mode in self.case.modes if self.case is not None else ():
            own = [writing.symbol(name) for name in mode.names]
            if mode.frequency is not None:
                own.append(self.model.field.into(writing, mode.frequency))  # type: ignore[attr-defined]
            if frequency in own or -frequency in own:
                return mode
        return None

    def _test(self, mode: Mode) -> HurwitzTest | None:
        own = mode.factor.p.to_list()
        return next((t for t in self.stability.factors if list(t.polynomial) == own), None)


_PAIRS = ("circular", "squares")


def _whole(field: ParameterField, angle: Scalar) -> Meeting:
    """Whether an angle other than 0 is a multiple of 2 pi."""
    if PI not in field.parameters:
        return "perhaps" if field.names_in(angle) else "never"
    turns = angle / (2 * field.symbol(PI))
    known = field.constant(turns)
    if known is not None:
        return "always" if known.denominator == 1 else "never"
    return "perhaps" if field.names_in(turns) else "never"


def _whole_root(field: ParameterField, square: Scalar) -> Meeting:
    """Whether an angle other than 0 is a multiple of 2 pi, told by its square."""
    if field.names_in(square):
        return "perhaps"
    if PI not in field.parameters:
        return "never"
    known = field.constant(square / (2 * field.symbol(PI)) ** 2)
    return "always" if known is not None and _is_square_of_integer(known) else "never"


def _is_square_of_integer(value: Fraction) -> bool:
    return value.denominator == 1 and isqrt(int(value)) ** 2 == value
