"""Judging eigenvectors and generalized ones, each on the author's own terms."""

from __future__ import annotations

from collections.abc import Iterable, Iterator

from flint import acb

from closedform.algebra.elementary import Element, NotElementaryError
from closedform.checking.claim import Claim, Group
from closedform.checking.errors import NotJudgedError
from closedform.checking.judging.authors_matrices import matrix_value
from closedform.checking.judging.compare import has_decimals
from closedform.checking.judging.eigenspaces import (
    eigenvalue_of_vector,
    eigenvectors,
    named_direction,
    rounded_text,
)
from closedform.checking.recognising.left_sides import base_and_indices
from closedform.checking.standing.ground import Ground
from closedform.checking.standing.setting import Finding, Setting
from closedform.checking.values.matrices import ExactMatrix, identity
from closedform.checking.values.signs import both_signs
from closedform.checking.values.written_back import written_back
from closedform.notation.written.plain_form import plain_written
from closedform.notation.written.tree import Jet, Listing, Symbol, Written

__all__ = ["judge_eigenvector"]


def judge_eigenvector(claim: Claim, setting: Setting) -> Finding:
    """Judge an eigenvector or a generalized one: not zero, and sent to what it ought to be.

    Whose it is, is told by the author, else by its index among the author's eigenvalues; if
    neither tells, any eigenvalue does.  Without a word of the author's a vector of a chain
    may stand where the eigenvalue is defective.
    """
    if not claim.values:
        raise NotJudgedError("no vector is given")
    worst: Finding | None = None
    for member in claim.values:
        opened = setting.opened(member)
        ground = setting.ground_for(opened, *([claim.of] if claim.of is not None else []))
        vector = matrix_value(member, setting, ground)
        if vector.shape[1] != 1 and vector.shape[0] == 1:
            vector = vector.transposed
        finding = _vector(claim, vector, opened, setting, ground)
        if not finding.passes:
            return finding
        worst = worst if worst and worst.word == "holds to the digits shown" else finding
    assert worst is not None  # noqa: S101  there is a member
    return worst


def _vector(
    claim: Claim, vector: ExactMatrix, member: Written, setting: Setting, ground: Ground
) -> Finding:
    if vector.shape != (ground.size, 1):
        return Finding("fails", f"it has {vector.shape[0]} entries, the model {ground.size} states")
    if vector.is_zero:
        return Finding("fails", "it is zero")
    known = _eigenvalue_of(claim, setting, ground)
    candidates = [known] if known is not None else list(ground.eigenvalues)
    generalized = claim.says == "generalized eigenvector"
    unit = identity(ground.field, ground.size)
    for value in candidates:
        shifted = ground.matrix - unit.scaled(value)
        image = shifted @ vector
        if image.is_zero and not generalized:
            if known is None and _is_another_again(claim, vector, setting, ground):
                return Finding("fails", "it is a multiple of a vector with another index")
            return Finding("holds up to scale", "A v = lambda v")
        chained = generalized or not claim.stated
        if chained and not image.is_zero and (shifted.power(ground.size) @ vector).is_zero:
            finding = _in_chain(image, setting, ground, told=generalized)
            if finding is not None:
                return finding
    right = None
    for value in candidates:
        kernel = eigenvectors(ground, value)
        if has_decimals(member) and not generalized:
            told = rounded_text(member, kernel or named_direction(ground, value), setting, ground)
            if told is not None:
                return Finding("holds to the digits shown", told)
        right = right or (written_back(kernel[0]) if kernel and not generalized else None)
    other = eigenvalue_of_vector(vector, ground)
    reason = "A v is no multiple of v"
    if other is not None and known is not None:
        reason = f"it belongs to the eigenvalue {plain_written(written_back(other))}"
    return Finding("fails", reason, right)


def _in_chain(
    image: ExactMatrix, setting: Setting, ground: Ground, *, told: bool
) -> Finding | None:
    """Tell how the image of a generalized eigenvector stands to the author's vector before it.

    None says that it is in no chain: a vector of which nothing is told has to be an eigenvector
    unless a multiple of its image stands beside it, or what stands there is wrong.
    """
    before = setting.author.last("generalized eigenvector") or setting.author.last("eigenvector")
    if before is not None and any(
        vector.shape == image.shape and (image - vector).is_zero
        for vector in _vectors((before.claim,), setting, ground)
    ):
        return Finding("holds", "(A - lambda I) w = v")
    if not told and not _is_beside(image, setting, ground):
        return None
    if before is None:
        return Finding("holds up to scale", "a vector of a chain")
    return Finding(
        "holds up to scale", "a vector of a chain, whose image is not the vector before it"
    )


