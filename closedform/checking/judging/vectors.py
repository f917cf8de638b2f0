"""Judging eigenvectors, chains, P, its inverse and J, each on the author's own terms."""

from __future__ import annotations

from collections.abc import Iterable, Iterator, Sequence

from flint import acb

from closedform.algebra.elementary import Element, NotElementaryError
from closedform.checking.claim import Claim, Group
from closedform.checking.errors import NotJudgedError, UnknownNameError
from closedform.checking.judging.compare import has_decimals
from closedform.checking.judging.held import held_against
from closedform.checking.judging.rounded_forms import exact_form
from closedform.checking.judging.rounded_vectors import rounded_direction
from closedform.checking.judging.similar import is_block_form, is_similar
from closedform.checking.judging.spectrum import roots_claimed
from closedform.checking.recognising.left_sides import base_and_indices
from closedform.checking.standing.ground import Ground
from closedform.checking.standing.setting import Finding, Setting
from closedform.checking.values.exact import Value
from closedform.checking.values.matrices import (
    ExactMatrix,
    characteristic_coefficients,
    diagonal,
    identity,
)
from closedform.checking.values.signs import both_signs
from closedform.checking.values.spread import spread
from closedform.checking.values.written_back import written_back
from closedform.notation.written.plain_form import plain_written
from closedform.notation.written.tree import Jet, Listing, Product, Symbol, Written

__all__ = [
    "authors_diagonal",
    "authors_matrix",
    "judge_canonical",
    "judge_eigenvector",
    "judge_inverse",
    "judge_transformation",
    "matrix_value",
    "right_products",
]


def matrix_value(tree: Written, setting: Setting, ground: Ground) -> ExactMatrix:
    """Return the exact value of what ought to be a matrix.

    Raises NotJudgedError for a number.
    """
    value = setting.value(tree, ground)
    if not isinstance(value, ExactMatrix):
        raise NotJudgedError("a number stands where a matrix is wanted")
    return value


def authors_matrix(says: str, setting: Setting, ground: Ground) -> ExactMatrix | None:
    """Return a matrix that the author states, P, J or another, or None."""
    tree = setting.stated(says)
    if tree is None:
        return None
    try:
        matrix = matrix_value(tree, setting, ground)
        rounded = says in ("J", "real form") and has_decimals(setting.opened(tree))
        form = exact_form(matrix, ground) if rounded else None
    except (NotJudgedError, NotElementaryError, ZeroDivisionError):
        return None
    return matrix if form is None else form


def authors_diagonal(setting: Setting, ground: Ground) -> ExactMatrix | None:
    """Return the diagonal matrix of the author's eigenvalues in their order, if all are listed."""
    entries = setting.author.all("eigenvalues")
    found: list[Element] = []
    for entry in reversed(entries):
        for forms, count in roots_claimed(entry.claim):
            value = setting.value(forms[0], ground)
            if isinstance(value, ExactMatrix):
                return None
            found += [value] * (count or 1)
    return diagonal(ground.field, found) if len(found) == ground.size else None


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
            told = _rounded(member, kernel or _direction(ground, value), setting, ground)
            if told is not None:
                return Finding("holds to the digits shown", told)
        right = right or (written_back(kernel[0]) if kernel and not generalized else None)
    other = _other_eigenvalue(vector, ground)
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


def _other_eigenvalue(vector: ExactMatrix, ground: Ground) -> Element | None:
    image = ground.matrix @ vector
    for value in ground.eigenvalues:
        if (image - vector.scaled(value)).is_zero:
            return value
    return None


def eigenvectors(ground: Ground, value: Element) -> list[ExactMatrix]:
    """Return a basis of the eigenvectors of an eigenvalue."""
    return (ground.matrix - identity(ground.field, ground.size).scaled(value)).kernel()


def _direction(ground: Ground, value: Element) -> list[ExactMatrix]:
    """Return an eigenvector of an eigenvalue that has a name and no formula.

    Its entries are polynomials in the name: a column of the adjugate of lambda I - A, found by
    the scheme of Horner, that is not zero at the value of the name.
    Raises:  NotJudgedError where there is more than one direction.
    """
    named = [root.value is None and root.geometric == 1 for root in ground.truth.eigenvalues]
    if not any(own == value and one for own, one in zip(ground.eigenvalues, named, strict=True)):
        raise NotJudgedError("the eigenvectors of this eigenvalue are not known in closed form")
    unit = identity(ground.field, ground.size)
    coefficients = characteristic_coefficients(ground.matrix)
    part, total = unit, unit
    for coefficient in reversed(coefficients[1:-1]):
        part = ground.matrix @ part + unit.scaled(coefficient)
        total = total.scaled(value) + part
    names = ground.sampled()
    for vector in total.columns:
        if any(not entry.enclosure(acb(0), names).contains(0) for entry in vector.entries):
            return [vector]
    raise NotJudgedError("the eigenvectors of this eigenvalue are not known in closed form")


