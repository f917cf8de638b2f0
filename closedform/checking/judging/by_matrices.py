"""Matrices that follow from the author's earlier matrices and eigenvalues."""

from __future__ import annotations

from collections.abc import Iterator

from closedform.algebra.elementary import Element
from closedform.checking.errors import UNDECIDED
from closedform.checking.judging.derived import (
    Derived,
    stated_matrices,
    stated_values,
    value_of_entry,
)
from closedform.checking.judging.matched import (
    eigenvalues_for,
    eigenvectors_for,
    transformations_for,
)
from closedform.checking.judging.spectrum import roots_claimed
from closedform.checking.standing.ground import SPECTRAL, Ground
from closedform.checking.standing.setting import Setting
from closedform.checking.values.exponential import eigenvalues_of, matrix_exponential
from closedform.checking.values.matrices import (
    ExactMatrix,
    characteristic_coefficients,
    diagonal,
    identity,
)

__all__ = [
    "DEGREE",
    "as_far_as_known",
    "block_exponentials",
    "canonical_forms",
    "diagonals",
    "inverses",
    "of_quantities",
    "polynomials",
    "transformations",
    "transitions",
]


def transformations(setting: Setting, ground: Ground) -> Iterator[Derived[ExactMatrix]]:
    """Yield matrices whose columns are the author's eigenvectors, in the order of stating."""
    columns: list[Derived[ExactMatrix]] = []
    for entry in setting.author.entries:
        if entry.says in ("eigenvector", "generalized eigenvector"):
            value = value_of_entry(entry, setting, ground)
            if isinstance(value, ExactMatrix):
                shaped = value if value.shape[1] == 1 else value.transposed
                columns.append(Derived(shaped, entry.root))
    vectors = [d.value for d in columns]
    if len(vectors) == ground.size and all(v.shape == (ground.size, 1) for v in vectors):
        rows = tuple(zip(*(v.entries for v in vectors), strict=True))
        matrix = ExactMatrix(ground.field, rows)
        yield columns[0].joined(matrix, *columns[1:])


def diagonals(setting: Setting, ground: Ground) -> Iterator[Derived[ExactMatrix]]:
    """Yield the diagonal matrix of the author's eigenvalues in their order."""
    values: list[Element] = []
    root: int | None = None
    for entry in setting.author.entries:
        if entry.says == "eigenvalues":
            root = entry.root if root is None else root
            for forms, count in roots_claimed(entry.claim):
                value = setting.value(forms[-1], ground)
                if isinstance(value, Element):
                    values += [value] * (count or 1)
    if len(values) == ground.size:
        yield Derived(diagonal(ground.field, values), root)
    if ground.size == DEGREE:
        yield from as_far_as_known(of_quantities(setting, ground))


DEGREE = 2


def of_quantities(setting: Setting, ground: Ground) -> Iterator[Derived[ExactMatrix]]:
    """Yield the roots of s^2 + 2 zeta omega s + omega^2 for a wrong zeta or omega_n."""
    field = ground.field
    trace, product = ground.matrix.trace(), ground.matrix.determinant()
    natural = [Derived(field.sqrt(product)), *stated_values("natural frequency", setting, ground)]
    ratio = [
        Derived(-trace / (field.number(2) * field.sqrt(product))),
        *stated_values("damping ratio", setting, ground),
    ]
    omega, zeta = natural[-1], ratio[-1]
    if isinstance(omega.value, Element) and isinstance(zeta.value, Element):
        half, root = zeta.value * omega.value, field.sqrt(zeta.value**2 - field.one) * omega.value
        yield omega.joined(diagonal(field, [root - half, -root - half]), zeta)


def canonical_forms(setting: Setting, ground: Ground) -> Iterator[Derived[ExactMatrix]]:
    """Yield J as the author's eigenvalues or P give it."""
    yield from diagonals(setting, ground)
    for matrix in stated_matrices("P", setting, ground):
        yield matrix.joined(matrix.value.inverse() @ ground.matrix @ matrix.value)


def block_exponentials(setting: Setting, ground: Ground) -> Iterator[Derived[ExactMatrix]]:
    """Yield e^(Jt) of the author's J, or of the diagonal of the author's eigenvalues."""
    candidates = ground.eigenvalues
    for says in ("J", "real form"):
        for matrix in stated_matrices(says, setting, ground):
            yield matrix.joined(matrix_exponential(matrix.value, candidates))
    for matrix in diagonals(setting, ground):
        yield matrix.joined(matrix_exponential(matrix.value))


def inverses(setting: Setting, ground: Ground) -> Iterator[Derived[ExactMatrix]]:
    """Yield the inverses of the author's P."""
    for matrix in (*stated_matrices("P", setting, ground), *transformations(setting, ground)):
        yield matrix.joined(matrix.value.inverse())


