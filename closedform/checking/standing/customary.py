"""The model's own P, J, eigenvectors and initial values, under the names that people give them.

General lines such as A v = lambda v or e^(At) = P e^(Jt) P^(-1) are held against these where
an author uses the names without having stated them.
"""

from __future__ import annotations

from closedform.algebra.elementary import Element
from closedform.checking.standing.ground import Ground
from closedform.checking.values.matrices import ExactMatrix, diagonal, identity
from closedform.checking.values.scope import Value

__all__ = ["customary"]


def customary(ground: Ground) -> dict[str, Value]:
    """Return what P, J, lambda_k, v_k, x_0 and their like stand for; names of the model not.

    P and J are left out where an eigenvalue has several blocks and one longer than 1.
    """
    found: dict[str, Value] = {}
    if ground.initial is not None:
        found |= dict.fromkeys(("x_0", "x0", "xvec_0"), ground.initial)
    vectors, values = [], []
    for value, root in zip(ground.eigenvalues, ground.truth.eigenvalues, strict=True):
        chain = _vectors(ground, value, root.geometric, root.algebraic)
        if not chain:
            break
        vectors += chain
        values += [value] * len(chain)
    for k, value in enumerate(values, start=1):
        found[f"lambda_{k}"] = value
        found |= {f"{letter}_{k}": vectors[k - 1] for letter in ("v", "xvec", "vvec")}
    if values:
        found["lambda"], found["v"] = values[0], vectors[0]
    if len(vectors) == ground.size:
        rows = tuple(zip(*(v.entries for v in vectors), strict=True))
        matrix = ExactMatrix(ground.field, rows)
        form = matrix.inverse() @ ground.matrix @ matrix
        found |= {"P": matrix, "J": form, "T": matrix, "V": matrix, "S": matrix}
        if (form - diagonal(ground.field, values)).is_zero:
            found |= {"D": form, "Lambda": form}
    names = ground.facts.names
    return {name: value for name, value in found.items() if name not in names}


def _vectors(ground: Ground, value: Element, geometric: int, algebraic: int) -> list[ExactMatrix]:
    """Return a basis of the generalized eigenvectors in chains, where there is one chain only,
    or chains of length 1 only; else nothing.
    """
    shifted = ground.matrix - identity(ground.field, ground.size).scaled(value)
    kernel = shifted.kernel()
    if geometric == algebraic:
        return kernel
    if geometric > 1:
        return []
    for candidate in shifted.power(algebraic).kernel():
        chain = [candidate]
        while len(chain) < algebraic:
            chain.insert(0, shifted @ chain[0])
        if not chain[0].is_zero:
            return chain
    return []
