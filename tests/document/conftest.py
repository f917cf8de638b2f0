"""Tests that run TeX are skipped where there is none, but never in CI."""

from __future__ import annotations

import os

import pytest

from closedform.document.engine import available_engines


@pytest.fixture(scope="session")
def engines() -> tuple[str, ...]:
    """The TeX engines of this machine; in CI a machine without one is a failure."""
    found = available_engines()
    if not found and os.environ.get("CI"):
        pytest.fail("CI is set, but no TeX engine is installed")
    if not found:
        pytest.skip("no TeX engine is installed")
    return found


@pytest.fixture(scope="session")
def pdflatex(engines: tuple[str, ...]) -> str:
    """The engine by which widths are measured."""
    if "pdflatex" in engines:
        return "pdflatex"
    if os.environ.get("CI"):
        pytest.fail("CI is set, but pdflatex is not installed")
    pytest.skip("pdflatex is not installed")