def _rounded(
    printed: Written | Sequence[Written],
    kernel: list[ExactMatrix],
    setting: Setting,
    ground: Ground,
) -> str | None:
    """Return words for printed decimals that are a direction of a kernel, rounded; else None."""

    def value(tree: Written) -> acb:
        number = setting.value(tree, ground)
        if isinstance(number, ExactMatrix):
            raise NotJudgedError("a matrix stands where a number is wanted")
        return number.enclosure(acb(0), ground.sampled())

    return rounded_direction(printed, kernel, ground.sampled, value)


def judge_canonical(claim: Claim, setting: Setting) -> Finding:
    """Judge J: similar to A, in blocks, in any order; with the author's P if that is stated."""

    def right(ground: Ground) -> Written | None:
        form = ground.jordan
        return None if form is None else written_back(form)

    product = next((name for name in claim.names if isinstance(name, Product)), None)
    if product is not None:
        try:
            return held_against(
                claim, setting, lambda ground: matrix_value(product, setting, ground), right
            )
        except UnknownNameError:
            pass
    last: Finding | None = None
    for member in claim.values:
        opened = setting.opened(member)
        ground = setting.ground_for(opened)
        matrix = matrix_value(member, setting, ground)
        if matrix.shape != (ground.size, ground.size):
            rows, columns = matrix.shape
            return Finding(
                "fails", f"it is {rows} by {columns}, the matrix A has {ground.size} rows"
            )
        if has_decimals(opened) and exact_form(matrix, ground) is not None:
            last = _rounded_form(claim, member, setting)
            if not last.passes:
                return last
            continue
        if not is_similar(matrix, ground):
            return Finding("fails", "it is not similar to A", right(ground))
        if not is_block_form(matrix):
            return Finding("fails", "it is similar to A, but not in blocks", right(ground))
        asked = _asked_by_transformation(matrix, claim, setting, ground)
        if asked is not None:
            return Finding("fails", "A P is not P J", written_back(asked))
        last = Finding("holds" if _in_order(matrix, setting, ground) else "holds up to order")
    if last is None:
        raise NotJudgedError("no matrix is given")
    return last


def _asked_by_transformation(
    matrix: ExactMatrix, claim: Claim, setting: Setting, ground: Ground
) -> ExactMatrix | None:
    """Return P^-1 A P for the author's P, stated before and right, if J ought to be that.

    None is returned where J is that for some P, and where J and P are of different kinds, the
    one real and the other not, so that they do not belong together.
    """
    asked = [product for product, _ in right_products(setting, ground)]
    stated = [entry.claim.statements for entry in setting.author.entries]
    later = [
        c.values[-1]
        for c in setting.later
        if c.says == "P" and c.values and c.statements not in stated
    ]
    kinds = [p for p in asked if _is_real(p) == _is_real(matrix) and is_block_form(p)]
    if claim.says == "real form":
        kinds = [p for p in kinds if not _is_diagonal(p)]
    if not kinds or later or any((p - matrix).is_zero for p in asked):
        return None
    return kinds[0]


def right_products(setting: Setting, ground: Ground) -> list[tuple[ExactMatrix, ExactMatrix]]:
    """Return P^-1 A P and P for every right P without decimals that was stated before."""
    found = []
    for entry in setting.author.all("P"):
        if entry.root is not None or has_decimals(entry.value):
            continue
        try:
            p = matrix_value(entry.value, setting, ground)
            if p.shape == ground.matrix.shape:
                found.append((p.inverse() @ ground.matrix @ p, p))
        except (NotJudgedError, NotElementaryError, ZeroDivisionError):
            continue
    return found


def _is_real(matrix: ExactMatrix) -> bool:
    return all(entry.field.im(entry).is_zero for entry in matrix.entries)


def _rounded_form(claim: Claim, member: Written, setting: Setting) -> Finding:
    """Judge the digits of a canonical form that stands for an exact one."""

    def true(ground: Ground) -> Value:
        form = exact_form(matrix_value(member, setting, ground), ground)
        if form is None:
            raise NotJudgedError("it is not told which form its numbers stand for")
        return form

    return held_against(claim, setting, true, values=(member,))


def _in_order(matrix: ExactMatrix, setting: Setting, ground: Ground) -> bool:
    """Whether the diagonal follows the author's list of eigenvalues."""
    own = authors_diagonal(setting, ground)
    if own is None:
        return True
    size = range(ground.size)
    return all((own.rows[k][k] - matrix.rows[k][k]).is_zero for k in size) or any(
        not matrix.rows[k][k].is_zero and not matrix.rows[i][k].is_zero and i > k
        for k in size
        for i in size
    )


def judge_transformation(claim: Claim, setting: Setting) -> Finding:
    """Judge P: invertible, and A P = P J for the author's J, before or after the line.

    Without J the order of the author's eigenvalues is asked for, and another one is right up to
    order; without these any order is.
    """
    last: Finding | None = None
    for member in claim.values:
        opened = setting.opened(member)
        ground = setting.ground_for(opened)
        matrix = matrix_value(member, setting, ground)
        if matrix.shape != (ground.size, ground.size):
            rows, columns = matrix.shape
            return Finding(
                "fails", f"it is {rows} by {columns}, the matrix A has {ground.size} rows"
            )
        last = _transformation(matrix, opened, setting, ground)
        if not last.passes:
            return last
    if last is None:
        raise NotJudgedError("no matrix is given")
    return last