def transitions(setting: Setting, ground: Ground) -> Iterator[Derived[ExactMatrix]]:
    """Yield e^(At) as the author's P, e^(Jt) and P^(-1) give it, or the author's own."""
    yield from stated_matrices("exp A", setting, ground)
    for matrix in stated_matrices("matrix", setting, ground):
        if matrix.root is not None:
            yield from as_far_as_known(_exponential(matrix))
    left = [*stated_matrices("P", setting, ground), *transformations(setting, ground)]
    middle = [
        *stated_matrices("exp J", setting, ground),
        *as_far_as_known(block_exponentials(setting, ground)),
    ]
    if _is_canonical_itself(setting, ground):
        left.append(Derived(identity(ground.field, ground.size)))
    for p in left:
        for e in middle or list(_own_exponentials(p, ground)):
            yield from as_far_as_known(_product(p, e, setting, ground))
    for e in middle if not left else ():
        for p in _own_vectors(e, setting, ground):
            yield from as_far_as_known(_product(p, e, setting, ground))
    yield from as_far_as_known(_companions(setting, ground))


def as_far_as_known(found: Iterator[Derived[ExactMatrix]]) -> Iterator[Derived[ExactMatrix]]:
    """Yield what can be worked out: the first that cannot is the last."""
    while True:
        try:
            yield next(found)
        except (StopIteration, *UNDECIDED):
            return


def _exponential(matrix: Derived[ExactMatrix]) -> Iterator[Derived[ExactMatrix]]:
    yield matrix.joined(matrix_exponential(matrix.value))


def _product(
    p: Derived[ExactMatrix], e: Derived[ExactMatrix], setting: Setting, ground: Ground
) -> Iterator[Derived[ExactMatrix]]:
    """Yield P e^(Jt) P^(-1), with the author's P^(-1) and with the right one."""
    for q in (*stated_matrices("P inverse", setting, ground), p.joined(p.value.inverse())):
        yield p.joined(p.value @ e.value @ q.value, e, q)


def _own_exponentials(p: Derived[ExactMatrix], ground: Ground) -> Iterator[Derived[ExactMatrix]]:
    """Yield e^(Jt) for a P that was stated without J: its columns tell the order."""
    if p.root is None:
        product = p.value.inverse() @ ground.matrix @ p.value
        yield Derived(matrix_exponential(product, ground.eigenvalues))
        return
    for values in eigenvalues_for(p.value, ground):
        yield Derived(matrix_exponential(diagonal(ground.field, values)))


def _own_vectors(
    e: Derived[ExactMatrix], setting: Setting, ground: Ground
) -> Iterator[Derived[ExactMatrix]]:
    """Yield P for an e^(Jt) that was stated without P: that of a right J, or of a diagonal one."""
    for form in stated_matrices("J", setting, ground):
        if form.root is None:
            for p in transformations_for(form.value, ground):
                yield Derived(p)
    zero = ground.field.zero
    rates = e.value.mapped(Element.derivative).mapped(lambda entry: entry.at(zero))
    size = range(ground.size)
    if all(rates.rows[i][j].is_zero for i in size for j in size if i != j):
        for p in eigenvectors_for([rates.rows[k][k] for k in size], ground):
            yield Derived(p)


def _is_canonical_itself(setting: Setting, ground: Ground) -> bool:
    """Whether the author's J is A itself, so that P is the unit matrix."""
    stated = stated_matrices("J", setting, ground)
    return any((matrix.value - ground.matrix).is_zero for matrix in stated)


def polynomials(setting: Setting, ground: Ground) -> Iterator[Derived[Element]]:
    """Yield the characteristic polynomials of the author's matrices."""
    variable = ground.field.name(SPECTRAL)
    for matrix in stated_matrices("matrix", setting, ground):
        total = ground.field.zero
        for c in reversed(characteristic_coefficients(matrix.value)):
            total = total * variable + c
        yield matrix.joined(total)


def _companions(setting: Setting, ground: Ground) -> Iterator[Derived[ExactMatrix]]:
    """Yield e^(Ct) for the companion matrix of the author's eigenvalues, for one unknown."""
    jets = ground.truth.jets
    if len({name for name, _ in jets}) != 1 or [k for _, k in jets] != list(range(len(jets))):
        return
    for matrix in diagonals(setting, ground):
        coefficients = characteristic_coefficients(matrix.value)
        zero, one, size = ground.field.zero, ground.field.one, ground.size
        rows = [tuple(one if j == i + 1 else zero for j in range(size)) for i in range(size - 1)]
        rows.append(tuple(-c for c in coefficients[:-1]))
        companion = ExactMatrix(ground.field, tuple(rows))
        values = eigenvalues_of(matrix.value)
        yield matrix.joined(matrix_exponential(companion, values))
