"""What can be wrong with a formula in parameters, and with a comparison of two."""

from __future__ import annotations

from closedform.errors import Place
from closedform.notation.errors import FormulaError, quoted

__all__ = [
    "ComparisonCountError",
    "ComparisonSignError",
    "IrrationalNumberError",
    "ParameterFunctionError",
    "ParameterRootError",
    "ParameterSizeError",
]


class _FoundError(FormulaError):
    """Base of the errors whose one fact is the part of the formula concerned, `found`."""

    def __init__(self, place: Place, found: str) -> None:
        super().__init__(place, found)
        self.found = found


class IrrationalNumberError(_FoundError):
    """The square root of a number that is no square, where rational numbers are needed."""

    def _paragraph(self) -> str:
        return (
            f"{quoted(self.found)} is not rational, and the numbers of a model with parameters "
            "are; give it as a fraction, or make it a parameter that has this value"
        )


class ParameterRootError(_FoundError):
    """The root of something in which parameters occur."""

    def _paragraph(self) -> str:
        return (
            f"{quoted(self.found)} is a root of parameters, and formulas in them are made of "
            "+ - * / and integer powers; make the root a parameter and re-state another by it, "
            """as k by omega_n = sqrt(k/m): [substitute] k = "m*omega_n^2\""""
        )


class ParameterFunctionError(_FoundError):
    """exp, sin, cos, sinh or cosh in a formula in parameters."""

    def _paragraph(self) -> str:
        return (
            f"{quoted(self.found)} is no rational function of the parameters: formulas in them "
            "are made of + - * / and integer powers; make it a parameter of its own"
        )


class ParameterSizeError(FormulaError):
    """A formula in parameters that is too large when it is multiplied out."""

    def __init__(self, place: Place, found: str, limit: str) -> None:
        super().__init__(place, found, limit)
        self.found, self.limit = found, limit

    def _paragraph(self) -> str:
        return (
            f"{quoted(self.found)} is too large to be multiplied out: {self.limit}; make a part "
            "of it a parameter of its own"
        )


class ComparisonCountError(FormulaError):
    """A condition with no sign of comparison, or with several; `count` says how many."""

    def __init__(self, place: Place, count: int) -> None:
        super().__init__(place, count)
        self.count = count

    def _paragraph(self) -> str:
        if self.count:
            return (
                f"a condition has one sign of comparison, and here are {self.count}; write one "
                """condition for each, as ["a < b", "b < c"] for a < b < c"""
            )
        return (
            "a condition compares two formulas, and here is no sign of comparison; write one "
            'of < <= > >= != = between them, as in "c^2 < 4*k*m"'
        )


class ComparisonSignError(FormulaError):
    """A sign of comparison that is none, or that stands inside brackets; `advice` says which."""

    def __init__(self, place: Place, found: str, advice: str) -> None:
        super().__init__(place, found, advice)
        self.found, self.advice = found, advice

    def _paragraph(self) -> str:
        return f"{quoted(self.found)} does not compare two formulas: {self.advice}"
