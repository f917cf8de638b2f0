"""What can be wrong with the parameters of a model, and with what is said of them."""

from __future__ import annotations

from closedform.errors import Place
from closedform.model.errors import ModelError
from closedform.notation.errors import quoted

__all__ = [
    "BrokenConditionError",
    "ContradictionError",
    "MissingValueError",
    "NameHereError",
    "NoParametersError",
    "RestatedValueError",
    "SettledConditionError",
    "SubstitutionCycleError",
    "TooManyParametersError",
    "UnknownAssumptionError",
    "UnknownParameterError",
    "UnusedParameterError",
    "ValueOutsideError",
]


class NoParametersError(ModelError):
    """A model with parameters in which none is left open; `restated` says why."""

    def __init__(self, place: Place, restated: bool) -> None:  # noqa: FBT001  as pickled
        super().__init__(place, restated)
        self.restated = restated

    def _paragraph(self) -> str:
        if self.restated:
            return (
                "[substitute] re-states every parameter, so none remains; write the numbers "
                "where they belong and leave 'parameters' out, or declare what remains"
            )
        return (
            "there are no parameters here; declare each in a table of its own, as [parameters.k], "
            "or leave the key out"
        )


class TooManyParametersError(ModelError):
    """More parameters than can be worked with."""

    def __init__(self, place: Place, count: int, limit: int) -> None:
        super().__init__(place, count, limit)
        self.count, self.limit = count, limit

    def _paragraph(self) -> str:
        return (
            f"there are {self.count} parameters, and at most {self.limit} are read; give numbers "
            "to some, or re-state them by fewer in [substitute]"
        )


class UnknownAssumptionError(ModelError):
    """A word that is no assumption; `nearest` is the one most like it."""

    def __init__(
        self, place: Place, found: str, nearest: str | None, known: tuple[str, ...]
    ) -> None:
        super().__init__(place, found, nearest, known)
        self.found, self.nearest, self.known = found, nearest, known

    def _paragraph(self) -> str:
        text = f"{quoted(self.found)} is no assumption"
        if self.nearest:
            return f"{text}; did you mean '{self.nearest}'?"
        return (
            f"{text}; a parameter is one of {', '.join(self.known)}, and anything else is said "
            "in 'conditions', as in conditions = [\"k > 3\"]"
        )


class UnusedParameterError(ModelError):
    """A parameter that stands nowhere in the model; `declared` is false for one only re-stated."""

    def __init__(self, place: Place, name: str, declared: bool) -> None:  # noqa: FBT001  as pickled
        super().__init__(place, name, declared)
        self.name, self.declared = name, declared

    def _paragraph(self) -> str:
        if not self.declared:
            return (
                f"'{self.name}' is re-stated, but it is neither a parameter nor used in any "
                "formula; check its spelling, or take the line away"
            )
        return (
            f"the parameter '{self.name}' is used nowhere: no equation, matrix, input, value, "
            "output, condition or definition has it; use it, or take it away"
        )


class UnknownParameterError(ModelError):
    """A value for a name that is no parameter of the model."""

    def __init__(
        self, place: Place, name: str, nearest: str | None, known: tuple[str, ...]
    ) -> None:
        super().__init__(place, name, nearest, known)
        self.name, self.nearest, self.known = name, nearest, known

    def _paragraph(self) -> str:
        if self.nearest:
            return f"there is no parameter {quoted(self.name)}; did you mean '{self.nearest}'?"
        listed = ", ".join(self.known[:8]) + (", …" if len(self.known) > 8 else "")
        return f"there is no parameter {quoted(self.name)}; the parameters are {listed}"


class RestatedValueError(ModelError):
    """A value for a parameter that [substitute] expresses by `others`."""

    def __init__(self, place: Place, name: str, others: tuple[str, ...]) -> None:
        super().__init__(place, name, others)
        self.name, self.others = name, others

    def _paragraph(self) -> str:
        listed = " and ".join(f"'{other}'" for other in self.others)
        instead = f"give values to {listed}" if listed else "its formula is a number already"
        return f"'{self.name}' is re-stated by [substitute], so it takes no value; {instead}"


class SubstitutionCycleError(ModelError):
    """Substitutions that lead back to where they began; the last of `names` is the first."""

    def __init__(self, place: Place, names: tuple[str, ...]) -> None:
        super().__init__(place, names)
        self.names = names

    def _paragraph(self) -> str:
        if len(self.names) == 2:
            return (
                f"'{self.names[0]}' is re-stated by itself; write its formula in the parameters "
                "that remain"
            )
        return (
            f"the substitutions go round in a circle, {' -> '.join(self.names)}; re-state one of "
            "these by parameters that remain"
        )


class SettledConditionError(ModelError):
    """A comparison that is decided without the parameters: always true or never."""

    def __init__(self, place: Place, found: str, holds: bool) -> None:  # noqa: FBT001  as pickled
        super().__init__(place, found, holds)
        self.found, self.holds = found, holds

    def _paragraph(self) -> str:
        if self.holds:
            return f"{quoted(self.found)} holds whatever the parameters are; take it away"
        return f"{quoted(self.found)} holds for no values of the parameters; correct it"


class NameHereError(ModelError):
    """A name of the model that stands for something else than a parameter; `kind` says what."""

    def __init__(self, place: Place, name: str, kind: str) -> None:
        super().__init__(place, name, kind)
        self.name, self.kind = name, kind

    def _paragraph(self) -> str:
        if self.kind == "an abbreviation":
            return (
                f"'{self.name}' is an abbreviation, which is for the results only; write its "
                "formula, or move it from [abbreviations] to [substitute]"
            )
        return (
            f"'{self.name}' is {self.kind}, and here only parameters may stand: the system is "
            "linear, and its coefficients are constant"
        )


class ContradictionError(ModelError):
    """Assumptions and conditions that no values satisfy together."""

    def __init__(self, place: Place, conditions: tuple[str, ...]) -> None:
        super().__init__(place, conditions)
        self.conditions = conditions

    def _paragraph(self) -> str:
        *others, last = map(quoted, self.conditions)
        listed = f"{', '.join(others)} and {last}" if others else last
        return f"no values satisfy {listed}; correct an assumption or a condition"


class ValueOutsideError(ModelError):
    """A value of a parameter against its own assumption."""

    def __init__(self, place: Place, name: str, value: str, assumption: str) -> None:
        super().__init__(place, name, value, assumption)
        self.name, self.value, self.assumption = name, value, assumption

    def _paragraph(self) -> str:
        return (
            f"the value {self.value} of '{self.name}' is not {self.assumption}, as the parameter "
            "is assumed to be; correct the value or the assumption"
        )


class BrokenConditionError(ModelError):
    """Values of the parameters for which a condition of the model does not hold."""

    def __init__(self, place: Place, condition: str, values: tuple[tuple[str, str], ...]) -> None:
        super().__init__(place, condition, values)
        self.condition, self.values = condition, values

    def _paragraph(self) -> str:
        listed = ", ".join(f"{name} = {value}" for name, value in self.values)
        return (
            f"{quoted(self.condition)} does not hold for the values {listed}; correct these or "
            "the condition"
        )


class MissingValueError(ModelError):
    """Parameters to which a row of values gives none, and which have none of their own."""

    def __init__(self, place: Place, names: tuple[str, ...]) -> None:
        super().__init__(place, names)
        self.names = names

    def _paragraph(self) -> str:
        listed = ", ".join(f"'{name}'" for name in self.names[:8])
        more = ", …" if len(self.names) > 8 else ""
        return (
            f"this row has no value for {listed}{more}; write it here, or as the 'value' of the "
            "parameter"
        )
