"""Derivations of driven models, to be rendered and set."""

from __future__ import annotations

from collections.abc import Callable
from functools import partial

from closedform.derivation.step import Derivation
from tests.derivation.driven.models import MODELS, derived

__all__ = ["DRIVEN_SAMPLES"]

DRIVEN_SAMPLES: dict[str, Callable[[], Derivation]] = {
    name: partial(derived, name) for name in MODELS
}
