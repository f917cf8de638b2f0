"""The letters that stand for any number: of polynomials, of the resolvent, of squares."""

from __future__ import annotations

import re
from collections.abc import Collection
from dataclasses import dataclass

from closedform.derivation.step import Symbol
from closedform.notation.expression import Name
from closedform.notation.latex.names import printed_key
from closedform.response.parametric.quantities import Letters
from closedform.response.parametric.response import ParametricResponse

__all__ = ["Variables", "first_free", "names_of", "root_symbol", "variables_of"]

_NUMBERED = re.compile(r"lambda_([0-9]+)")


@dataclass(frozen=True)
class Variables:
    """The variable of the characteristic polynomial, as a rule lambda, and three more.

    `first` is the number of the first eigenvalue: those before it are taken by named roots.
    """

    root: Name
    laplace: Name
    square: Name
    even: Name
    first: int = 1


def names_of(response: ParametricResponse) -> set[str]:
    """Return every name of the model, and of the named quantities of its cases."""
    model = response.model
    return {
        *model.states,
        *model.reserved,
        model.time,
        *(output.name for output in model.outputs),
        *model.field.parameters,
        *(d.name for d in (*model.abbreviations, *model.restated)),
        *(q.name for case in response.cases for q in case.quantities),
    }


def variables_of(response: ParametricResponse) -> Variables:
    """Return letters that print like no name of the model, and like no named quantity."""
    named = {q.name for case in response.cases for q in case.quantities}
    taken = {printed_key(name) for name in names_of(response)}
    bases = {printed_key(name).split("_")[0] for name in names_of(response) - named}
    numbers = [int(m[1]) for name in named if (m := _NUMBERED.fullmatch(name))]
    return Variables(
        _free(("lambda", "s", "z", "xi"), {*taken, *bases}),
        _free(("s", "z", "xi"), taken),
        _free(("mu", "nu", "eta"), taken),
        _free(("w", "u", "y"), taken),
        max(numbers, default=0) + 1,
    )


def _free(letters: tuple[str, ...], taken: Collection[str]) -> Name:
    for letter in letters:
        if letter not in taken:
            return Name(letter)
    return Name(Letters(taken).take(letters[0]))


def first_free(letters: Letters, stems: tuple[str, ...], number: int | None = None) -> str:
    """Return the first of some names that is free, as it is or with the number."""
    for stem in stems:
        plain = stem if number is None else f"{stem}_{number}"
        taken = letters.take(stem, number)
        if taken == plain:
            return taken
    return letters.take(stems[-1], number)


def root_symbol(variables: Variables, numbers: range) -> Symbol:
    """Return lambda_k, or lambda_(k,k+1) for a pair."""
    return Symbol("scalar", letter=variables.root.text, indices=(",".join(map(str, numbers)),))
