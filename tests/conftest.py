"""Settings that hold for every test."""

from __future__ import annotations

import os
from collections.abc import Generator, Iterator

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


@pytest.hookimpl(wrapper=True)
def pytest_runtest_makereport() -> Generator[None, pytest.TestReport, pytest.TestReport]:
    """In CI everything that a test needs is installed: a test that is skipped there fails."""
    report = yield
    if report.skipped and os.environ.get("CI") and not hasattr(report, "wasxfail"):
        report.outcome = "failed"
        report.longrepr = f"skipped in CI: {report.longrepr}"
    return report


@pytest.fixture(autouse=True)
def _one_precision() -> Iterator[None]:
    """Restore the precision of ball arithmetic, so that no test leans on its neighbour."""
    before = flint.ctx.prec
    yield
    flint.ctx.prec = before
