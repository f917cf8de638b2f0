"""What keeps a model from being held against derivations."""

from __future__ import annotations

from closedform.errors import InputError

__all__ = ["NoValueError", "RepeatingInputError"]


class RepeatingInputError(InputError):
    """An input that repeats: its solution is told period by period, and no line is held to it."""

    def __init__(self, model: str, given: str) -> None:
        super().__init__(model, given)
        self.model, self.given = model, given

    def __str__(self) -> str:
        return (
            f"{self.model}: the input {self.given} repeats, and derivations are not checked "
            "against inputs that repeat. State the first periods as pieces of the input, without "
            "`period`, and check the lines that belong to these."
        )


class NoValueError(InputError):
    """A number stands where the model has a parameter without a value in this case."""

    def __init__(self, names: tuple[str, ...], condition: str) -> None:
        super().__init__(names, condition)
        self.names, self.condition = names, condition

    def __str__(self) -> str:
        case = f" in the case {self.condition}" if self.condition else ""
        return (
            f"the model has no value for {', '.join(self.names)}{case}, but numbers are put in. "
            "Give every parameter a `value` in the model file."
        )
