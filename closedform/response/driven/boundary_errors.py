"""What can be wrong with conditions at several instants."""

from __future__ import annotations

from closedform.errors import InputError

__all__ = [
    "ConditionCountError",
    "ConditionRootsError",
    "ManySolutionsError",
    "NoSolutionError",
    "RepeatingConditionsError",
]


class ConditionCountError(InputError):
    """Another number of conditions than there are states."""

    def __init__(self, title: str, count: int, states: int) -> None:
        super().__init__(title, count, states)
        self.title, self.count, self.states = title, count, states

    def __str__(self) -> str:
        return (
            f"{self.title}: the solution has {self.states} free constants, one for each state, and "
            f"'at_points' has {self.count} condition{'' if self.count == 1 else 's'}; state "
            f"{self.states}"
        )


class ConditionRootsError(InputError):
    """A value at an instant takes roots of a factor of degree 3 or more."""

    def __init__(self, title: str, degree: int) -> None:
        super().__init__(title, degree)
        self.title, self.degree = title, degree

    def __str__(self) -> str:
        return (
            f"{self.title}: the characteristic polynomial has an irreducible factor of degree "
            f"{self.degree}, and conditions at several instants are worked out exactly for "
            "factors of degree 1 and 2; state all conditions at one instant, or the model "
            "with initial values"
        )


class RepeatingConditionsError(InputError):
    """Conditions at several instants of a model whose input repeats."""

    def __init__(self, title: str, name: str) -> None:
        super().__init__(title, name)
        self.title, self.name = title, name

    def __str__(self) -> str:
        return (
            f"{self.title}: {self.name} repeats, and then values are given at the start: state "
            "'initial' in the place of 'at_points', or the input as pieces up to the last instant"
        )


class NoSolutionError(InputError):
    """Conditions that contradict each other.

    `others` are conditions by which the left side of `condition`, `left`, has the value
    `value`.  `case` tells for which values of the parameters, empty for all.
    """

    def __init__(
        self,
        title: str,
        condition: str,
        others: tuple[str, ...],
        left: str,
        value: str,
        case: str = "",
    ) -> None:
        super().__init__(title, condition, others, left, value, case)
        self.title, self.condition, self.others = title, condition, others
        self.left, self.value, self.case = left, value, case

    def __str__(self) -> str:
        given = f" with {_listed(self.others)}" if self.others else ""
        where = f" in the case {self.case}" if self.case else ""
        return (
            f"{self.title}: no solution meets all conditions{where}: for every solution of the "
            f"equations{given}, {self.left} = {self.value}, so {self.condition} cannot hold; "
            f"change a condition{_or_exclude(self.case)}"
        )


class ManySolutionsError(InputError):
    """Conditions that leave a motion free, or several.

    `motion` is one that may be added, any number of times, where it could be written: a
    formula for each of the `names`.
    """

    def __init__(
        self,
        title: str,
        free: int,
        motion: tuple[tuple[str, str], ...] = (),
        case: str = "",
    ) -> None:
        super().__init__(title, free, motion, case)
        self.title, self.free, self.motion, self.case = title, free, motion, case

    def __str__(self) -> str:
        where = f" in the case {self.case}" if self.case else ""
        constants = "one constant" if self.free == 1 else f"{self.free} constants"
        text = f"{self.title}: the conditions leave {constants} free{where}"
        if self.motion:
            parts = ", ".join(f"{name} = c*({formula})" for name, formula in self.motion)
            text += f": with any number c, {parts} may be added to a solution"
        return f"{text}; state a condition that tells these solutions apart{_or_exclude(self.case)}"


def _or_exclude(case: str) -> str:
    return ", or exclude this case by one of 'conditions'" if case else ""


def _listed(texts: tuple[str, ...]) -> str:
    return " and ".join(filter(None, (", ".join(texts[:-1]), texts[-1])))
