"""Eigenvalues and named roots are proved from the polynomial, not from a list of roots."""

from __future__ import annotations

from dataclasses import replace

import pytest
from flint import acb, arb, ctx
from hypothesis import given
from hypothesis import strategies as st

import closedform
from closedform.algebra.field import BaseField
from closedform.algebra.roots import enclosed_roots
from closedform.response.names import Radical
from closedform.response.response import Response
from closedform.verification.eigenvalues import (
    NamedValues,
    certified_discs,
    eigenvalue_check,
    name_check,
)
from closedform.verification.record import Check
from tests.response.systems import KINDS, response_to
from tests.verification.tampering import rewritten

NAMED = [kind for kind in KINDS if kind.startswith("named")]
RATIONALS = BaseField()


def eigenvalues_of(response: Response) -> Check:
    return eigenvalue_check(response, NamedValues(response.closed_forms.constants))


def with_roots(*roots: int) -> object:
    p = RATIONALS.polynomial([RATIONALS.scalar(1)])
    for root in roots:
        p = p * RATIONALS.polynomial([RATIONALS.scalar(1), RATIONALS.scalar(-root)])
    return p


@given(
    st.lists(st.integers(-20, 20), min_size=1, max_size=6, unique=True),
    st.lists(st.integers(-9, 9), min_size=12, max_size=12),
)
def test_each_disc_holds_its_root(roots: list[int], shifts: list[int]) -> None:
    """Centres a little off the roots, in both directions."""
    with ctx.workprec(200):
        near = [
            acb(arb(z) + arb(a) / 10**6, arb(b) / 10**6)
            for z, a, b in zip(roots, shifts, shifts[6:], strict=False)
        ]
        discs = certified_discs(RATIONALS, with_roots(*roots), near)
        assert discs is not None
        for k, disc in enumerate(discs):
            assert [i for i, z in enumerate(roots) if disc.contains(acb(z))] == [k]


@pytest.mark.parametrize(
    ("roots", "near"),
    [((1, 1), (1, 2)), ((1, 2), (1, 1)), ((1, 2, 3), (1, 2)), ((0, 100), (300, 301))],
)
def test_nothing_is_certified_that_is_not_isolated(
    roots: tuple[int, ...], near: tuple[int, ...]
) -> None:
    with ctx.workprec(200):
        assert certified_discs(RATIONALS, with_roots(*roots), list(map(acb, near))) is None


@pytest.mark.parametrize("kind", KINDS)
def test_the_eigenvalues_of_each_kind_are_enclosed(kind: str) -> None:
    assert eigenvalues_of(response_to(kind)).outcome == "enclosed"


@pytest.mark.parametrize("kind", NAMED)
def test_a_wrong_list_of_roots_does_not_pass(kind: str, monkeypatch: pytest.MonkeyPatch) -> None:
    """The names' values come from the algebra's roots; a shift of 10^-25 is noticed."""

    def shifted(base: BaseField, p: object) -> tuple[acb, ...]:
        return tuple(z + acb(arb(10) ** -25) for z in enclosed_roots(base, p))

    monkeypatch.setattr("closedform.response.names.enclosed_roots", shifted)
    check = eigenvalues_of(response_to(kind))
    assert check.outcome == "refuted"
    assert check.how.endswith("is no root of its factor")


@pytest.mark.parametrize("kind", ["even quartic", "named quartic"])
def test_a_mode_said_twice_is_named_as_such(kind: str) -> None:
    response = response_to(kind)
    (modes,) = response.closed_forms.modes
    last = modes[-1]
    doubled = tuple(last if mode.kind == last.kind else mode for mode in modes)
    if doubled == modes:
        doubled = (*modes[:-1], modes[0])
    check = eigenvalues_of(rewritten(response, modes=(doubled,)))
    assert check.outcome == "refuted"
    assert check.how.startswith("some eigenvalues are missing, ")


@pytest.mark.parametrize("kind", NAMED)
def test_the_roots_that_names_stand_for_are_counted(
    kind: str, monkeypatch: pytest.MonkeyPatch
) -> None:
    response = response_to(kind)
    assert name_check(response).outcome == "enclosed"

    def backwards(base: BaseField, p: object) -> tuple[acb, ...]:
        return enclosed_roots(base, p)[::-1]

    monkeypatch.setattr("closedform.verification.eigenvalues.enclosed_roots", backwards)
    check = name_check(response)
    assert check.outcome == "refuted"
    assert check.how.endswith(": roots are counted out of order")


@pytest.mark.parametrize("kind", NAMED)
def test_a_name_of_no_root_is_refuted(kind: str) -> None:
    response = response_to(kind)
    first, *rest = response.closed_forms.constants
    definition = first.definition
    assert not isinstance(definition, Radical)
    for which in (0, definition.polynomial.degree() + 1):
        other = replace(first, definition=replace(definition, which=which))
        check = name_check(rewritten(response, constants=(other, *rest)))
        assert (check.outcome, check.how) == ("refuted", f"{first.name}: there is no such root")
    foreign = replace(
        definition,
        polynomial=definition.polynomial
        + definition.polynomial.one(definition.polynomial.lev, definition.polynomial.dom),
    )
    check = name_check(rewritten(response, constants=(replace(first, definition=foreign), *rest)))
    assert check.how == f"{first.name}: defined by a polynomial that is no factor"


def test_undamped_modes_are_counted_by_their_line_of_symmetry() -> None:
    """All real parts are equal, which no precision tells."""
    stiffness = [[-2, 1, 0], [1, -2, 1], [0, 1, -1]]
    unit = [[0, 0, 0, *(int(i == k) for k in range(3))] for i in range(3)]
    rows = [*unit, *([*row, 0, 0, 0] for row in stiffness)]
    response = closedform.respond(closedform.system(rows, initial=[1] * 6))
    assert response.closed_forms.constants
    assert name_check(response).outcome == "enclosed"