def _is_beside(image: ExactMatrix, setting: Setting, ground: Ground) -> bool:
    """Whether a multiple of a vector is stated before or later, or a wrong one before."""
    entries = [entry for says in VECTORS for entry in setting.author.all(says)]
    if any(entry.root is not None for entry in entries):
        return True
    claims = (*(entry.claim for entry in entries), *setting.later)
    return any(
        vector.shape == image.shape
        and not vector.is_zero
        and ExactMatrix(ground.field, (image.entries, vector.entries)).rank() == 1
        for vector in _vectors(claims, setting, ground)
    )


def _vectors(claims: Iterable[Claim], setting: Setting, ground: Ground) -> Iterator[ExactMatrix]:
    """Yield the vectors that claims state, as columns; what is none is passed over."""
    for claim in claims:
        if claim.says not in VECTORS or not claim.values:
            continue
        try:
            vector = matrix_value(claim.values[-1], setting, ground)
        except (NotJudgedError, NotElementaryError, ZeroDivisionError):
            continue
        yield vector if vector.shape[1] == 1 else vector.transposed


VECTORS = ("eigenvector", "generalized eigenvector")


def _is_another_again(claim: Claim, vector: ExactMatrix, setting: Setting, ground: Ground) -> bool:
    """Whether a vector is a multiple of one with the same letter and another index."""
    name = _letter_and_index(claim)
    for entry in setting.author.all("eigenvector"):
        other = _letter_and_index(entry.claim)
        named = name and other and name[0] == other[0] and name[1] != other[1]
        if not named or entry.root is not None:
            continue
        for own in _vectors((entry.claim,), setting, ground):
            if own.shape == vector.shape and not own.is_zero:
                both = ExactMatrix(ground.field, (own.entries, vector.entries))
                if both.rank() == 1:
                    return True
    return False


def _letter_and_index(claim: Claim) -> tuple[str, str] | None:
    """Return the parts of the name of a vector, None where it has no index."""
    name = claim.names[-1] if claim.names else None
    if not isinstance(name, Symbol):
        return None
    letter, index = base_and_indices(name.name)
    return (letter, index) if index else None


def _eigenvalue_of(claim: Claim, setting: Setting, ground: Ground) -> Element | None:
    """Return the eigenvalue whose vector is claimed, as far as author and index tell."""
    if claim.of is not None:
        value = setting.value(claim.of, ground)
        if isinstance(value, Element):
            return _nearest(value, ground)
    name = claim.names[-1] if claim.names else None
    if not isinstance(name, Symbol | Jet):
        return None
    index = base_and_indices(name.name)[1]
    for entry in setting.author.all("eigenvalues"):
        if entry.root is not None:
            continue
        for group in entry.claim.groups:
            form = _of_index(group, index)
            found = setting.value(form, ground) if form is not None else None
            if isinstance(found, Element):
                return _nearest(found, ground)
    return None


def _of_index(group: Group, index: str) -> Written | None:
    """Return the eigenvalue with an index: lambda_2 of lambda_1 = lambda_2 or lambda_{1,2}."""
    for own in group.names:
        indices = base_and_indices(own.name)[1] if isinstance(own, Symbol) else ""
        if indices == index and index:
            return group.values[0]
        form = group.values[0]
        pair = form.items if isinstance(form, Listing) else both_signs(form)
        parts = indices.split("_")
        if index in parts and len(parts) == len(pair) > 1:
            return pair[parts.index(index)]
    return None


def _nearest(value: Element, ground: Ground) -> Element:
    """Return the eigenvalue that a stated one stands for: itself, or the nearest to a decimal."""
    closed = list(ground.eigenvalues)
    if value in closed:
        return value
    values = ground.sampled()
    point = value.enclosure(acb(0), values)
    return min(
        closed, key=lambda v: float(abs(v.enclosure(acb(0), values) - point).mid()), default=value
    )
