"""Two routes to one exponential: by eigenvectors and chains, and by the resolvent."""

from __future__ import annotations

from closedform.algebra.root_matrix import RootMatrix
from closedform.response.response import Response
from closedform.verification.record import Check
from closedform.verification.residuals import (
    Solved,
    first_nonzero,
    first_nonzero_over_roots,
    monomial,
)

__all__ = ["chain_check", "inverse_check", "routes_check"]


def chain_check(response: Solved) -> Check:
    """A P = P J with P invertible: every chain steps down under A - lambda I to zero."""
    item = "A P = P J"
    for number, chain in enumerate(response.jordan.chains, start=1):
        below: RootMatrix | None = None
        for place, vector in enumerate(chain.vectors, start=1):
            left = vector.shifted(response.matrix)
            left = left if below is None else left - below
            fault = first_nonzero_over_roots(left)
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
    fault = first_nonzero(total - response.field.identity(n))
    if fault is not None:
        return Check(item, "refuted", f"entry {fault} of the product is another")
    return Check(
        item, "proved", "multiplied out, chain by chain, over the eigenvalues: the unit matrix"
    )


def routes_check(response: Solved) -> Check:
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
            scale, coordinates = chain.scaled_coordinates(power)
            along = [(c * p.diff()).rem(p) for c in coordinates]
            for j, residue in enumerate(terms[0].residues):
                difference = residue.before(vector).scaled(scale)
                for i in range(chain.size - j):
                    difference = difference - chain.vectors[i].scaled(along[i + j])
                fault = first_nonzero_over_roots(difference)
                if fault is not None:
                    return Check(
                        item,
                        "refuted",
                        f"row {fault[0]} of the image of basis vector {column}, the "
                        f"coefficient of {monomial(chain.factor.degree, j)}",
                    )
            for term in others:
                for residue in term.residues:
                    fault = first_nonzero_over_roots(residue.before(vector))
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
