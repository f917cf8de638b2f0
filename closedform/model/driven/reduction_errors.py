"""What can be wrong with equations from which a state form is to follow."""

from __future__ import annotations

from collections.abc import Sequence

from closedform.errors import Place
from closedform.model.errors import ModelError
from closedform.notation.errors import quoted

__all__ = [
    "AbsentUnknownError",
    "ContradictoryEquationsError",
    "FewEquationsError",
    "ForgottenInputError",
    "ForgottenParameterError",
    "HiddenConstraintError",
    "ManyEquationsError",
    "NoStateLeftError",
    "RedundantEquationError",
    "SingularEquationsError",
    "listed_equations",
    "listed_names",
]

Numbered = tuple[tuple[int, str], ...]
"""Equations by their number in the model, with their text."""


def listed_names(names: Sequence[str], limit: int = 8) -> str:
    """Return names as a sentence lists them: 'x', 'y' and 'z'."""
    shown = [f"'{name}'" for name in names[:limit]]
    if len(names) > limit:
        return ", ".join(shown) + ", …"
    return " and ".join([", ".join(shown[:-1]), shown[-1]] if len(shown) > 1 else shown)


def listed_equations(equations: Numbered, limit: int = 4) -> str:
    """Return equations as a sentence lists them: equation 1, 'x' = 2', and equation 3, …"""
    shown = [f"equation {number}, {quoted(text)}" for number, text in equations[:limit]]
    if len(equations) > limit:
        return ", ".join([*shown, "…"])
    if len(shown) > 1:
        return f"{', '.join(shown[:-1])}, and {shown[-1]}"
    return shown[0]


def _counted(count: int, noun: str) -> str:
    return f"{count} {noun}" if count == 1 else f"{count} {noun}s"


def _are(count: int, noun: str) -> str:
    return f"{'is' if count == 1 else 'are'} {_counted(count, noun)}"


def _balance(equations: int, unknowns: tuple[str, ...]) -> str:
    """How many equations there are for how many unknowns."""
    return (
        f"there {_are(equations, 'equation')} for {_counted(len(unknowns), 'unknown')}, "
        f"{listed_names(unknowns)}"
    )


class AbsentUnknownError(ModelError):
    """An unknown that stands in no equation; `equation` is that in which it cancels, if any."""

    def __init__(self, place: Place, name: str, equation: str = "") -> None:
        super().__init__(place, name, equation)
        self.name, self.equation = name, equation

    def _paragraph(self) -> str:
        if self.equation:
            return (
                f"'{self.name}' has the weight 0 in the equation {quoted(self.equation)} and "
                "stands in no other, so that nothing determines it; correct the equation, or "
                "leave the name out"
            )
        return (
            f"'{self.name}' is among the states, but it stands in no equation; take it away, "
            "or add the equation that is missing"
        )


class FewEquationsError(ModelError):
    """Fewer equations than unknowns; nothing determines those that are `open_ones`.

    `suspects` are among these and have no primes: they may be forgotten parameters.
    """

    def __init__(
        self,
        place: Place,
        equations: int,
        unknowns: tuple[str, ...],
        open_ones: tuple[str, ...],
        suspects: tuple[str, ...],
    ) -> None:
        super().__init__(place, equations, unknowns, open_ones, suspects)
        self.equations, self.unknowns = equations, unknowns
        self.open_ones, self.suspects = open_ones, suspects

    def _paragraph(self) -> str:
        missing = len(self.unknowns) - self.equations
        text = (
            f"{_balance(self.equations, self.unknowns)}; "
            f"{_counted(missing, 'equation')} {'is' if missing == 1 else 'are'} missing"
        )
        if self.open_ones and self.open_ones != self.unknowns:
            text += f": nothing determines {listed_names(self.open_ones)}"
        if not self.suspects:
            return text
        stand = "stands" if len(self.suspects) == 1 else "stand"
        return (
            f"{text}; {listed_names(self.suspects)} {stand} there without primes: declare in "
            "[parameters] or [inputs] what is given, and add an equation for what is not"
        )


class ManyEquationsError(ModelError):
    """More equations than unknowns, none of them a combination of the others."""

    def __init__(self, place: Place, equations: int, unknowns: tuple[str, ...]) -> None:
        super().__init__(place, equations, unknowns)
        self.equations, self.unknowns = equations, unknowns

    def _paragraph(self) -> str:
        surplus = self.equations - len(self.unknowns)
        return (
            f"{_balance(self.equations, self.unknowns)}; take {_counted(surplus, 'equation')} "
            "away, or make unknown what is determined by leaving it out of [parameters] and "
            "[inputs]"
        )


