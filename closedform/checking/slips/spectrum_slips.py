"""Slips with eigenvectors, P and J."""

from __future__ import annotations

from collections import Counter
from collections.abc import Iterator
from itertools import permutations, product

from closedform.algebra.elementary import Element
from closedform.checking.judging.authors_matrices import authors_diagonal, authors_matrix
from closedform.checking.judging.canonical import right_products
from closedform.checking.slips import names
from closedform.checking.slips.making import ONE, ZERO, negated
from closedform.checking.slips.spots import Spot
from closedform.checking.slips.trial import Candidate, Trial
from closedform.checking.values.matrices import ExactMatrix, diagonal, identity
from closedform.checking.values.written_back import written_back
from closedform.notation.written.plain_form import plain_written
from closedform.notation.written.tree import Array, Written

__all__ = ["canonical", "conjugates", "eigenvectors", "transformations"]

MOST_ORDERS = 24
LARGEST = 12
"""States of a model in whose vectors an entry is solved for."""
Rows = tuple[tuple[Written, ...], ...]


def canonical(trial: Trial) -> Iterator[Candidate]:
    """Yield J with ones above the diagonal, with one less, or another eigenvalue in it."""
    if trial.claim.says not in ("J", "real form"):
        return
    yield from _asked_by_transformation(trial)
    for spot in trial.spots():
        if not isinstance(spot.node, Array) or len(spot.node.rows) != len(spot.node.rows[0]):
            continue
        yield from _with_ones(trial, spot, spot.node.rows)
        yield from _with_other_entries(trial, spot, spot.node.rows)


def _asked_by_transformation(trial: Trial) -> Iterator[Candidate]:
    """Yield P^-1 A P for the author's P, where J is that in another order or turned."""
    own = trial.own()
    if not isinstance(own, ExactMatrix) or own.shape != trial.ground.matrix.shape:
        return
    for asked, _ in right_products(trial.setting, trial.ground):
        if asked.transposed == own:
            complex_pair = any((x + y).is_zero for x, y in _across(own) if not x.is_zero)
            name = names.SIGN_SINE_BLOCK if complex_pair else names.CHAIN_SIDE
            yield Candidate(name, "beside the diagonal", written_back(asked))
        elif _counted(own) == _counted(asked):
            yield Candidate(names.ORDER, "the diagonal", written_back(asked))


def _across(matrix: ExactMatrix) -> Iterator[tuple[Element, Element]]:
    """Yield the entries beside the diagonal, in pairs across it."""
    size = range(matrix.shape[0])
    yield from ((matrix.rows[i][j], matrix.rows[j][i]) for i in size for j in size if i < j)


def _counted(matrix: ExactMatrix) -> Counter[Element]:
    return Counter(row[k] for k, row in enumerate(matrix.rows))


def conjugates(trial: Trial) -> Iterator[Candidate]:
    """Yield the conjugate of a vector."""
    own = trial.own()
    if trial.claim.says == "eigenvector" and isinstance(own, ExactMatrix):
        new = own.mapped(Element.conjugate)
        if not (new - own).is_zero:
            yield Candidate(names.CONJUGATE, "all of it", written_back(new))


def _with_ones(trial: Trial, spot: Spot, rows: Rows) -> Iterator[Candidate]:
    own = trial.own()
    if not isinstance(own, ExactMatrix) or own.shape != (len(rows), len(rows)):
        return
    entries = own.rows
    places = [k for k in range(len(rows) - 1) if entries[k][k] == entries[k + 1][k + 1]]
    for chosen in product((False, True), repeat=len(places)):
        ones: dict[tuple[int, int], Written] = {
            (k, k + 1): ONE if on else ZERO for k, on in zip(places, chosen, strict=True)
        }
        more = any(chosen) and all(rows[k][k + 1] == ZERO for k in places)
        name = names.GEOMETRIC if more else names.CHAIN_ENTRY
        yield Candidate(name, "above the diagonal", trial.changed(spot, _with(rows, ones)))


def _with_other_entries(trial: Trial, spot: Spot, rows: Rows) -> Iterator[Candidate]:
    """Yield J with an eigenvalue, its real or its imaginary part in one place."""
    field, size = trial.ground.field, len(rows)
    own = trial.own()
    for i in range(size):
        for j in range(size):
            for value in trial.ground.eigenvalues:
                parts = (value,) if field.im(value).is_zero else (field.re(value), field.im(value))
                for part in parts if i != j else (value, *parts):
                    found = isinstance(own, ExactMatrix) and own.shape == (size, size)
                    opposite = found and isinstance(own, ExactMatrix) and own.rows[i][j] == -part
                    name = names.SIGN_EIGENVALUE if opposite and i == j else names.ENTRY
                    new = _with(rows, {(i, j): written_back(part)})
                    yield Candidate(name, f"entry {i + 1, j + 1}", trial.changed(spot, new))


