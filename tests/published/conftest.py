"""Lines are judged afresh in every test; an equal model is solved once."""

from __future__ import annotations

import pytest

from tests.checking.known_truths import known_truths


@pytest.fixture(autouse=True)
def _models_solved_once(monkeypatch: pytest.MonkeyPatch) -> None:
    monkeypatch.setattr("closedform.checking.check.truths_of", known_truths)
