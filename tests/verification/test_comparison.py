"""Numbers are told apart at any precision, and called equal only when both are settled."""

from __future__ import annotations

from collections.abc import Callable, Sequence
from fractions import Fraction

import pytest
from flint import arb, ctx

import closedform
from closedform.notation.expression import Number, Product
from closedform.response.response import Response
from closedform.verification import Check, verify
from closedform.verification.comparison import (
    LIMIT_BITS,
    START_BITS,
    Finding,
    Pair,
    check_of,
    compared,
    is_narrow,
)
from closedform.verification.record import Outcome
from tests.verification.tampering import with_formula, with_transition_entry


def one_pair(evaluate: Callable[[], Pair]) -> tuple[Finding, list[int]]:
    """What came of comparing one pair, and the precisions that it took."""
    used: list[int] = []

    def listed(names: Sequence[str]) -> list[Pair]:
        assert names == ["it"]
        used.append(ctx.prec)
        return [evaluate()]

    return compared(["it"], listed, where=" here"), used


def test_equal_numbers_agree_at_once() -> None:
    found, used = one_pair(lambda: (arb(2).sqrt(), arb(2).sqrt()))
    assert (found, used) == (Finding("enclosed"), [START_BITS])


def test_different_numbers_are_told_apart_at_once() -> None:
    found, used = one_pair(lambda: (arb(2).sqrt(), arb(3).sqrt()))
    assert (found, used) == (Finding("refuted", "it differs here"), [START_BITS])


def test_precision_doubles_until_cancellation_is_overcome() -> None:
    large = arb(2) ** 1500
    found, used = one_pair(lambda: (arb(2).sqrt() + large - large, arb(2).sqrt()))
    assert found == Finding("enclosed")
    assert used == [256, 512, 1024, 2048]


def test_a_difference_hidden_by_cancellation_is_found() -> None:
    large = arb(2) ** 1500
    found, _ = one_pair(lambda: (arb(2).sqrt() + large - large, arb(2).sqrt() + arb(2) ** -90))
    assert found.outcome == "refuted"


def test_what_is_not_settled_at_the_limit_is_left_open() -> None:
    found, used = one_pair(lambda: (arb(0, 1), arb(0)))
    how = f"it is not settled here by {LIMIT_BITS} bits: it is known to ± 1.0"
    assert found == Finding("not attempted", how)
    assert used[-1] == LIMIT_BITS


def test_a_number_without_a_value_is_refuted_but_a_reference_without_one_is_not() -> None:
    bad = arb(-1).sqrt()
    found, _ = one_pair(lambda: (bad, arb(0)))
    assert found == Finding("refuted", f"it has no value here, worked to {LIMIT_BITS} bits")
    found, _ = one_pair(lambda: (arb(0), bad))
    assert found.outcome == "not attempted"


@pytest.mark.parametrize(
    ("ball", "narrow"),
    [
        (arb(1, 1e-31), True),
        (arb(1, 1e-29), False),
        (arb(1e40, 1e9), True),
        (arb(1e-40, 1e-71), True),
        (arb(1e-40, 1e-50), False),
        (arb(0, 1e-61), True),
        (arb(0, 1e-59), False),
        (arb(0), True),
        (arb(-1).sqrt(), False),
    ],
)
def test_narrow_is_thirty_digits_or_sixty_places(ball: arb, *, narrow: bool) -> None:
    assert is_narrow(ball) is narrow


def test_without_places_only_significant_digits_count() -> None:
    assert not is_narrow(arb(0, 1e-300), places=None)
    assert is_narrow(arb(1e-100, 1e-131), places=None)


def test_a_refutation_counts_even_after_something_was_left_open() -> None:
    wide, apart = Finding("not attempted", "wide"), Finding("refuted", "apart")
    equal = Finding("enclosed")
    assert check_of("x", [equal, wide, apart], "fine") == Check("x", "refuted", "apart")
    assert check_of("x", [equal, wide, equal], "fine") == Check("x", "not attempted", "wide")
    assert check_of("x", [equal, equal], "fine") == Check("x", "enclosed", "fine")


@pytest.mark.parametrize("outcome", ["enclosed", "refuted", "not attempted"])
def test_a_check_is_essential_unless_it_says_otherwise(outcome: Outcome) -> None:
    findings = [Finding(outcome, "so")]
    assert check_of("x", findings, "so") == Check("x", outcome, "so", essential=True)
    spared = check_of("x", findings, "so", essential=False)
    assert spared == Check("x", outcome, "so", essential=False)


# --- eigenvalues so close that a fixed precision does not tell them apart --------------------


def gap(size: Fraction) -> list[list[object]]:
    return [[-1, 1], [0, -1 - size]]


def three_close(size: Fraction) -> list[list[object]]:
    return [[-1, 1, 0], [0, -1 - size, 1], [0, 0, -1 + size]]


def two_close_roots(a: int) -> list[list[object]]:
    """The companion matrix of x^4 - 2 (a x - 1)^2: two roots near 1/a, a^-3 apart."""
    return [[0, 1, 0, 0], [0, 0, 1, 0], [0, 0, 0, 1], [2, -4 * a, 2 * a * a, 0]]


def three_close_frequencies(e: Fraction) -> list[list[object]]:
    """Undamped: x'' = -K x with K near the unit matrix, and eigenvalues about e apart."""
    unit = [[0, 0, 0, *(int(i == k) for k in range(3))] for i in range(3)]
    stiffness = [[1, e, 0], [e, 1, e], [0, e, 1 + e]]
    return [*unit, *([*(-entry for entry in row), 0, 0, 0] for row in stiffness)]


CLOSE = {
    "two 1e-40 apart": gap(Fraction(1, 10**40)),
    "two 1e-60 apart": gap(Fraction(1, 10**60)),
    "three 1e-20 apart": three_close(Fraction(1, 10**20)),
    "two of four 1e-90 apart": two_close_roots(10**30),
    "two of four 1e-150 apart": two_close_roots(10**50),
    "three frequencies 1e-40 apart": three_close_frequencies(Fraction(1, 10**40)),
}


def respond(rows: list[list[object]]) -> Response:
    return closedform.respond(closedform.system(rows, initial=[1] * len(rows)))


@pytest.mark.parametrize("name", CLOSE)
def test_close_eigenvalues_raise_no_false_alarm(name: str) -> None:
    record = verify(respond(CLOSE[name]))
    assert record.holds
    assert {check.outcome for check in record.checks} == {"proved", "enclosed"}


@pytest.mark.parametrize("name", ["two 1e-40 apart", "two 1e-60 apart", "three 1e-20 apart"])
def test_a_wrong_formula_over_close_eigenvalues_is_refuted(name: str) -> None:
    response = respond(CLOSE[name])
    three = Number(Fraction(3))
    right = response.closed_forms.transition[0][1]
    wrong = with_transition_entry(response, 0, 1, Product((three, right)))
    (check,) = verify(wrong).refuted
    assert check.how.startswith("entry (1, 2) of e^(At) differs at time ")


@pytest.mark.parametrize("places", [20, 40, 59])
def test_small_amounts_are_compared_too(places: int) -> None:
    response = respond([[-1, Fraction(1, 10**places)], [0, -2]])
    right = response.closed_forms.transition[0][1]
    for wrong in (Product((Number(Fraction(3)), right)), Number(Fraction(0))):
        assert not verify(with_transition_entry(response, 0, 1, wrong)).holds
    none = with_formula(response, "solution", 0, Number(Fraction(0)))
    assert not verify(none).holds
