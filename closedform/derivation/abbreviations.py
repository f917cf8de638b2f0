"""The step that defines the constants in printed formulas.

C = r(lambda)/p'(lambda) at a real eigenvalue; at a pair, 2 Re goes with the cosine and
-2 Im with the sine.  Constants that share r stand together.
"""

from __future__ import annotations

from collections.abc import Iterator
from dataclasses import dataclass

from closedform.algebra.field import Polynomial
from closedform.derivation.formulas import eigenvalue_formula, polynomial_formula, root_of
from closedform.derivation.step import Step
from closedform.notation.expression import Name
from closedform.response.modes import Mode
from closedform.response.names import NamedConstant, ResiduePart
from closedform.response.response import Response
from closedform.response.sampling import constant_decimal

__all__ = ["abbreviations_step"]


@dataclass(frozen=True)
class _Key:
    """What the constants of one row share: the root and r, its weight of 1/j! included."""

    polynomial: Polynomial
    numerator: Polynomial
    which: int


def abbreviations_step(response: Response, shown: frozenset[str], digits: int) -> Step | None:
    """Define the amounts that the printed formulas name; None if there are none."""
    rows: dict[_Key, dict[str, NamedConstant]] = {}
    for constant in response.closed_forms.constants:
        definition = constant.definition
        if isinstance(definition, ResiduePart) and constant.name in shown:
            rows.setdefault(_key(response, definition), {})[definition.part] = constant
    if not rows:
        return None
    several = len(response.spectrum.factors) > 1
    facts = {
        "rows": list(_rows(response, rows, digits)),
        "several": several,
        "pairs": any(_mode(response, key).kind != "real" for key in rows),
        "reals": any(_mode(response, key).kind == "real" for key in rows),
    }
    return Step("abbreviations", (), facts, ("solution",), "summary")


def _key(response: Response, definition: ResiduePart) -> _Key:
    """2 Re r/p' and -2 Im r/p' have the weights 2/j! and -2/j!; a real amount has 1/j!."""
    mode = _mode(response, _Key(definition.polynomial, definition.numerator, definition.which))
    weight = abs(definition.weight) if mode.kind == "real" else abs(definition.weight) / 2
    numerator = definition.numerator.mul_ground(response.field.scalar(weight))
    return _Key(definition.polynomial, numerator, definition.which)


def _rows(
    response: Response, rows: dict[_Key, dict[str, NamedConstant]], digits: int
) -> Iterator[dict[str, object]]:
    above: Polynomial | None = None
    for key, constants in rows.items():
        mode = _mode(response, key)
        shared = above is not None and key.numerator == above
        above = key.numerator
        yield {
            "numerator": None
            if shared
            else polynomial_formula(response.field, key.numerator, root_of(response)),
            "factor": str(response.spectrum.factors.index(mode.factor) + 1),
            "at": eigenvalue_formula(mode),
            "constants": [
                None
                if (constant := constants.get(part)) is None
                else (Name(constant.name), constant_decimal(constant, digits))
                for part in ("real", "imaginary")
            ],
        }


def _mode(response: Response, key: _Key) -> Mode:
    return next(
        mode
        for modes in response.closed_forms.modes
        for mode in modes
        if mode.factor.p == key.polynomial and mode.which == key.which
    )
