"""The steps from eigenvectors to the exponential of the canonical form.

They are given when every eigenvalue has a short form (factors of degree one and two) and
the matrices fit on a page; otherwise the resolvent is printed instead.
"""

from __future__ import annotations

from collections.abc import Iterator

from closedform.derivation.chain_steps import blocks_of, eigenvectors_step
from closedform.derivation.exponential_steps import exponential_step
from closedform.derivation.form_steps import jordan_step, real_form_step
from closedform.derivation.spectrum_steps import eigenvalues_of
from closedform.derivation.step import Step
from closedform.response.response import Response

__all__ = ["canonical_steps"]


def canonical_steps(response: Response) -> Iterator[Step]:
    """Eigenvectors and chains, P and J, the real form if needed, and its exponential."""
    blocks = blocks_of(response)
    for eigenvalue in eigenvalues_of(response):
        yield eigenvectors_step(eigenvalue, [b for b in blocks if b.eigenvalue == eigenvalue])
    is_complex = any(block.is_circular for block in blocks)
    yield jordan_step(blocks, is_complex=is_complex)
    if is_complex:
        yield real_form_step(blocks)
    yield exponential_step(blocks, response.model.time, is_complex=is_complex)
