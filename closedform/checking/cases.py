"""Which cases of the parameters a derivation is about."""

from __future__ import annotations

from pathlib import Path

from closedform.algebra.elementary import Element, ElementaryField, NotElementaryError
from closedform.checking.errors import NotJudgedError
from closedform.checking.standing.ground import Ground, ground_of
from closedform.checking.truth import Truth
from closedform.checking.values.exact import exact
from closedform.checking.values.scope import Scope
from closedform.errors import InputError, Place
from closedform.notation.comparison import Compared, read_comparison
from closedform.notation.errors import quoted
from closedform.notation.written.from_expression import written_from

__all__ = ["Grounds", "NoSuchCaseError", "UndecidedCaseError", "allowed_cases"]


class NoSuchCaseError(InputError):
    """A case that the model does not have."""

    def __init__(self, path: Path, case: str, conditions: tuple[str, ...]) -> None:
        super().__init__(path, case, conditions)
        self.path, self.case, self.conditions = path, case, conditions

    def __str__(self) -> str:
        if self.conditions == ("",):
            return (
                f"{self.path}: here stands the case {quoted(self.case)}, and the model has no "
                "cases; take it away, or name another model."
            )
        listed = "; ".join(
            f"{k}: {text or 'all values'}" for k, text in enumerate(self.conditions, 1)
        )
        return (
            f"{self.path}: the model has no case {quoted(self.case)}; name one by its number, or "
            f"by a condition that holds in it. It has: {listed}"
        )


class UndecidedCaseError(InputError):
    """A condition on the parameters that cannot be worked out; `reason` says why."""

    def __init__(self, path: Path, case: str, reason: str) -> None:
        super().__init__(path, case, reason)
        self.path, self.case, self.reason = path, case, reason

    def __str__(self) -> str:
        return (
            f"{self.path}: whether {quoted(self.case)} holds cannot be worked out: {self.reason}; "
            "write a simpler condition, or the number of the case."
        )


class Grounds:
    """The grounds of the cases of a model, each made when it is first asked for."""

    def __init__(self, truths: tuple[Truth, ...], path: Path) -> None:
        self._truths, self._path = truths, path
        self._made: dict[int, Ground] = {}

    def of(self, truth: Truth) -> Ground:
        """Return the ground of a case."""
        if id(truth) not in self._made:
            self._made[id(truth)] = ground_of(truth)
        return self._made[id(truth)]

    def all(self) -> tuple[Ground, ...]:
        """Return the grounds of all cases, in the order of the model."""
        return tuple(map(self.of, self._truths))

    def allowed(self, where: str, truth: Truth) -> tuple[Truth, ...]:
        """Return the cases that a line allows: the one at hand first if it is among them."""
        found = allowed_cases(self._truths, where, self._path, key="where")
        return (truth,) if any(other is truth for other in found) else found


def allowed_cases(
    truths: tuple[Truth, ...], case: str, path: Path, *, key: str = "case"
) -> tuple[Truth, ...]:
    """Return the cases that a derivation may be about: all if `case` is empty.

    `case` is a number from 1, or a condition such as c^2 < 4*m*k: the cases stay in which it
    holds at every sample of the parameters.  Errors name the file and `key`.

    Raises:  NoSuchCaseError if none does; UndecidedCaseError; what `read_comparison` raises.
    """
    text = case.strip()
    if not text:
        return truths
    if text.isascii() and text.isdigit():
        number = text.lstrip("0")
        if number not in map(str, range(1, len(truths) + 1)):
            raise NoSuchCaseError(path, text, tuple(truth.condition for truth in truths))
        return (truths[int(number) - 1],)
    names = frozenset(truths[0].parameters)
    place = Place(str(path), key)
    compared = read_comparison(text, names=names, place=place)
    found = tuple(
        truth
        for truth in truths
        if truth.samples and all(_holds(compared, sample, text, path) for sample in _samples(truth))
    )
    if not found:
        raise NoSuchCaseError(path, text, tuple(truth.condition for truth in truths))
    return found


def _samples(truth: Truth) -> list[dict[str, Element]]:
    field = ElementaryField()
    samples = []
    for sample in truth.samples:
        values = {name: exact(tree, Scope(field, truth.time)) for name, tree in sample.items()}
        samples.append({n: value for n, value in values.items() if isinstance(value, Element)})
    return samples


def _holds(compared: Compared, sample: dict[str, Element], text: str, path: Path) -> bool:
    field = next(iter(sample.values())).field
    scope = Scope(field, "t", symbols=dict(sample))
    left, relation, right = compared
    try:
        one, other = (exact(written_from(side), scope) for side in (left, right))
    except (NotJudgedError, NotElementaryError, ZeroDivisionError) as error:
        reason = "it divides by zero" if isinstance(error, ZeroDivisionError) else str(error)
        raise UndecidedCaseError(path, text, reason) from None
    if not (isinstance(one, Element) and isinstance(other, Element)):
        return False
    sign = (one - other).sign()
    return {
        "<": sign == -1,
        "<=": sign in (-1, 0),
        ">": sign == 1,
        ">=": sign in (0, 1),
        "=": sign == 0,
        "!=": sign in (-1, 1),
    }[relation]