def _transformation(
    matrix: ExactMatrix, member: Written, setting: Setting, ground: Ground
) -> Finding:
    try:
        inverse = matrix.inverse()
    except ZeroDivisionError:
        return Finding("fails", "it has no inverse")
    if has_decimals(member):
        finding = _rounded_columns(member, setting, ground)
        if finding is not None:
            return finding
    product = inverse @ ground.matrix @ matrix
    stated = [form for form in _canonical_forms(setting, ground) if is_similar(form, ground)]
    if any((product - form).is_zero for form in stated):
        return Finding("holds", "A P = P J")
    before = any(setting.author.all(says) for says in CANONICAL)
    first = is_block_form(product) and _in_order(product, setting, ground)
    if stated and (before or not first):
        turned = "A P is not P J: its columns are in another order than J asks for"
        reason = turned if is_block_form(product) else "A P is not P J"
        return Finding("fails", _columns_text(matrix, ground) or reason)
    if not is_block_form(product):
        if has_decimals(member):
            finding = _rounded_columns(member, setting, ground)
            if finding is not None:
                return finding
        return Finding("fails", _columns_text(matrix, ground) or "P^-1 A P is not in blocks")
    order = authors_diagonal(setting, ground)
    if order is not None and _is_diagonal(product) and not (product - order).is_zero:
        return Finding("holds up to order", "its columns are in another order than the eigenvalues")
    return Finding("holds", "P^-1 A P is in blocks")


def _canonical_forms(setting: Setting, ground: Ground) -> list[ExactMatrix]:
    """Return every J and real form that the author states, before or later."""
    claims = [
        *(entry.claim for says in CANONICAL for entry in setting.author.all(says)),
        *(claim for claim in setting.later if claim.says in CANONICAL),
    ]
    found = []
    for claim in claims:
        try:
            matrix = matrix_value(claim.values[-1], setting, ground) if claim.values else None
        except (NotJudgedError, NotElementaryError, ZeroDivisionError):
            continue
        if matrix is not None and matrix.shape == (ground.size, ground.size):
            found.append(matrix)
    return found


CANONICAL = ("J", "real form")


def _rounded_columns(member: Written, setting: Setting, ground: Ground) -> Finding | None:
    """Judge a P with printed decimals column by column, each an eigenvector up to its length."""
    rows = spread(member)
    if rows is None:
        return None
    kernels = [eigenvectors(ground, v) or _direction(ground, v) for v in ground.eigenvalues]
    if any(len(kernel) != 1 for kernel in kernels) or len(kernels) != ground.size:
        return None
    left, told = list(kernels), []
    for entries in zip(*rows, strict=True):
        found = next(
            (
                (k, text)
                for k in left
                if (text := _rounded(entries, k, setting, ground)) is not None
            ),
            None,
        )
        if found is None:
            return None
        left.remove(found[0])
        told.append(found[1])
    return Finding("holds to the digits shown", "; ".join(filter(None, told)))


def _columns_text(matrix: ExactMatrix, ground: Ground) -> str:
    """Return which columns are no eigenvectors, where A has a basis of these."""
    if any(root.algebraic != root.geometric for root in ground.truth.eigenvalues):
        return ""
    wrong = [
        k + 1
        for k, entries in enumerate(matrix.columns)
        if _other_eigenvalue(entries, ground) is None
    ]
    if not wrong:
        return ""
    listed = ", ".join(map(str, wrong))
    one = len(wrong) == 1
    return f"column {listed} is no eigenvector" if one else f"columns {listed} are no eigenvectors"


def _is_diagonal(matrix: ExactMatrix) -> bool:
    return all(
        entry.is_zero for i, row in enumerate(matrix.rows) for j, entry in enumerate(row) if i != j
    )


def judge_inverse(claim: Claim, setting: Setting) -> Finding:
    """Judge P^(-1) as the inverse of the author's P; without a right one, as that of any P."""

    def true(ground: Ground) -> Value:
        own = authors_matrix("P", setting, ground)
        if own is None:
            raise NotJudgedError("no P is stated whose inverse it is to be")
        return own.inverse()

    stated = setting.author.last("P")
    if stated is not None and stated.root is None:
        return held_against(claim, setting, true, lambda ground: written_back(true(ground)))
    ground = setting.ground_for(*map(setting.opened, claim.values))
    matrix = matrix_value(claim.values[-1], setting, ground)
    if matrix.shape != (ground.size, ground.size):
        return Finding("fails", "it has not the size of A")
    try:
        return _transformation(matrix.inverse(), claim.values[-1], setting, ground)
    except ZeroDivisionError:
        return Finding("fails", "it has no inverse")
