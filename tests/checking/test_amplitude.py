"""Amplitudes of what persists, and of free waves."""

from __future__ import annotations

import pytest

from tests.checking.hold import held

FORCED = {
    "equations": ["x'' + 2*x' + 5*x = 10*cos(t)"],
    "initial": {"x": "0", "x'": "0"},
}


@pytest.mark.parametrize(
    ("line", "verdict"),
    [
        (r"\hat x=\sqrt5", "holds"),
        (r"X=\sqrt{2^2+1^2}=\sqrt5\approx2.236", "holds to the digits shown"),
        (r"\hat x\approx2.24", "holds to the digits shown"),
        (r"\hat x=\frac52", "holds"),
        (r"\hat x=5", "fails"),
        (r"\hat x\approx2.23", "fails"),
    ],
)
def test_amplitudes(line: str, verdict: str) -> None:
    """The steady state is 2 cos t + sin t, what decays e^(-t) (2 cos 2t + 3/2 sin 2t)."""
    (found,) = held(FORCED, ("amplitude", line, "x"))
    assert found.verdict == verdict, found
