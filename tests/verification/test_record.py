"""A record holds when something was proved and nothing refuted."""

from __future__ import annotations

import pytest

from closedform.verification.record import Check, VerificationRecord

PROVED, ENCLOSED = Check("a", "proved", "by hand"), Check("b", "enclosed", "in balls")
REFUTED, OPEN = Check("c", "refuted", "entry (1, 2)"), Check("d", "not attempted", "too large")


@pytest.mark.parametrize(
    ("checks", "holds"),
    [
        ((), False),
        ((PROVED,), True),
        ((ENCLOSED, OPEN), False),
        ((PROVED, ENCLOSED, OPEN), True),
        ((PROVED, REFUTED), False),
    ],
)
def test_a_record_holds_when_something_is_proved_and_nothing_refuted(
    checks: tuple[Check, ...], *, holds: bool
) -> None:
    assert VerificationRecord(checks).holds is holds


def test_the_refuted_checks_keep_their_order() -> None:
    second = Check("e", "refuted", "row 3")
    assert VerificationRecord((REFUTED, PROVED, second)).refuted == (REFUTED, second)
