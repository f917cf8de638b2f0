"""The exact identities: each is a finite computation in a field, never a simplification.

With F(t) = sum of e^(lambda t)/p'(lambda) t^j/j! R_j(lambda), the derivative F' has the
coefficients lambda R_j + R_(j+1).  So F' = A F follows from (A - lambda) R_j = R_(j+1)
with R_nu = 0, for every factor p and every j < nu; and F(0) is a sum of traces.
"""

from __future__ import annotations

from collections.abc import Sequence
from functools import reduce
from itertools import combinations

from closedform.algebra.coprime import are_coprime, is_squarefree
from closedform.algebra.exponential import ExponentialMatrix
from closedform.algebra.field import FieldMatrix, Polynomial
from closedform.algebra.spectrum import polynomial_of_matrix
from closedform.response.response import Response
from closedform.verification.record import Check
from closedform.verification.residuals import (
    Solved,
    Vanishes,
    first_nonzero,
    first_nonzero_over_roots,
    is_zero_element,
    monomial,
)

__all__ = [
    "characteristic_polynomial_check",
    "determinant_check",
    "differential_equation_check",
    "initial_value_check",
    "model_check",
    "output_check",
    "state_check",
]


def model_check(response: Response) -> Check:
    """A and x0 are those of the model."""
    item = "A and x0 as stated"
    field, model = response.field, response.model
    stated = field.matrix([[field.scalar(entry) for entry in row] for row in model.matrix])
    start = field.matrix([[field.scalar(entry)] for entry in model.initial])
    for name, found, expected in (
        ("the matrix", response.matrix, stated),
        ("the initial state", response.initial, start),
    ):
        fault = first_nonzero(found - expected)
        if fault is not None:
            return Check(item, "refuted", f"entry {fault} of {name} is not the one stated")
    return Check(item, "proved", "compared with the model: every number is the one stated")


def characteristic_polynomial_check(response: Solved) -> Check:
    """The factors multiply to c, c(A) = 0 (Cayley-Hamilton), and c has the trace of A."""
    item = "p(A) = 0"
    spectrum, field = response.spectrum, response.field
    product = reduce(lambda f, g: f * g, (f.p**f.multiplicity for f in spectrum.factors))
    if product != spectrum.characteristic_polynomial:
        return Check(item, "refuted", "the factors do not multiply to the polynomial")
    n = response.matrix.shape[0]
    if -product.nth(n - 1) != _trace(response.matrix):
        return Check(item, "refuted", f"the coefficient of lambda^{n - 1} is not -tr A")
    value = polynomial_of_matrix(field, product, response.matrix)
    fault = first_nonzero(value)
    if fault is not None:
        return Check(item, "refuted", f"entry {fault} of p(A) is not zero")
    if _share_a_root([f.p for f in spectrum.factors]):
        return Check(item, "refuted", _SHARED)
    return Check(
        item,
        "proved",
        "the factors were multiplied out and A was put in: the zero matrix; the eigenvalues add "
        "up to the trace of A; no factor has a double root or shares one with another",
    )


def differential_equation_check(
    item: str, function: ExponentialMatrix, a: FieldMatrix, *, vanishes: Vanishes = is_zero_element
) -> Check:
    """F' = A F, by comparing the coefficients of every e^(lambda t) t^j/j!.

    That these functions are independent, and that p'(lambda) may divide, needs roots that
    are simple and all different, which is decided by greatest common divisors.
    """
    compared = 0
    for term in function.terms:
        residues = term.residues
        for j, residue in enumerate(residues):
            left = residue.shifted(a)
            if residue.modulus != term.factor.p:
                return Check(item, "refuted", "a coefficient belongs to other eigenvalues")
            if j + 1 < len(residues):
                left = left - residues[j + 1]
            fault = first_nonzero_over_roots(left, vanishes)
            if fault is not None:
                place = f"entry {fault}, the coefficient of {monomial(term.factor.degree, j)}"
                return Check(item, "refuted", f"does not vanish in {place}")
            compared += term.factor.degree
    if _share_a_root([term.factor.p for term in function.terms]):
        return Check(item, "refuted", _SHARED)
    return Check(
        item,
        "proved",
        f"put in and sorted by the functions of time, {compared} in number and all different: "
        "every coefficient is zero",
    )