def _with(rows: Rows, entries: dict[tuple[int, int], Written]) -> Array:
    return Array(
        tuple(
            tuple(entries.get((i, j), entry) for j, entry in enumerate(row))
            for i, row in enumerate(rows)
        )
    )


def eigenvectors(trial: Trial) -> Iterator[Candidate]:
    """Yield a vector with one entry solved for; the right one for a vector of something else."""
    if trial.claim.says != "eigenvector" or trial.claim.subject == "vector":
        return
    if trial.ground.size > LARGEST:
        return
    own = trial.own()
    if not isinstance(own, ExactMatrix):
        return
    vector = own if own.shape[1] == 1 else own.transposed
    ground = trial.ground
    if vector.shape != (ground.size, 1) or vector.is_zero:
        return
    for value in ground.eigenvalues:
        shifted = ground.matrix - identity(ground.field, ground.size).scaled(value)
        if trial.right is not None and (shifted @ vector).is_zero:
            yield Candidate(names.OTHER_EIGENVALUE, "all of it", trial.right)
        if trial.right is not None and (shifted.transposed @ vector).is_zero:
            yield Candidate(names.LEFT_VECTOR, "all of it", trial.right)
    for value in ground.eigenvalues:
        shifted = ground.matrix - identity(ground.field, ground.size).scaled(value)
        for i in range(ground.size):
            found = _entry(shifted @ _cleared(vector, i, 0), shifted @ _unit(vector, i, 0))
            if found is not None:
                yield from _entry_candidate(trial, i, 0, found)


def transformations(trial: Trial) -> Iterator[Candidate]:
    """Yield P with one entry solved for from A P = P J."""
    if trial.claim.says != "P" or trial.ground.size > LARGEST:
        return
    own, ground = trial.own(), trial.ground
    if not isinstance(own, ExactMatrix) or own.shape != (ground.size, ground.size):
        return
    for form in _forms(trial):
        for i in range(ground.size):
            for j in range(ground.size):
                clear, unit = _cleared(own, i, j), _unit(own, i, j)
                found = _entry(
                    ground.matrix @ clear - clear @ form, ground.matrix @ unit - unit @ form
                )
                if found is not None:
                    yield from _entry_candidate(trial, i, j, found)


def _forms(trial: Trial) -> Iterator[ExactMatrix]:
    """Yield the J that belongs to P: the author's, else any order of the eigenvalues."""
    setting, ground = trial.setting, trial.ground
    stated = authors_matrix("J", setting, ground) or authors_diagonal(setting, ground)
    if stated is not None and stated.shape == (ground.size, ground.size):
        yield stated
        return
    form = ground.jordan
    if form is None:
        return
    entries = [form.rows[k][k] for k in range(ground.size)]
    if any(not form.rows[k][k + 1].is_zero for k in range(ground.size - 1)):
        yield form
        return
    for count, order in enumerate(permutations(entries)):
        if count >= MOST_ORDERS:
            return
        yield diagonal(ground.field, order)


def _entry(rest: ExactMatrix, slope: ExactMatrix) -> Element | None:
    """Return x with rest + x slope = 0, None if there is none."""
    found: Element | None = None
    for one, two in zip(rest.entries, slope.entries, strict=True):
        if two.is_zero:
            if not one.is_zero:
                return None
            continue
        value = -one / two
        if found is not None and not (found - value).is_zero:
            return None
        found = value
    return found


def _entry_candidate(trial: Trial, i: int, j: int, value: Element) -> Iterator[Candidate]:
    for spot in trial.spots():
        if not isinstance(spot.node, Array):
            continue
        rows = spot.node.rows
        place = (i, j)
        if len(rows) == 1 < trial.ground.size:
            place = (j, i)
        if place[0] >= len(rows) or place[1] >= len(rows[0]):
            continue
        front = _front(trial, spot)
        if front is None or front.is_zero:
            continue
        old, new = rows[place[0]][place[1]], written_back(value / front)
        name = names.SIGN_ENTRY if negated(old) == new else names.ENTRY
        where = f"entry {i + 1, j + 1}: {plain_written(old)} ought to be {plain_written(new)}"
        yield Candidate(name, where, trial.changed(spot, _with(rows, {place: new})))


def _front(trial: Trial, spot: Spot) -> Element | None:
    """Return the factor in front of an array."""
    value = trial.setting.value(trial.changed(spot, ONE), trial.ground)
    return value if isinstance(value, Element) else None


def _cleared(matrix: ExactMatrix, i: int, j: int) -> ExactMatrix:
    zero = matrix.field.zero
    return ExactMatrix(
        matrix.field,
        tuple(
            tuple(zero if (r, c) == (i, j) else e for c, e in enumerate(row))
            for r, row in enumerate(matrix.rows)
        ),
    )


def _unit(matrix: ExactMatrix, i: int, j: int) -> ExactMatrix:
    field = matrix.field
    return ExactMatrix(
        field,
        tuple(
            tuple(field.one if (r, c) == (i, j) else field.zero for c in range(len(row)))
            for r, row in enumerate(matrix.rows)
        ),
    )
