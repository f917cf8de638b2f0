"""A derivation through the templates to the text of a document."""

from __future__ import annotations

from dataclasses import dataclass
from pathlib import Path
from typing import get_args

from closedform.derivation.step import IMAGINARY_UNIT, Depth, Derivation, Symbol
from closedform.document.phrases import stacked_symbol
from closedform.document.printed import Printed
from closedform.document.references import References
from closedform.document.templating import (
    MAIN,
    answered,
    environment,
    shortened,
)
from closedform.errors import InputError
from closedform.notation.expression import Name
from closedform.notation.latex.names import derivatives_of, imaginary_unit, is_time

__all__ = [
    "DEPTHS",
    "Rendered",
    "UnknownDepthError",
    "UnusableDigitsError",
    "check_options",
    "render",
    "rendered",
]

DEPTHS: tuple[str, ...] = get_args(Depth)
"""From little to all.  In full, every part also names what it rests on."""

MOST_DIGITS = 1000


class UnknownDepthError(InputError):
    """A depth that is not in `DEPTHS`."""

    def __init__(self, depth: str) -> None:
        super().__init__(depth)
        self.depth = depth

    def __str__(self) -> str:
        return f"No depth is called {self.depth!r}; choose one of {', '.join(DEPTHS)}."


class UnusableDigitsError(InputError):
    """A number of digits that tables cannot have."""

    def __init__(self, digits: int) -> None:
        super().__init__(digits)
        self.digits = digits

    def __str__(self) -> str:
        return f"Tables have from 1 to {MOST_DIGITS} significant digits, not {self.digits}."


def check_options(*, depth: str, digits: int) -> None:
    """Refuse a depth that is none, and digits of tables below 1 or above `MOST_DIGITS`.

    Raises:  UnknownDepthError, UnusableDigitsError.
    """
    if depth not in DEPTHS:
        raise UnknownDepthError(depth)
    if not 1 <= digits <= MOST_DIGITS:
        raise UnusableDigitsError(digits)


@dataclass(frozen=True)
class Rendered:
    """The text of a document, and each formula in it with the object that it prints.

    `time` is the variable that the functions in it are functions of.
    """

    text: str
    printed: Printed
    time: str


def render(
    derivation: Derivation, *, template: str | Path = "latex", depth: str = "working"
) -> str:
    """Return the derivation as the text of a document, as `rendered` does."""
    return rendered(derivation, template=template, depth=depth).text


def rendered(
    derivation: Derivation, *, template: str | Path = "latex", depth: str = "working"
) -> Rendered:
    """Return the derivation as the text of a document, with what it prints.

    `template` is the name of a shipped template, or a folder whose files take the place
    of the shipped ones of the same name.  The same input gives the same text.

    Raises:  UnknownDepthError; TemplateError if the template is not there or fails.
    """
    if depth not in DEPTHS:
        raise UnknownDepthError(depth)

    time, references, letters = _time(derivation), References(), derivation.letters
    found = environment(template, references)
    shown = DEPTHS[: DEPTHS.index(depth) + 1]
    steps = [step for step in derivation.steps if step.depth in shown]
    kinds = {step.kind for step in derivation.steps}
    values: dict[str, object] = {
        "title": derivation.title,
        "steps": steps,
        "depth": depth,
        "shown": frozenset(step.kind for step in steps),
        "time": time,
        "root": letters.root,
        "unit": IMAGINARY_UNIT,
        "letters": letters,
        "in_time": is_time(time.text),
        "form": Symbol("matrix", ("R",) if "real_form" in kinds else (), letter="J"),
        "foot": shortened(derivation.title),
    }

    if "input_system" in kinds:
        values["symbol"] = stacked_symbol

    def twice() -> str:
        main = found.get_template(MAIN)
        main.render(values)
        references.next_pass()
        return main.render(values)

    with derivatives_of(time.text), imaginary_unit(letters.unit):
        text = answered(template, twice)
    return Rendered(text, references.printed, time.text)


def _time(derivation: Derivation) -> Name:
    for step in derivation.steps:
        time = step.facts.get("time")
        if step.kind in ("model", "driven_model") and isinstance(time, str):
            return Name(time)
    return Name("t")
