"""The exact identities of a branch: rational functions of the parameters that are zero.

An identity that holds over Q(parameters) holds at every point at which no denominator in it
vanishes and the roots of each factor of degree 3 and more stay apart; that these points are
all of the branch's is what its exceptional set is for.  On a branch with a relation that is
kept, zero means divisible by the relation.
"""

from __future__ import annotations

from collections.abc import Callable, Iterator, Sequence
from dataclasses import dataclass, replace

from closedform.algebra.branches import Branch
from closedform.algebra.canonical import JordanForm, jordan_form
from closedform.algebra.exponential import ExponentialMatrix
from closedform.algebra.field import FieldMatrix, Scalar
from closedform.algebra.parameter_field import ParameterField
from closedform.algebra.parametric_spectrum import vanishes_under
from closedform.algebra.spectrum import Spectrum
from closedform.response.parametric.case import Case
from closedform.response.parametric.response import ParametricResponse
from closedform.verification.chains import chain_check, routes_check
from closedform.verification.identities import (
    characteristic_polynomial_check,
    determinant_check,
    differential_equation_check,
    initial_value_check,
)
from closedform.verification.record import Check
from closedform.verification.residuals import first_nonzero, first_nonzero_over_roots

__all__ = ["branch_checks", "state_checks", "vanishes_on"]


@dataclass(frozen=True)
class _SolvedBranch:
    """A branch with its chains, for the checks that numeric models have too."""

    field: ParameterField
    matrix: FieldMatrix
    spectrum: Spectrum
    jordan: JordanForm
    exponential: ExponentialMatrix


def branch_checks(response: ParametricResponse, branch: Branch) -> tuple[Check, ...]:
    """Return what is proved of e^(At) on a branch, by arithmetic in Q(parameters)."""
    field, a = response.model.field, branch.matrix

    def vanishes(element: Scalar) -> bool:
        return vanishes_on(branch, element)

    shared = (
        _matrix_check(response, branch),
        differential_equation_check(
            "d/dt e^(At) - A e^(At) = 0", branch.exponential, a, vanishes=vanishes
        ),
        initial_value_check(
            "e^(A0) = I", branch.exponential, field.identity(a.shape[0]), vanishes=vanishes
        ),
    )
    if shared[0].outcome == "refuted":  # another matrix has other chains
        return shared
    if branch.relation is not None:
        return (*shared, _factors_check(response, branch))
    jordan = jordan_form(field, a, branch.spectrum)
    solved = _SolvedBranch(field, a, branch.spectrum, jordan, branch.exponential)
    return (
        *shared,
        characteristic_polynomial_check(solved),
        _over_parameters(chain_check(solved), "eigenvectors and chains"),
        _over_parameters(routes_check(solved), "two routes"),
        determinant_check(solved),
    )


def _over_parameters(check: Check, item: str) -> Check:
    """Say that a check about chains is one over the field, not at every single point."""
    if check.outcome != "proved":
        return replace(check, item=item)
    return Check(
        item,
        "proved",
        f"{check.how}; over the field of rational functions, while at single values of the "
        "parameters a chain may come apart, and the transition matrix still holds",
    )


def state_checks(response: ParametricResponse, case: Case) -> Iterator[Check]:
    """Yield what is proved of the solution of a case and of its outputs."""
    model, field, branch = response.model, response.model.field, case.branch

    def vanishes(element: Scalar) -> bool:
        return vanishes_on(branch, element)

    initial = _stated(field, [[x] for x in model.initial], branch)
    yield differential_equation_check("x' - A x = 0", case.state, branch.matrix, vanishes=vanishes)
    yield initial_value_check("x(0) = x0", case.state, initial, vanishes=vanishes)
    yield _same("x = e^(At) x0", case.state, branch.exponential.times(initial), vanishes)
    if case.output is not None or model.outputs:
        weights = _stated(field, [o.weights for o in model.outputs], branch)
        yield _same("y = C x", case.output, case.state.after(weights), vanishes)


def vanishes_on(branch: Branch, element: Scalar) -> bool:
    """Whether an element is zero, or zero wherever the relation of the branch holds."""
    return vanishes_under(element, branch.relation)


def _stated(field: ParameterField, rows: Sequence[Sequence[Scalar]], branch: Branch) -> FieldMatrix:
    """A matrix as the model states it, with the equations of the branch put in."""
    given = [[field.substituted(e, branch.values) for e in row] for row in rows]
    return field.matrix(given)


def _matrix_check(response: ParametricResponse, branch: Branch) -> Check:
    """A is that of the model, with the equations of the branch put in."""
    item = "A as stated"
    stated = _stated(response.model.field, response.model.matrix, branch)
    fault = first_nonzero(branch.matrix - stated)
    if fault is not None:
        return Check(item, "refuted", f"entry {fault} of the matrix is not the one stated")
    put = "with the equations of the case put in: " if branch.values else ""
    return Check(item, "proved", f"compared with the model, {put}every entry is the one stated")


def _factors_check(response: ParametricResponse, branch: Branch) -> Check:
    """The factors multiply to the characteristic polynomial wherever the relation holds."""
    item = "p(A) = 0"
    field, a = response.model.field, branch.matrix
    given = field.polynomial(a.charpoly())
    difference = given - branch.spectrum.characteristic_polynomial
    if not all(vanishes_on(branch, c) for c in difference.to_list()):
        return Check(item, "refuted", "the factors do not multiply to the polynomial")
    return Check(
        item,
        "proved",
        "the factors were multiplied out: the characteristic polynomial, up to multiples of "
        "the relation that holds in this case",
    )


def _same(
    item: str,
    left: ExponentialMatrix | None,
    right: ExponentialMatrix,
    vanishes: Callable[[Scalar], bool],
) -> Check:
    """Two functions agree coefficient by coefficient."""
    if left is None or left.shape != right.shape:
        return Check(item, "refuted", "there are more of them, or fewer")
    for one, other in zip(left.terms, right.terms, strict=True):
        if len(one.residues) != len(other.residues):
            return Check(item, "refuted", "a power of time is missing, or there is one too many")
        for found, expected in zip(one.residues, other.residues, strict=True):
            fault = first_nonzero_over_roots(found - expected, vanishes)
            if fault is not None:
                return Check(item, "refuted", f"row {fault[0]} differs")
    return Check(item, "proved", "all coefficients agree as functions of the parameters")
