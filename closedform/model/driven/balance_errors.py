"""What can be wrong with an equation that is read as a linear balance."""

from __future__ import annotations

from closedform.errors import Place
from closedform.model.errors import ModelError
from closedform.notation.errors import quoted

__all__ = [
    "BalanceError",
    "DelayedUnknownError",
    "InputInstantError",
    "InputTimesUnknownError",
    "NoUnknownError",
    "NoUnknownsError",
    "NonlinearBalanceError",
    "NonlinearInputError",
    "TimeVaryingError",
    "UnknownAtInstantError",
    "UnusedUnknownError",
]

LINEARISE = (
    "linearise it about an operating point: put each unknown as its constant value there plus "
    "a small deviation, and keep what is linear in the deviations"
)


class BalanceError(ModelError):
    """A `term` of an `equation`, both as text, that no linear equation has."""

    def __init__(self, place: Place, equation: str, term: str) -> None:
        super().__init__(place, equation, term)
        self.equation, self.term = equation, term

    def _subject(self) -> str:
        return f"the term {quoted(self.term)} of the equation {quoted(self.equation)}"


class NonlinearBalanceError(BalanceError):
    """A term that is not linear in the unknowns; `reason` is what it does, with its verb."""

    def __init__(self, place: Place, equation: str, term: str, reason: str) -> None:
        super().__init__(place, equation, term)
        self.args = (place, equation, term, reason)
        self.reason = reason

    def _paragraph(self) -> str:
        return (
            f"{self._subject()} {self.reason}, and a closed form of this kind needs linear "
            f"equations; {LINEARISE}"
        )


class TimeVaryingError(BalanceError):
    """A coefficient of an unknown that depends on the time."""

    def _paragraph(self) -> str:
        return (
            f"{self._subject()} multiplies an unknown by what depends on the time, and the "
            "coefficients of unknowns are constant here; hold the coefficient at a constant "
            "value, or state a model for each interval in which it is constant"
        )


class InputTimesUnknownError(BalanceError):
    """A product of an input and an unknown."""

    def _paragraph(self) -> str:
        return (
            f"{self._subject()} multiplies an unknown by an input, so that its coefficient is "
            f"not constant; make the input a parameter if it is constant, or {LINEARISE}"
        )


class NonlinearInputError(BalanceError):
    """A term that is not linear in the inputs; `reason` is what it does, with its verb."""

    def __init__(self, place: Place, equation: str, term: str, reason: str) -> None:
        super().__init__(place, equation, term)
        self.args = (place, equation, term, reason)
        self.reason = reason

    def _paragraph(self) -> str:
        return (
            f"{self._subject()} {self.reason}, and inputs stand in an equation with constant "
            "coefficients; declare an input of its own that is the whole term, as a formula in "
            "the time under [inputs]"
        )


class DelayedUnknownError(BalanceError):
    """An unknown at another time than the present one."""

    def _paragraph(self) -> str:
        return (
            f"{self._subject()} is an unknown at another time, which makes it a delay equation: "
            "that has infinitely many modes, and no finite closed form of this kind; put a chain "
            "of first-order lags in the place of the delay, such as T*y' + y = x for y = x(t - T)"
        )


class UnknownAtInstantError(BalanceError):
    """An unknown at a fixed instant."""

    def _paragraph(self) -> str:
        return (
            f"{self._subject()} is the value of an unknown at one instant, and an equation holds "
            "at all times; state such values under 'initial' or 'at_points', or make this one a "
            "parameter"
        )


class InputInstantError(BalanceError):
    """An input at something else than the time less a constant."""

    def _paragraph(self) -> str:
        return (
            f"{self._subject()} is an input at something else than the time less a constant, as "
            "in u(t - 2); declare an input of its own that is this function of the time"
        )


class NoUnknownError(ModelError):
    """An equation without unknowns, or one from which they cancel."""

    def __init__(self, place: Place, equation: str) -> None:
        super().__init__(place, equation)
        self.equation = equation

    def _paragraph(self) -> str:
        return (
            f"no unknown is left in the equation {quoted(self.equation)}, so it says nothing "
            "about the motion; take it away, or state a relation of parameters under "
            "'conditions' or 'substitute'"
        )


class NoUnknownsError(ModelError):
    """Equations in which there is no unknown at all."""

    def _paragraph(self) -> str:
        return (
            "there is no unknown in the equations; write one equation for each, with primes for "
            "its derivatives, as \"m*x'' + k*x = F\""
        )


class UnusedUnknownError(ModelError):
    """An unknown that stands in no equation."""

    def __init__(self, place: Place, name: str) -> None:
        super().__init__(place, name)
        self.name = name

    def _paragraph(self) -> str:
        return (
            f"the unknown '{self.name}' stands in no equation; write its equation, or take it out "
            "of 'states'"
        )
