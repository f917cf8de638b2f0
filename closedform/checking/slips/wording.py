"""Telling in words where in a line something stands."""

from __future__ import annotations

from closedform.checking.slips.spots import Spot
from closedform.checking.slips.trial import Trial
from closedform.notation.written.plain_form import plain_written
from closedform.notation.written.tree import (
    EULER,
    Apply,
    Array,
    Negation,
    Power,
    Sum,
    Written,
    walk,
)

__all__ = ["FUNCTION_WORDS", "part_text", "placed", "wave_above", "waves_in"]

FUNCTION_WORDS = {
    "sin": "sine",
    "cos": "cosine",
    "sinh": "hyperbolic sine",
    "cosh": "hyperbolic cosine",
    "exp": "exponential",
}
LONGEST = 40


def waves_in(tree: Written) -> list[str]:
    """Return the sines and cosines in a formula, by name, each once."""
    found = [
        n.function for n in walk(tree) if isinstance(n, Apply) and n.function in FUNCTION_WORDS
    ]
    return list(dict.fromkeys(f for f in found if f != "exp"))


def wave_above(spot: Spot) -> str:
    """Return the function in whose argument a part stands: sin, cos, exp and so on, or nothing."""
    inner = spot.node
    for outer in reversed(spot.above):
        if isinstance(outer, Apply):
            return outer.function
        if isinstance(outer, Power) and outer.base == EULER and outer.exponent is inner:
            return "exp"
        inner = outer
    return ""


def part_text(part: Written) -> str:
    """Return how people call a term: the sine term, the exponential, the term 3*t."""
    inside = part.operand if isinstance(part, Negation) else part
    waves = waves_in(inside)
    if isinstance(inside, Sum):
        return "the bracket"
    if len(waves) == 1:
        return f"the {FUNCTION_WORDS[waves[0]]} term"
    text = plain_written(inside)
    return f"the term {text}" if len(text) <= LONGEST else "one term"


def placed(trial: Trial, spot: Spot, what: str) -> str:
    """Return words for a part, with the entry in which it stands."""
    entry = trial.entry or _entry_of(spot)
    wave = wave_above(spot)
    if wave in FUNCTION_WORDS:
        what += f" in {'an exponent' if wave == 'exp' else f'the {FUNCTION_WORDS[wave]}'}"
    elif wave == "sqrt":
        what += " under the root"
    if entry is None:
        return what
    if not what:
        return f"entry {entry}"
    return f"{what} of entry {entry}"


def _entry_of(spot: Spot) -> tuple[int, int] | None:
    for outer, (slot, indices) in zip(spot.above, spot.path, strict=True):
        if isinstance(outer, Array) and slot == "rows":
            return indices[0] + 1, indices[1] + 1
    return None