class RedundantEquationError(ModelError):
    """An equation that says what others say already; `others` are these."""

    def __init__(self, place: Place, equation: tuple[int, str], others: Numbered) -> None:
        super().__init__(place, equation, others)
        self.equation, self.others = equation, others

    def _paragraph(self) -> str:
        found = listed_equations((self.equation,))
        if not self.others:
            return f"{found}, says 0 = 0; correct it, or take it away"
        return (
            f"{found}, says nothing new: it is a combination of {listed_equations(self.others)}; "
            "write an equation that adds something in its place"
        )


class ContradictoryEquationsError(ModelError):
    """Equations whose unknowns cancel; what is left is `remainder`, as 0 = F."""

    def __init__(self, place: Place, equations: Numbered, remainder: str) -> None:
        super().__init__(place, equations, remainder)
        self.equations, self.remainder = equations, remainder

    def _paragraph(self) -> str:
        found = listed_equations(self.equations)
        if len(self.equations) == 1:
            return f"{found}, has no unknown in it and says {self.remainder}; correct it"
        return (
            f"{found} contradict each other: their unknowns cancel, and {self.remainder} is left; "
            "correct one of them"
        )


class SingularEquationsError(ModelError):
    """As many equations as unknowns that do not determine them, derivatives counted."""

    def __init__(self, place: Place, equations: Numbered, open_ones: tuple[str, ...]) -> None:
        super().__init__(place, equations, open_ones)
        self.equations, self.open_ones = equations, open_ones

    def _paragraph(self) -> str:
        return (
            f"{listed_equations(self.equations)} do not determine the unknowns: with their "
            "derivatives, one of them follows from the others, or contradicts them, so that "
            f"nothing determines {listed_names(self.open_ones)}; write an equation that adds "
            "something in the place of one"
        )


class ForgottenParameterError(ModelError):
    """A term that is a product of unknowns, as names in it were declared nowhere."""

    def __init__(self, place: Place, equation: str, term: str, names: tuple[str, ...]) -> None:
        super().__init__(place, equation, term, names)
        self.equation, self.term, self.names = equation, term, names

    def _paragraph(self) -> str:
        several = len(self.names) > 1
        are = "are" if several else "is"
        have, them = ("have", "them") if several else ("has", "it")
        return (
            f"{listed_names(self.names)} in the term {quoted(self.term)} of the equation "
            f"{quoted(self.equation)} {are} declared nowhere, so that it would be a product of "
            f"unknowns; {listed_names(self.names)} {have} no primes: declare {them} in "
            f'[parameters], as {self.names[0]} = "positive"'
            f"{'; there is no imaginary unit here, formulas are real' if 'i' in self.names else ''}"
        )


class ForgottenInputError(ModelError):
    """A term that is an unknown at another time, as its name was declared nowhere."""

    def __init__(self, place: Place, equation: str, term: str, name: str) -> None:
        super().__init__(place, equation, term, name)
        self.equation, self.term, self.name = equation, term, name

    def _paragraph(self) -> str:
        return (
            f"'{self.name}' in the term {quoted(self.term)} of the equation "
            f"{quoted(self.equation)} is declared nowhere, so that it would be an unknown at "
            f"another time; '{self.name}' has no primes: declare it in [inputs], as "
            f'{self.name} = "sin(t)"'
        )


class HiddenConstraintError(ModelError):
    """Equations that tie variables whose derivatives have to be known too."""

    def __init__(self, place: Place, equations: Numbered, variables: tuple[str, ...]) -> None:
        super().__init__(place, equations, variables)
        self.equations, self.variables = equations, variables

    def _paragraph(self) -> str:
        several = len(self.equations) > 1
        names = ", ".join(self.variables[:8]) + (", …" if len(self.variables) > 8 else "")
        if len(self.variables) == 1:
            what = f"{'fix' if several else 'fixes'} {names}"
        else:
            what = f"{'tie' if several else 'ties'} {names} to each other"
        return (
            f"{listed_equations(self.equations)}, {what}, and the other equations need what "
            "follows from the derivative of this; differentiate it by hand and write the "
            "derivative in its place, or express one of these variables by the others and "
            "leave it out"
        )


class NoStateLeftError(ModelError):
    """Equations that leave no state: everything is fixed by the inputs at every instant."""

    def _paragraph(self) -> str:
        return (
            "the equations leave no state: every unknown follows from the inputs at each "
            "instant, and there is nothing to be solved; a model has at least one derivative, "
            "as x'"
        )
