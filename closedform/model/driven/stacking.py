"""The autonomous model of states and generator, and the names in it."""

from __future__ import annotations

from collections.abc import Iterable, Sequence

from closedform.algebra.field import BaseField, Scalar
from closedform.model.driven.generator import Generator
from closedform.model.driven.model import Jet, Reduction
from closedform.model.naming import Names, named_in
from closedform.model.source import Source
from closedform.notation.latex.names import printed_key

__all__ = ["dotted", "generator_names", "stacked_matrix", "state_names"]

DOTS = ("", "_dot", "_ddot")


def dotted(name: str, order: int) -> str:
    """Return the name of a derivative.

    >>> [dotted("x1", order) for order in range(4)]
    ['x1', 'x1_dot', 'x1_ddot', 'x1_dot3']
    """
    return name + (DOTS[order] if order < len(DOTS) else f"_dot{order}")


def state_names(
    jets: Sequence[Jet], names: Names, key: str, source: Source
) -> tuple[tuple[str, ...], Names]:
    """Return the names of the states, and the names of the model with them.

    Raises:  UnusableNameError, LookalikeNamesError if one is in use for something else.
    """
    derivatives = [dotted(jet.name, jet.order) for jet in jets if jet.order]
    names = named_in(derivatives, key, "a derivative", names, source)
    return tuple(dotted(jet.name, jet.order) for jet in jets), names


def generator_names(orders: Sequence[int], inputs: Sequence[str], names: Names) -> tuple[str, ...]:
    """Return a name for each row of the generator: an input's, then its derivatives'.

    `inputs` are the names of the inputs, empty for one that has none; where several have one
    name, the first has it.  No two names of the model are printed alike.
    """
    taken = {printed_key(name) for name in (names.time, *names.taken)}
    found: list[str] = []
    number = 0
    for order, name in zip(orders, inputs, strict=True):
        block = [dotted(name, k) for k in range(order)] if name and name not in found else []
        if not _free(block[1:], taken):
            block = []
        while order and not block:
            number += 1
            tried = [dotted(f"u_{number}", k) for k in range(order)]
            block = tried if _free(tried, taken) else []
        taken |= {printed_key(one) for one in block}
        found += block
    return tuple(found)


def _free(block: Iterable[str], taken: set[str]) -> bool:
    return not any(printed_key(name) in taken for name in block)


def stacked_matrix(
    field: BaseField, reduction: Reduction, generator: Generator | None
) -> tuple[tuple[Scalar, ...], ...]:
    """Return [[A, B R], [0, S]], row by row."""
    upper = reduction.matrix.to_list()
    if generator is None:
        return tuple(map(tuple, upper))
    driven = (reduction.input_matrix * generator.readout).to_dense().to_list()
    zero = [field.domain.zero] * len(upper)
    return (
        *((*row, *more) for row, more in zip(upper, driven, strict=True)),
        *((*zero, *row) for row in generator.matrix.to_list()),
    )
