"""A record holds when something was proved, nothing refuted, and nothing essential left open."""

from __future__ import annotations

import pickle

import pytest

from closedform.errors import InputError, RefutedError
from closedform.verification.record import Check, UnprovedError, VerificationRecord

PROVED, ENCLOSED = Check("a", "proved", "by hand"), Check("b", "enclosed", "in balls")
REFUTED, OPEN = Check("c", "refuted", "entry (1, 2)"), Check("d", "not attempted", "too wide")
SPARED = Check("e", "not attempted", "too large", essential=False)
UNEQUAL = Check("f", "refuted", "row 2", essential=False)


@pytest.mark.parametrize(
    ("checks", "holds"),
    [
        ((), False),
        ((PROVED,), True),
        ((ENCLOSED, SPARED), False),
        ((PROVED, ENCLOSED, OPEN), False),
        ((PROVED, ENCLOSED, SPARED), True),
        ((PROVED, SPARED, OPEN), False),
        ((PROVED, REFUTED), False),
        ((PROVED, UNEQUAL), False),
    ],
)
def test_a_record_holds_when_something_is_proved_and_nothing_refuted_or_left_open(
    checks: tuple[Check, ...], *, holds: bool
) -> None:
    assert VerificationRecord(checks).holds is holds


def test_the_refuted_checks_keep_their_order() -> None:
    second = Check("e", "refuted", "row 3")
    assert VerificationRecord((REFUTED, PROVED, second)).refuted == (REFUTED, second)


def test_only_essential_checks_count_as_left_open() -> None:
    second = Check("g", "not attempted", "not settled")
    record = VerificationRecord((OPEN, PROVED, SPARED, REFUTED, second))
    assert record.left_open == (OPEN, second)


def test_the_error_names_the_model_the_open_checks_and_what_to_do() -> None:
    assert str(UnprovedError("bench", (OPEN,))) == (
        "bench: the result could not be proved, so no write-up is issued; nothing in it was found "
        "wrong. Left open: d: too wide. As a rule the numbers of the model or its instants are "
        "too extreme for this proof, or its parameters leave too much open: ask for less extreme "
        "numbers, change the time unit of the model, or narrow the parameters by assumptions and "
        "conditions, or give some of them as numbers."
    )


def test_the_error_tells_of_a_few_open_checks_and_keeps_all() -> None:
    checks = tuple(Check(f"entry {k}", "not attempted", "too wide") for k in range(7))
    error = UnprovedError("bench", checks)
    assert "entry 2: too wide; and 4 more. As" in str(error)
    assert "entry 3" not in str(error)
    assert error.left_open == checks


def test_what_is_not_proved_is_no_refutation_and_the_error_survives_pickling() -> None:
    error = UnprovedError("bench", (OPEN,))
    assert isinstance(error, InputError)
    assert not isinstance(error, RefutedError)
    copy = pickle.loads(pickle.dumps(error))  # noqa: S301  our own bytes
    assert (type(copy), str(copy), vars(copy)) == (UnprovedError, str(error), vars(error))
