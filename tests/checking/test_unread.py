"""Lines that are not read: the reason is a sentence, to stand in a table and in a report."""

from __future__ import annotations

import pytest

from tests.checking.hold import held

SPRING = {"equations": ["x'' + 2*x' + 5*x = 0"], "initial": {"x": "1", "x'": "0"}}


@pytest.mark.parametrize(
    "text",
    [
        r"\unknowncommand{x} = 3",
        r"x(t) = \left( e^{-t}",
        r"\lambda_1, \ldots, \lambda_4",
        r"x(t) = \begin{figure} 1 \end{figure}",
        r"x(1) = \qtylist{1;2}{m}",
    ],
)
def test_the_reason_is_a_sentence_without_place_or_excerpt(text: str) -> None:
    (verdict,) = held(SPRING, text)
    assert verdict.verdict == "not read"
    assert verdict.reason
    assert "\n" not in verdict.reason
    assert not verdict.reason.rstrip(".").endswith("^")
    assert not verdict.reason.startswith("line")
