"""The model: what the user stated, exactly, and nothing worked out from it."""

from __future__ import annotations

from dataclasses import dataclass

from closedform.algebra.surds import SurdSum

__all__ = ["Model", "Output"]


@dataclass(frozen=True, slots=True)
class Output:
    """A named linear combination of the states; `weights` has one number per state."""

    name: str
    weights: tuple[SurdSum, ...]


@dataclass(frozen=True, slots=True)
class Model:
    """The system x' = A x, x(0) = x0, with what is to be reported of it.

    Shapes:  `matrix` is n rows of n entries, `initial` has n, n = len(states) >= 1.
    Units:   `times` carry the unit of `time`; the model itself is unit-free.
    Exact:   every number is a `SurdSum`.
    `name` is the stem under which results are filed; `reserved` are names that are in use
    beside those of states and outputs.
    """

    name: str
    title: str
    states: tuple[str, ...]
    matrix: tuple[tuple[SurdSum, ...], ...]
    initial: tuple[SurdSum, ...]
    outputs: tuple[Output, ...] = ()
    times: tuple[SurdSum, ...] = ()
    time: str = "t"
    summary: str = ""
    reserved: tuple[str, ...] = ()
