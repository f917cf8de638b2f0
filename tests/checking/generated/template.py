"""What a template of a derivation is made of."""

from __future__ import annotations

from collections.abc import Callable, Mapping, Sequence
from dataclasses import dataclass, field
from random import Random
from typing import Any

import mpmath

from tests.checking.generated.forms import (
    F,
)

__all__ = ["Env", "Said", "Template", "matrix_rows", "parameters", "state"]

Env = Mapping[str, Any]


@dataclass(frozen=True)
class Said:
    """What a line says: one of the `forms` is chosen; `truth` gives its value in numbers."""

    says: str
    lefts: Sequence[str]
    forms: Sequence[F]
    truth: Callable[[Env], Any]
    subject: str = ""
    tail: str = ""
    needed: bool = False


@dataclass(frozen=True)
class Template:
    """A model, the names as they are set, admissible values, and what may be said."""

    kind: str
    text: dict[str, Any]
    names: dict[str, str]
    samples: tuple[Env, ...]
    said: tuple[Said, ...]
    keep: frozenset[str] = field(default=frozenset())


def state(matrix: Callable[[Env], Any], start: Callable[[Env], Any], k: int) -> Callable:
    """Return the k-th entry of e^(Mt) z."""

    def at(env: Env) -> Any:
        rows = mpmath.matrix(matrix(env))
        return (mpmath.expm(rows * env["t"]) * mpmath.matrix(start(env)))[k]

    return at


def parameters(rng: Random, *names: str) -> dict[str, Any]:
    """Return parameters that are positive."""
    del rng
    return {key: {"assume": "positive"} for key in names}


def matrix_rows(matrix: mpmath.matrix) -> Any:
    return tuple(tuple(matrix[i, j] for j in range(matrix.cols)) for i in range(matrix.rows))
