"""Responses at the edges: one state, no motion, and the sizes at which writing changes."""

from __future__ import annotations

from fractions import Fraction
from typing import Any

import pytest

import closedform
from closedform.algebra.surds import SurdSum
from closedform.notation.plain import plain
from closedform.response.response import LARGEST_WRITTEN_OUT, Response
from closedform.verification import verify


def respond(rows: Any, **fields: Any) -> Response:
    fields.setdefault("initial", [1] * len(rows))
    return closedform.respond(closedform.system(rows, **fields))


def chain(n: int) -> list[list[int]]:
    """n compartments in a row, with the rates 1, …, n."""
    return [[-(k + 1) * (i == k) + k + (i == k + 1) - k for k in range(n)] for i in range(n)]


def test_one_state() -> None:
    response = respond([["-1/3"]], initial=["sqrt(2)"], outputs={"y": "3*x1"})
    assert [[plain(f) for f in row] for row in response.transition] == [["exp(-t/3)"]]
    assert [plain(f) for f in response.solution] == ["sqrt(2)*exp(-t/3)"]
    assert [plain(f) for f in response.outputs] == ["3*sqrt(2)*exp(-t/3)"]
    assert verify(response).holds


def test_no_motion() -> None:
    response = respond([[0, 0], [0, 0]], initial=[2, "-1/3"])
    assert [[plain(f) for f in row] for row in response.transition] == [["1", "0"], ["0", "1"]]
    assert [plain(f) for f in response.solution] == ["2", "-1/3"]
    (factor,) = response.spectrum.factors
    assert factor.blocks == (1, 1)
    assert verify(response).holds


def test_from_rest_nothing_moves() -> None:
    response = respond([[0, 1], [-5, -2]], initial=[0, 0], outputs={"y": "x1 + x2"})
    assert [plain(f) for f in response.solution] == ["0", "0"]
    assert [plain(f) for f in response.outputs] == ["0"]
    assert verify(response).holds


@pytest.mark.parametrize("n", [2, 5, 8])
def test_a_nilpotent_chain_of_integrators(n: int) -> None:
    response = respond([[int(k == i + 1) for k in range(n)] for i in range(n)])
    first = [plain(f) for f in response.transition[0]]
    assert first[:2] == ["1", "t"]
    assert response.spectrum.factors[0].blocks == (n,)
    assert verify(response).holds


@pytest.mark.parametrize("n", [LARGEST_WRITTEN_OUT, LARGEST_WRITTEN_OUT + 1])
def test_beyond_eight_states_the_exponential_is_not_written_out(n: int) -> None:
    response = respond(chain(n), outputs={"last": f"x{n}"})
    forms = response.closed_forms
    assert len(forms.solution) == n
    assert len(forms.outputs) == 1
    if n <= LARGEST_WRITTEN_OUT:
        assert [len(row) for row in forms.transition] == [n] * n
        assert response.has_chains_in_print
    else:
        assert forms.transition == ()
        assert forms.fronted_transition == (None, ())
        assert not response.has_chains_in_print
    assert verify(response).holds


def test_outputs_are_none_only_without_being_asked_for() -> None:
    assert respond([[1]]).output is None
    assert respond([[1]]).outputs == ()
    assert respond([[1]], outputs={"y": "0*x1"}).output is not None


def test_another_name_for_time() -> None:
    response = respond([[0, 1], [-4, 0]], initial=[1, 0], time="tau")
    assert [plain(f) for f in response.solution] == ["cos(2*tau)", "-2*sin(2*tau)"]
    assert verify(response).holds


def test_surds_of_initial_values_and_weights_join_the_field() -> None:
    response = respond([[-1]], initial=["sqrt(2)"], outputs={"y": "sqrt(3)*x1"})
    assert response.field.radicands == (2, 3)
    assert response.initial.to_list() == [[response.field.scalar(SurdSum.of({2: Fraction(1)}))]]
    assert [plain(f) for f in response.outputs] == ["sqrt(6)*exp(-t)"]


def test_impulses_are_given_when_a_factor_has_degree_three_or_more() -> None:
    assert respond([[0, 1], [-5, -2]]).closed_forms.impulses == (None,)
    forms = respond([[0, 1, 0, 0], [0, 0, 1, 0], [1, 1, 0, 0], [0, 0, 0, -7]]).closed_forms
    assert len(forms.impulses) == 2
    assert all(impulse is not None for impulse in forms.impulses)
    assert "exp(-7*t)" in [plain(f) for f in forms.impulses if f is not None]


def test_the_same_model_gives_the_same_response() -> None:
    one, two = respond(chain(4)), respond(chain(4))
    assert one.closed_forms == two.closed_forms
    assert one.exponential.terms[0].residues == two.exponential.terms[0].residues
