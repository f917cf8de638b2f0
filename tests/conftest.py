"""Settings that hold for every test."""

from __future__ import annotations

from collections.abc import Iterator

import flint
import pytest
from hypothesis import HealthCheck, settings

# The first exact call of a process loads much and is slow, so no example has a deadline;
# derandomised, a run on one machine says the same as on another.
settings.register_profile(
    "closedform",
    deadline=None,
    derandomize=True,
    max_examples=40,
    suppress_health_check=[HealthCheck.too_slow],
)
settings.load_profile("closedform")


@pytest.fixture(autouse=True)
def _one_precision() -> Iterator[None]:
    """Restore the precision of ball arithmetic, so that no test leans on its neighbour."""
    before = flint.ctx.prec
    yield
    flint.ctx.prec = before
