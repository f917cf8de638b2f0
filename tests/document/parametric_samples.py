"""Derivations of models with parameters, to be rendered and set."""

from __future__ import annotations

from collections.abc import Callable
from functools import partial

from closedform.derivation.parametric.build import derive_cases
from closedform.derivation.step import Derivation
from closedform.verification.parametric.record import CaseRecords
from tests.derivation.parametric.models import MODELS, derived, solved, with_a_gap

__all__ = ["PARAMETRIC_SAMPLES"]


def gap() -> Derivation:
    """A model of which one branch is not covered."""
    response, records, _ = solved("two tanks")
    return derive_cases(with_a_gap(response), CaseRecords(records.whole, records.cases[:1]))


PARAMETRIC_SAMPLES: dict[str, Callable[[], Derivation]] = {
    **{name: partial(derived, name) for name in MODELS},
    "gap": gap,
}
