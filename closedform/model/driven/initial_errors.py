"""What can be wrong with values at the start or at single instants, and with inputs and outputs."""

from __future__ import annotations

from closedform.errors import Place
from closedform.model.driven.reduction_errors import listed_names
from closedform.model.errors import ModelError
from closedform.notation.errors import quoted

__all__ = [
    "ContradictoryInitialError",
    "DerivativeGivenError",
    "EarlyPointError",
    "ImpulseValueError",
    "NoInstantError",
    "PointConstantError",
    "PointCountError",
    "PointInputError",
    "PointJetError",
    "SeveralInstantsError",
    "UnusedInputError",
]


class DerivativeGivenError(ModelError):
    """A value for a derivative that the equations give; `needed` are those to be given."""

    def __init__(self, place: Place, found: str, needed: tuple[str, ...]) -> None:
        super().__init__(place, found, needed)
        self.found, self.needed = found, needed

    def _paragraph(self) -> str:
        text = f"{quoted(self.found)} follows from the equations; take it away"
        return f"{text}, and give {listed_names(self.needed)}" if self.needed else text


class ContradictoryInitialError(ModelError):
    """A value at the start against the equations; `follows` is what these give."""

    def __init__(self, place: Place, name: str, value: str, follows: str) -> None:
        super().__init__(place, name, value, follows)
        self.name, self.value, self.follows = name, value, follows

    def _paragraph(self) -> str:
        return (
            f"{self.name} = {self.value} at the start contradicts the equations: from the other "
            f"values it follows that {self.name} = {self.follows}; correct it, or leave it out"
        )


class PointCountError(ModelError):
    """Another number of conditions than there are states."""

    def __init__(self, place: Place, count: int, states: tuple[str, ...]) -> None:
        super().__init__(place, count, states)
        self.count, self.states = count, states

    def _paragraph(self) -> str:
        count = f"{self.count} condition" + ("" if self.count == 1 else "s")
        one = len(self.states) == 1
        states = "is 1 state" if one else f"are {len(self.states)} states"
        return (
            f"'at_points' has {count}, but there {states}, {listed_names(self.states)}; "
            "state one condition for each"
        )


class NoInstantError(ModelError):
    """An unknown in a condition without the instant at which it is meant."""

    def __init__(self, place: Place, found: str) -> None:
        super().__init__(place, found)
        self.found = found

    def _paragraph(self) -> str:
        return (
            f"{quoted(self.found)} stands without the instant at which it is meant; write it in "
            f"brackets, as {self.found}(0)"
        )


class SeveralInstantsError(ModelError):
    """A condition about more than one instant."""

    def __init__(self, place: Place, condition: str, one: str, other: str) -> None:
        super().__init__(place, condition, one, other)
        self.condition, self.one, self.other = condition, one, other

    def _paragraph(self) -> str:
        return (
            f"{quoted(self.condition)} speaks of the instants {self.one} and {self.other}, and a "
            "condition is about one; state a condition for each"
        )


class PointConstantError(ModelError):
    """A condition in which no unknown is left."""

    def __init__(self, place: Place, condition: str) -> None:
        super().__init__(place, condition)
        self.condition = condition

    def _paragraph(self) -> str:
        return (
            f"no unknown is left in {quoted(self.condition)}; a condition gives the value of one "
            "at an instant, as in x(0) = 1"
        )


class PointInputError(ModelError):
    """A condition about what an input drives at once."""

    def __init__(self, place: Place, condition: str, inputs: tuple[str, ...]) -> None:
        super().__init__(place, condition, inputs)
        self.condition, self.inputs = condition, inputs

    def _paragraph(self) -> str:
        return (
            f"{quoted(self.condition)} is about something in which {', '.join(self.inputs)} "
            "stands itself, by the equations, and conditions are about states alone; put in what "
            "the equations give for it"
        )


class PointJetError(ModelError):
    """A derivative in a condition or an output that is not known without more of an input."""

    def __init__(self, place: Place, found: str) -> None:
        super().__init__(place, found)
        self.found = found

    def _paragraph(self) -> str:
        return (
            f"{quoted(self.found)} holds the derivative of an input that stands in no equation; "
            "name a quantity of fewer primes"
        )


class ImpulseValueError(ModelError):
    """An unknown, or an output, that would be an impulse itself at an instant."""

    def __init__(
        self,
        place: Place,
        name: str,
        given: str,
        at: str,
        output: bool,  # noqa: FBT001  as pickled
    ) -> None:
        super().__init__(place, name, given, at, output)
        self.name, self.given, self.at, self.output = name, given, at, output

    def _paragraph(self) -> str:
        own = f"q_{self.name}"
        how = (
            f"take the output away, and add an equation that says what {own}' is"
            if self.output
            else f"write {own}' for {self.name} in the equations"
        )
        return (
            f"{quoted(self.name)} follows at each instant from the states and from "
            f"{quoted(self.given)}, which strikes at {self.at}: it would be an impulse itself, "
            f"and that is no value; ask for its integral {own} instead, which jumps: {how}"
        )


class EarlyPointError(ModelError):
    """A condition about an instant before the start."""

    def __init__(self, place: Place, condition: str, start: str) -> None:
        super().__init__(place, condition, start)
        self.condition, self.start = condition, start

    def _paragraph(self) -> str:
        return (
            f"{quoted(self.condition)} is about an instant before the start of time, {self.start}; "
            "set 'start' to an earlier one"
        )


class UnusedInputError(ModelError):
    """An input that acts nowhere."""

    def __init__(self, place: Place, name: str) -> None:
        super().__init__(place, name)
        self.name = name

    def _paragraph(self) -> str:
        return (
            f"the input '{self.name}' is used nowhere: neither an equation nor an output has it; "
            "use it, or take it away"
        )
