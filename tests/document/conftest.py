"""Tests that run TeX are skipped where there is none; in CI a skip is a failure."""

from __future__ import annotations

import pytest

from closedform.document.engine import available_engines


@pytest.fixture(scope="session")
def engines() -> tuple[str, ...]:
    """The TeX engines of this machine."""
    found = available_engines()
    if not found:
        pytest.skip("no TeX engine is installed")
    return found


@pytest.fixture(scope="session")
def pdflatex(engines: tuple[str, ...]) -> str:
    """The engine by which widths are measured."""
    if "pdflatex" in engines:
        return "pdflatex"
    pytest.skip("pdflatex is not installed")
