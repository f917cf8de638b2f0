"""Divisors of plain models whose cases hide that they do not vanish."""

from __future__ import annotations

from typing import Any

import pytest

from closedform.response.driven.response import respond_driven
from closedform.verification.driven.verify import verify_driven
from tests.verification.driven.made import stated

MODELS: dict[str, dict[str, Any]] = {
    # where c^2 = 4 m k the divisor k - a c + a^2 m is a square
    "a double root": {
        "equations": ["p*x + a*x' + x'' = F"],
        "inputs": {"F": "exp(-b*t)"},
        "initial": {"x": 0, "x'": 0},
        "parameters": dict.fromkeys("abp", "positive"),
    },
    # written with omega_n^2 for k p
    "a frequency with a name": {
        "equations": ["p*k*x + c*x' + x'' = F"],
        "inputs": {"F": "exp(-d^2*t)"},
        "initial": {"x": "p", "x'": 0},
        "parameters": dict.fromkeys("cdkp", "positive"),
    },
    # where p = 2 b w it is not said once more that w > 0
    "an assumption that follows": {
        "equations": ["2*w*x + (k + w)*x' + p*y = F", "x + b*y + y' = 0"],
        "inputs": {"F": "w"},
        "initial": {"x": "k", "y": 0},
        "parameters": dict.fromkeys("bkpw", "positive"),
    },
}


@pytest.mark.parametrize("name", MODELS)
def test_they_are_shown_not_to_vanish(name: str) -> None:
    assert verify_driven(respond_driven(stated(MODELS[name]))).holds
