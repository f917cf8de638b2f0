"""The undamped frequency for the damped one, or the other way round, in every wave of a formula."""

from __future__ import annotations

from collections.abc import Iterator

from closedform.algebra.elementary import Element
from closedform.checking.errors import UNDECIDED
from closedform.checking.slips import names
from closedform.checking.slips.trial import Candidate, Trial
from closedform.checking.values.written_back import written_back
from closedform.notation.written.tree import Apply, Written, changed, walk

__all__ = ["other_frequencies"]

WAVES = ("sin", "cos")


def other_frequencies(trial: Trial) -> Iterator[Candidate]:
    """Yield the formula with the other frequency of a mode in all waves that have one of them."""
    angles = dict.fromkeys(
        node.arguments[0]
        for node in walk(trial.tree)
        if isinstance(node, Apply) and node.function in WAVES
    )
    found = {angle: value for angle in angles if (value := _value(angle, trial)) is not None}
    if not found:
        return
    field, time = trial.ground.field, trial.ground.field.t
    for natural, damped in _modes(trial):
        for own, right, name in (
            (natural, damped, names.UNDAMPED_FOR_DAMPED),
            (damped, natural, names.DAMPED_FOR_UNDAMPED),
        ):
            new: dict[Written, Written] = {
                angle: written_back(value + (right - own) * time)
                for angle, value in found.items()
                if value.derivative() == own and field is value.field
            }

            def change(node: Written, new: dict[Written, Written] = new) -> Written | None:
                waves = isinstance(node, Apply) and node.function in WAVES
                if not waves or not isinstance(node, Apply) or node.arguments[0] not in new:
                    return None
                return Apply(node.function, (new[node.arguments[0]],))

            if new:
                yield Candidate(name, "every sine and cosine", changed(trial.tree, change))


def _value(angle: Written, trial: Trial) -> Element | None:
    try:
        value = trial.setting.value(angle, trial.ground)
    except UNDECIDED:
        return None
    return value if isinstance(value, Element) else None


def _modes(trial: Trial) -> Iterator[tuple[Element, Element]]:
    """Yield the undamped and the damped frequency of every pair of eigenvalues, each once."""
    field = trial.ground.field
    seen: list[Element] = []
    for value in trial.ground.eigenvalues:
        try:
            real, imaginary = field.re(value), field.im(value)
            square = real * real + imaginary * imaginary
            if not imaginary.is_zero and not real.is_zero and square not in seen:
                seen.append(square)
                yield field.sqrt(square), field.sqrt(square - real * real)
        except UNDECIDED:
            continue
