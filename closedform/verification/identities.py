"""The exact identities: each is a finite computation in a field, never a simplification.

With F(t) = sum of e^(lambda t)/p'(lambda) t^j/j! R_j(lambda), the derivative F' has the
coefficients lambda R_j + R_(j+1).  So F' = A F follows from (A - lambda) R_j = R_(j+1)
with R_nu = 0, for every factor p and every j < nu; and F(0) is a sum of traces.
"""

from __future__ import annotations

from collections.abc import Sequence
from functools import reduce
from itertools import combinations

from closedform.algebra.exponential import ExponentialMatrix
from closedform.algebra.field import FieldMatrix, Polynomial
from closedform.algebra.root_matrix import RootMatrix
from closedform.algebra.spectrum import polynomial_of_matrix
from closedform.response.response import Response
from closedform.verification.record import Check

__all__ = [
    "chain_check",
    "characteristic_polynomial_check",
    "determinant_check",
    "differential_equation_check",
    "initial_value_check",
    "inverse_check",
    "model_check",
    "output_check",
    "routes_check",
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
        fault = _first_nonzero(found - expected)
        if fault is not None:
            return Check(item, "refuted", f"entry {fault} of {name} is not the one stated")
    return Check(item, "proved", "compared with the model: every number is the one stated")


def characteristic_polynomial_check(response: Response) -> Check:
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
    fault = _first_nonzero(value)
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


def differential_equation_check(item: str, function: ExponentialMatrix, a: FieldMatrix) -> Check:
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
            fault = _first_nonzero_over_roots(left)
            if fault is not None:
                place = f"entry {fault}, the coefficient of {_monomial(term.factor.degree, j)}"
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


def initial_value_check(item: str, function: ExponentialMatrix, expected: FieldMatrix) -> Check:
    """F(0) equals the expected matrix."""
    fault = _first_nonzero(function.at_zero() - expected)
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
            fault = _first_nonzero_over_roots(found - expected)
            if fault is not None:
                return fault[0]
    return None


def chain_check(response: Response) -> Check:
    """A P = P J with P invertible: every chain steps down under A - lambda I to zero."""
    item = "A P = P J"
    for number, chain in enumerate(response.jordan.chains, start=1):
        below: RootMatrix | None = None
        for place, vector in enumerate(chain.vectors, start=1):
            left = vector.shifted(response.matrix)
            left = left if below is None else left - below
            fault = _first_nonzero_over_roots(left)
            if fault is not None:
                return Check(item, "refuted", f"row {fault[0]} of vector {place} of chain {number}")
            below = vector
    if response.jordan.basis.rank() != response.matrix.shape[0]:
        return Check(item, "refuted", "the chains do not span the space: P is singular")
    for number, factor in enumerate(response.spectrum.factors, start=1):
        sizes = sorted(c.size for c in response.jordan.chains if c.factor.p == factor.p)
        holders = [factor, *(term.factor for term in response.exponential.terms)]
        if any(tuple(reversed(sizes)) != f.blocks for f in holders if f.p == factor.p):
            return Check(item, "refuted", f"factor {number} has Jordan blocks of other sizes")
    return Check(
        item,
        "proved",
        "every vector of every chain was multiplied by A less its eigenvalue: the vector below "
        "it, and zero for eigenvectors; the chains span the space, and their lengths are the "
        "sizes of the blocks stated",
    )


def inverse_check(response: Response) -> Check:
    """The rows of P^(-1) in print: P P^(-1) = I, as a sum over chains and their eigenvalues."""
    item = "P P^(-1) = I"
    n = response.matrix.shape[0]
    if response.jordan.basis.rank() != n:
        return Check(item, "refuted", "the chains do not span the space: P has no inverse")
    total = response.field.zeros(n, n)
    for chain, rows in zip(response.jordan.chains, response.jordan.left_chains, strict=True):
        slope = chain.factor.p.diff()
        for vector, row in zip(chain.vectors, rows, strict=True):
            total = total + (vector @ row).scaled(slope).trace_form()
    fault = _first_nonzero(total - response.field.identity(n))
    if fault is not None:
        return Check(item, "refuted", f"entry {fault} of the product is another")
    return Check(
        item, "proved", "multiplied out, chain by chain, over the eigenvalues: the unit matrix"
    )


def routes_check(response: Response) -> Check:
    """P e^(Jt) P^(-1) and the resolvent give the same e^(At), compared on a basis.

    The basis vectors A^k u of each chain have known coordinates along the chains, so
    P e^(Jt) P^(-1) A^k u is known without P^(-1).
    """
    item = "P e^(Jt) P^(-1) = e^(At)"
    column = 0
    for chain in response.jordan.chains:
        p = chain.factor.p
        terms = [term for term in response.exponential.terms if term.factor.p == p]
        others = [term for term in response.exponential.terms if term.factor.p != p]
        if len(terms) != 1:
            return Check(item, "refuted", "the two routes have different eigenvalues")
        for power in range(chain.size * chain.factor.degree):
            vector = response.jordan.basis[:, column].to_dense()
            column += 1
            along = [(c * p.diff()).rem(p) for c in chain.coordinates(power)]
            for j, residue in enumerate(terms[0].residues):
                difference = residue.before(vector)
                for i in range(chain.size - j):
                    difference = difference - chain.vectors[i].scaled(along[i + j])
                fault = _first_nonzero_over_roots(difference)
                if fault is not None:
                    return Check(
                        item,
                        "refuted",
                        f"row {fault[0]} of the image of basis vector {column}, the "
                        f"coefficient of {_monomial(chain.factor.degree, j)}",
                    )
            for term in others:
                for residue in term.residues:
                    fault = _first_nonzero_over_roots(residue.before(vector))
                    if fault is not None:
                        return Check(
                            item,
                            "refuted",
                            f"row {fault[0]} of the image of basis vector {column} takes part in "
                            "modes of another factor",
                        )
    return Check(
        item,
        "proved",
        "the way by eigenvectors and chains and the way by the resolvent, which share none of "
        "them, were compared on a basis of the space: all coefficients agree",
    )


def determinant_check(response: Response) -> Check:
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
    squarefree = all(p.degree() == 1 or p.gcd(p.diff()).degree() == 0 for p in polynomials)
    return not squarefree or any(f.gcd(g).degree() > 0 for f, g in combinations(polynomials, 2))


def _monomial(degree: int, power: int) -> str:
    root = "e^(λt)" if degree == 1 else f"e^(λt), λ any of {degree} roots"
    return root if power == 0 else f"t^{power} {root}"


def _trace(matrix: FieldMatrix) -> object:
    return sum((matrix[i, i].element for i in range(matrix.shape[0])), start=matrix.domain.zero)


def _first_nonzero(matrix: FieldMatrix) -> tuple[int, int] | None:
    """The place (from 1) of the first entry that is not zero, or None."""
    if matrix.is_zero_matrix:
        return None
    rows = matrix.to_list()
    return next(
        (i, k)
        for i, row in enumerate(rows, start=1)
        for k, element in enumerate(row, start=1)
        if element
    )


def _first_nonzero_over_roots(matrix: RootMatrix) -> tuple[int, int] | None:
    faults = [_first_nonzero(c) for c in matrix.coefficients]
    return min((fault for fault in faults if fault is not None), default=None)