def initial_value_check(
    item: str,
    function: ExponentialMatrix,
    expected: FieldMatrix,
    *,
    vanishes: Vanishes = is_zero_element,
) -> Check:
    """F(0) equals the expected matrix."""
    fault = first_nonzero(function.at_zero() - expected, vanishes)
    if fault is not None:
        return Check(item, "refuted", f"entry {fault} differs at time zero")
    return Check(item, "proved", "time zero was put in: every entry is the one given")


def output_check(response: Response) -> Check:
    """The outputs are the stated combinations of the states, coefficient by coefficient."""
    item = "y = C x"
    field, model = response.field, response.model
    if response.output is None or response.output.shape[0] != len(model.outputs):
        return Check(item, "refuted", "the outputs are not those that the model asks for")
    weights = field.matrix([[field.scalar(w) for w in o.weights] for o in model.outputs])
    fault = _first_difference(response.output, response.state.after(weights))
    if isinstance(fault, int):
        return Check(item, "refuted", f"output {fault} is another combination")
    if fault is not None:
        return Check(item, "refuted", fault)
    return Check(
        item,
        "proved",
        "every coefficient of the outputs is the stated combination of those of the states",
    )


def state_check(response: Response) -> Check:
    """x(t) = e^(At) x0, coefficient by coefficient."""
    item = "x = e^(At) x0"
    fault = _first_difference(response.state, response.exponential.times(response.initial))
    if isinstance(fault, int):
        return Check(item, "refuted", f"state {fault} differs")
    if fault is not None:
        return Check(item, "refuted", fault)
    return Check(
        item,
        "proved",
        "the transition matrix was multiplied by the initial state: all coefficients agree",
    )


def _first_difference(left: ExponentialMatrix, right: ExponentialMatrix) -> int | str | None:
    """The row (from 1) in which a coefficient differs, or words for what cannot be compared."""
    for one, other in zip(left.terms, right.terms, strict=True):
        if len(one.residues) != len(other.residues):
            return "a power of time is missing, or there is one too many"
        for found, expected in zip(one.residues, other.residues, strict=True):
            if found.modulus != expected.modulus:
                return "a coefficient belongs to other eigenvalues"
            fault = first_nonzero_over_roots(found - expected)
            if fault is not None:
                return fault[0]
    return None


def determinant_check(response: Solved) -> Check:
    """The determinant is e^(tr(A) t), from Jacobi's formula and the traces of the projectors.

    (det F)' = tr(F' F^(-1)) det F = tr(A) det F, once F' = A F is proved; and the trace of
    each spectral projector counts the eigenvalue, so that their sum weighted is tr A.
    Source:  F. R. Gantmacher, The Theory of Matrices, 1959, volume 2, chapter XIV.
    """
    item = "det e^(At) = e^(tr(A) t)"
    field = response.field
    total = field.domain.zero
    for term in response.exponential.terms:
        diagonal = [term.residues[0].entry(i, i) for i in range(response.matrix.shape[0])]
        trace = reduce(lambda f, g: f + g, diagonal)
        count = field.domain.convert(term.factor.multiplicity)
        if (trace - term.factor.p.diff().mul_ground(count)).rem(term.factor.p):
            return Check(item, "refuted", "a spectral projector has the wrong trace")
        total -= count * term.factor.p.nth(term.factor.degree - 1)
    if total != _trace(response.matrix):
        return Check(item, "refuted", "the eigenvalues do not add up to tr A")
    return Check(
        item,
        "proved",
        "the traces of the spectral projectors are the multiplicities, and the eigenvalues so "
        "counted add up to the trace of A; Jacobi's formula gives the determinant",
    )


_SHARED = "an eigenvalue is a double root of its factor, or a root of two factors"


def _share_a_root(polynomials: Sequence[Polynomial]) -> bool:
    """Whether a polynomial is not squarefree, or two of them are not coprime."""
    squarefree = all(map(is_squarefree, polynomials))
    return not squarefree or any(not are_coprime(f, g) for f, g in combinations(polynomials, 2))


def _trace(matrix: FieldMatrix) -> object:
    return sum((matrix[i, i].element for i in range(matrix.shape[0])), start=matrix.domain.zero)
