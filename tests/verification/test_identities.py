"""What the proofs establish, shown where only one of them can tell."""

from __future__ import annotations

from dataclasses import replace

import pytest

import closedform
from closedform.response.response import Response
from closedform.verification.chains import chain_check, routes_check
from closedform.verification.identities import (
    characteristic_polynomial_check,
    determinant_check,
    differential_equation_check,
    initial_value_check,
)
from closedform.verification.verify import prove
from tests.response.systems import KINDS, response_to
from tests.verification.tampering import every_residue, with_term


@pytest.mark.parametrize("kind", KINDS)
def test_every_identity_of_an_untouched_response_is_proved(kind: str) -> None:
    checks = prove(response_to(kind))
    assert {check.outcome for check in checks} == {"proved"}
    assert len({check.item for check in checks}) == len(checks)


def test_a_constant_multiple_of_the_exponential_solves_the_equation_only() -> None:
    response = response_to("circular")
    double = every_residue(response.exponential, lambda r: r + r)
    assert differential_equation_check("F", double, response.matrix).outcome == "proved"
    check = initial_value_check("F(0)", double, response.field.identity(2))
    assert (check.outcome, check.how) == ("refuted", "entry (1, 1) differs at time zero")


def test_the_exponential_of_another_matrix_starts_right_and_fails_the_equation() -> None:
    one, other = response_to("circular"), response_to("hyperbolic")
    assert initial_value_check("F(0)", other.exponential, one.field.identity(2)).outcome == "proved"
    check = differential_equation_check("F", other.exponential, one.matrix)
    assert check.how.startswith("does not vanish in entry (2, 1), the coefficient of e^(λt), λ any")


def test_a_polynomial_with_the_right_trace_that_a_does_not_satisfy_is_refuted() -> None:
    one = response_to("nilpotent")
    other = closedform.respond(
        closedform.system([[0, 1, 0], [0, 0, 1], [1, 0, 0]], initial=[1, 2, 3])
    )
    check = characteristic_polynomial_check(replace(one, spectrum=other.spectrum))
    assert (check.outcome, check.how) == ("refuted", "entry (1, 1) of p(A) is not zero")


def test_a_multiplicity_shared_out_wrongly_is_refuted() -> None:
    """diag(-1, -1, -2) has the projectors of diag(-1, -2, -2) the other way about."""
    response = closedform.respond(
        closedform.system([[-1, 0, 0], [0, -1, 0], [0, 0, -2]], initial=[1, 1, 1])
    )
    first, second = response.exponential.terms
    swapped = with_term(response.exponential, 0, replace(first, residues=second.residues))
    check = determinant_check(replace(response, exponential=swapped))
    assert (check.outcome, check.how) == ("refuted", "a spectral projector has the wrong trace")


def off_diagonal() -> Response:
    """diag(-1, -2), and e^(-t) added in a place that only the vector of -2 can see."""
    return closedform.respond(closedform.system([[-1, 0], [0, -2]], initial=[1, 1]))


def test_the_two_routes_are_compared_on_every_basis_vector_for_every_eigenvalue() -> None:
    response = off_diagonal()
    first = response.exponential.terms[0]
    (residue,) = first.residues
    entries = response.field.matrix(
        [[residue.coefficients[0][0, 0].element, response.field.domain.one], [0, 0]]
    )
    wrong = replace(first, residues=(replace(residue, coefficients=(entries,)),))
    spoiled = replace(response, exponential=with_term(response.exponential, 0, wrong))
    assert routes_check(response).outcome == "proved"
    assert routes_check(spoiled).outcome == "refuted"


def two_equal_blocks() -> Response:
    rows = [[2, 1, 0, 0], [0, 2, 0, 0], [0, 0, 2, 1], [0, 0, 0, 2]]
    return closedform.respond(closedform.system(rows, initial=[1, 2, 3, 4]))


@pytest.mark.parametrize("blocks", [(2, 1, 1), (3, 1), (4,), (1, 1, 2)])
def test_jordan_blocks_of_other_sizes_than_the_chains_are_refuted(blocks: tuple[int, ...]) -> None:
    response = two_equal_blocks()
    assert chain_check(response).outcome == "proved"
    (factor,) = response.spectrum.factors
    wrong = replace(factor, blocks=blocks)
    check = chain_check(replace(response, spectrum=replace(response.spectrum, factors=(wrong,))))
    assert (check.outcome, check.how) == ("refuted", "factor 1 has Jordan blocks of other sizes")
    term = replace(response.exponential.terms[0], factor=wrong)
    check = chain_check(replace(response, exponential=with_term(response.exponential, 0, term)))
    assert check.outcome == "refuted"


SHARED = "an eigenvalue is a double root of its factor, or a root of two factors"


def test_a_factor_with_a_double_root_is_refuted() -> None:
    """(lambda + 1)^2 taken for irreducible: A satisfies it, and the trace is right."""
    response = closedform.respond(closedform.system([[-1, 0], [0, -1]], initial=[1, 1]))
    (factor,) = response.spectrum.factors
    wrong = replace(factor, p=factor.p**2, blocks=(1,))
    spectrum = replace(response.spectrum, factors=(wrong,))
    check = characteristic_polynomial_check(replace(response, spectrum=spectrum))
    assert (check.outcome, check.how) == ("refuted", SHARED)


def test_two_factors_with_a_common_root_are_refuted() -> None:
    response = closedform.respond(closedform.system([[-1, 0], [0, -1]], initial=[1, 1]))
    (factor,) = response.spectrum.factors
    half = replace(factor, blocks=(1,))
    spectrum = replace(response.spectrum, factors=(half, half))
    check = characteristic_polynomial_check(replace(response, spectrum=spectrum))
    assert (check.outcome, check.how) == ("refuted", SHARED)
    (term,) = response.exponential.terms
    twice = replace(response.exponential, terms=(term, term))
    check = differential_equation_check("F", twice, response.matrix)
    assert (check.outcome, check.how) == ("refuted", SHARED)
