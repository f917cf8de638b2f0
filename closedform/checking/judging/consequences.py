"""What follows from the author's own earlier lines: so that one slip is reported once."""

from __future__ import annotations

from collections.abc import Callable, Iterator
from dataclasses import dataclass

from closedform.algebra.elementary import Element, NotElementaryError
from closedform.checking.claim import Claim
from closedform.checking.errors import NotJudgedError
from closedform.checking.judging.compare import compare
from closedform.checking.judging.following import (
    by_equation,
    by_limit,
    by_transform,
    with_wrong_column,
)
from closedform.checking.judging.matched import (
    eigenvalues_for,
    eigenvectors_for,
    transformations_for,
)
from closedform.checking.judging.spectrum import polynomial_of, roots_claimed
from closedform.checking.standing.author import Entry
from closedform.checking.standing.ground import SPECTRAL, Ground
from closedform.checking.standing.setting import Setting
from closedform.checking.values.exact import Value
from closedform.checking.values.exponential import eigenvalues_of, matrix_exponential
from closedform.checking.values.matrices import (
    ExactMatrix,
    characteristic_coefficients,
    column,
    diagonal,
    identity,
)
from closedform.notation.written.tree import Symbol, Written, walk

__all__ = ["carried_from"]

OUTSIDE = (NotJudgedError, NotElementaryError, ZeroDivisionError)
Rule = Callable[[Claim, Setting, Ground], int | None]
MOST = 24
"""So many ways of working a line out from earlier ones are tried."""


@dataclass(frozen=True, slots=True)
class Derived:
    """A value that follows from earlier lines; `root` is the earliest wrong one it rests on."""

    value: Value
    root: int | None = None

    def joined(self, value: Value, *others: Derived) -> Derived:
        """Return a value worked out from this and others."""
        roots = [d.root for d in (self, *others) if d.root is not None]
        return Derived(value, min(roots, default=None))


def carried_from(claim: Claim, setting: Setting) -> int | None:
    """Return the number of the wrong line from which a failing line follows, or None.

    The line has to be what the author's earlier lines give, one of them wrong.
    """
    if not claim.values or all(entry.root is None for entry in setting.author.entries):
        return None
    opened = setting.opened(claim.values[-1])
    ground = setting.ground_for(opened)
    if claim.at is not None and len(ground.stretches) > 1:
        ground = _at_instant(claim, setting, ground)
    scope = setting.scope_of(ground)
    tried = 0
    for derived in _rooted(claim, setting, ground):
        tried += 1
        if tried > MOST:
            break
        try:
            found = compare(opened, derived.value, scope, ground, approximate=claim.approximate)
        except OUTSIDE:
            continue
        if found.passes:
            return derived.root
    return _special(claim, setting, ground)


def _at_instant(claim: Claim, setting: Setting, ground: Ground) -> Ground:
    """Return the ground on the interval in which the instant of a value lies."""
    assert claim.at is not None  # noqa: S101  asked for before
    at = setting.value(claim.at, ground)
    for stretch in reversed(ground.stretches):
        if isinstance(at, Element) and (at - stretch.start).sign() in (0, 1):
            return ground.within(stretch)
    return ground


def _rooted(claim: Claim, setting: Setting, ground: Ground) -> Iterator[Derived]:
    """Yield the values for a claim that rest on a wrong line; what cannot be worked out, not."""
    ways = {
        "exp A": _transitions,
        "exp J": _block_exponentials,
        "P inverse": _inverses,
        "P": _transformations,
        "J": _canonical,
    }
    if claim.says in ways:
        found = ways[claim.says](setting, ground)
    elif claim.says in ("solution", "output"):
        found = _solutions(claim.subject, setting, ground)
    elif claim.says in ("value", "initial value") and claim.at is not None:
        found = _values(claim, setting, ground)
    elif claim.says == "steady state":
        found = _steady(claim, setting, ground)
    elif claim.says == "characteristic polynomial":
        found = _polynomials(setting, ground)
    else:
        found = iter(())
    while True:
        try:
            derived = next(found)
        except StopIteration:
            return
        except OUTSIDE:
            return
        if derived.root is not None:
            yield derived


def _stated(says: str, setting: Setting, ground: Ground) -> Iterator[Derived]:
    """Yield the author's matrices of a kind, the latest first."""
    for entry in setting.author.all(says):
        value = _value_of(entry, setting, ground)
        if value is not None:
            yield Derived(value, entry.root)


def _value_of(entry: Entry, setting: Setting, ground: Ground) -> Value | None:
    try:
        return setting.value(entry.value, ground)
    except OUTSIDE:
        return None


def _matrices(says: str, setting: Setting, ground: Ground) -> Iterator[Derived]:
    for derived in _stated(says, setting, ground):
        if isinstance(derived.value, ExactMatrix) and derived.value.is_square:
            yield derived


def _transformations(setting: Setting, ground: Ground) -> Iterator[Derived]:
    """Yield matrices whose columns are the author's eigenvectors, in the order of stating."""
    columns: list[Derived] = []
    for entry in setting.author.entries:
        if entry.says in ("eigenvector", "generalized eigenvector"):
            value = _value_of(entry, setting, ground)
            if isinstance(value, ExactMatrix):
                shaped = value if value.shape[1] == 1 else value.transposed
                columns.append(Derived(shaped, entry.root))
    vectors = [d.value for d in columns if isinstance(d.value, ExactMatrix)]
    if len(vectors) == ground.size and all(v.shape == (ground.size, 1) for v in vectors):
        rows = tuple(zip(*(v.entries for v in vectors), strict=True))
        matrix = ExactMatrix(ground.field, rows)
        yield columns[0].joined(matrix, *columns[1:])


def _diagonals(setting: Setting, ground: Ground) -> Iterator[Derived]:
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
        yield from _as_far_as_known(_of_quantities(setting, ground))


DEGREE = 2


def _of_quantities(setting: Setting, ground: Ground) -> Iterator[Derived]:
    """Yield the roots of s^2 + 2 zeta omega s + omega^2 for a wrong zeta or omega_n."""
    field = ground.field
    trace, product = ground.matrix.trace(), ground.matrix.determinant()
    natural = [Derived(field.sqrt(product)), *_stated("natural frequency", setting, ground)]
    ratio = [
        Derived(-trace / (field.number(2) * field.sqrt(product))),
        *_stated("damping ratio", setting, ground),
    ]
    omega, zeta = natural[-1], ratio[-1]
    if isinstance(omega.value, Element) and isinstance(zeta.value, Element):
        half, root = zeta.value * omega.value, field.sqrt(zeta.value**2 - field.one) * omega.value
        yield omega.joined(diagonal(field, [root - half, -root - half]), zeta)


def _canonical(setting: Setting, ground: Ground) -> Iterator[Derived]:
    yield from _diagonals(setting, ground)
    for matrix in _matrices("P", setting, ground):
        if isinstance(matrix.value, ExactMatrix):
            yield matrix.joined(matrix.value.inverse() @ ground.matrix @ matrix.value)


def _block_exponentials(setting: Setting, ground: Ground) -> Iterator[Derived]:
    """Yield e^(Jt) of the author's J, or of the diagonal of the author's eigenvalues."""
    candidates = ground.eigenvalues
    for says in ("J", "real form"):
        for matrix in _matrices(says, setting, ground):
            if isinstance(matrix.value, ExactMatrix):
                yield matrix.joined(matrix_exponential(matrix.value, candidates))
    for matrix in _diagonals(setting, ground):
        if isinstance(matrix.value, ExactMatrix):
            yield matrix.joined(matrix_exponential(matrix.value))


def _inverses(setting: Setting, ground: Ground) -> Iterator[Derived]:
    for matrix in (*_matrices("P", setting, ground), *_transformations(setting, ground)):
        if isinstance(matrix.value, ExactMatrix):
            yield matrix.joined(matrix.value.inverse())


def _transitions(setting: Setting, ground: Ground) -> Iterator[Derived]:
    """Yield e^(At) as the author's P, e^(Jt) and P^(-1) give it, or the author's own."""
    yield from _matrices("exp A", setting, ground)
    for matrix in _matrices("matrix", setting, ground):
        if isinstance(matrix.value, ExactMatrix) and matrix.root is not None:
            yield from _as_far_as_known(_exponential(matrix))
    left = [*_matrices("P", setting, ground), *_transformations(setting, ground)]
    middle = [
        *_matrices("exp J", setting, ground),
        *_as_far_as_known(_block_exponentials(setting, ground)),
    ]
    if _is_canonical_itself(setting, ground):
        left.append(Derived(identity(ground.field, ground.size)))
    for p in left:
        for e in middle or list(_own_exponentials(p, ground)):
            yield from _as_far_as_known(_product(p, e, setting, ground))
    for e in middle if not left else ():
        for p in _own_vectors(e, setting, ground):
            yield from _as_far_as_known(_product(p, e, setting, ground))
    yield from _as_far_as_known(_companions(setting, ground))


def _as_far_as_known(found: Iterator[Derived]) -> Iterator[Derived]:
    """Yield what can be worked out: the first that cannot is the last."""
    while True:
        try:
            yield next(found)
        except (StopIteration, *OUTSIDE):
            return


def _exponential(matrix: Derived) -> Iterator[Derived]:
    if isinstance(matrix.value, ExactMatrix):
        yield matrix.joined(matrix_exponential(matrix.value))


def _product(p: Derived, e: Derived, setting: Setting, ground: Ground) -> Iterator[Derived]:
    """Yield P e^(Jt) P^(-1), with the author's P^(-1) and with the right one."""
    assert isinstance(p.value, ExactMatrix)  # noqa: S101  made so
    assert isinstance(e.value, ExactMatrix)  # noqa: S101
    for q in (*_matrices("P inverse", setting, ground), p.joined(p.value.inverse())):
        assert isinstance(q.value, ExactMatrix)  # noqa: S101
        yield p.joined(p.value @ e.value @ q.value, e, q)


def _own_exponentials(p: Derived, ground: Ground) -> Iterator[Derived]:
    """Yield e^(Jt) for a P that was stated without J: its columns tell the order."""
    assert isinstance(p.value, ExactMatrix)  # noqa: S101
    if p.root is None:
        product = p.value.inverse() @ ground.matrix @ p.value
        yield Derived(matrix_exponential(product, ground.eigenvalues))
        return
    for values in eigenvalues_for(p.value, ground):
        yield Derived(matrix_exponential(diagonal(ground.field, values)))


def _own_vectors(e: Derived, setting: Setting, ground: Ground) -> Iterator[Derived]:
    """Yield P for an e^(Jt) that was stated without P: that of a right J, or of a diagonal one."""
    assert isinstance(e.value, ExactMatrix)  # noqa: S101
    for form in _matrices("J", setting, ground):
        if form.root is None and isinstance(form.value, ExactMatrix):
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
    for matrix in _matrices("J", setting, ground):
        if isinstance(matrix.value, ExactMatrix) and (matrix.value - ground.matrix).is_zero:
            return True
    return False


def _polynomials(setting: Setting, ground: Ground) -> Iterator[Derived]:
    variable = ground.field.name(SPECTRAL)
    for matrix in _matrices("matrix", setting, ground):
        if isinstance(matrix.value, ExactMatrix):
            total = ground.field.zero
            for c in reversed(characteristic_coefficients(matrix.value)):
                total = total * variable + c
            yield matrix.joined(total)


def _companions(setting: Setting, ground: Ground) -> Iterator[Derived]:
    """Yield e^(Ct) for the companion matrix of the author's eigenvalues, for one unknown."""
    jets = ground.truth.jets
    if len({name for name, _ in jets}) != 1 or [k for _, k in jets] != list(range(len(jets))):
        return
    for matrix in _diagonals(setting, ground):
        assert isinstance(matrix.value, ExactMatrix)  # noqa: S101
        coefficients = characteristic_coefficients(matrix.value)
        zero, one, size = ground.field.zero, ground.field.one, ground.size
        rows = [tuple(one if j == i + 1 else zero for j in range(size)) for i in range(size - 1)]
        rows.append(tuple(-c for c in coefficients[:-1]))
        companion = ExactMatrix(ground.field, tuple(rows))
        values = eigenvalues_of(matrix.value)
        yield matrix.joined(matrix_exponential(companion, values))


def _solutions(subject: str, setting: Setting, ground: Ground) -> Iterator[Derived]:
    """Yield what the author's earlier lines give for a solution."""
    for entry in setting.author.all("solution", subject):
        value = _value_of(entry, setting, ground)
        if value is not None:
            yield Derived(value, entry.root)
    yield from _from_derivatives(subject, setting, ground)
    stretch = ground.stretches[-1]
    initial = ground.initial
    whole = subject == "vector" or ground.facts.has_vector(subject)
    for particular in _from_particular(setting, ground):
        yield _entry(particular, subject, ground, whole)
    if initial is None:
        return
    forced = ground.column(stretch) - ground.transition @ initial
    for transition in _transitions(setting, ground):
        assert isinstance(transition.value, ExactMatrix)  # noqa: S101
        if transition.value.shape == (ground.size, ground.size):
            found = transition.joined(transition.value @ initial + forced)
            yield _entry(found, subject, ground, whole)
    limits = [entry.limit() for entry in ground.column(stretch).entries]
    known = [entry for entry in limits if entry is not None]
    if len(known) != ground.size:
        return
    rest = column(ground.field, known)
    for transition in _of_time_constant(setting, ground):
        if isinstance(transition.value, ExactMatrix):
            found = transition.joined(rest + transition.value @ (initial - rest))
            yield _entry(found, subject, ground, whole)


def _of_time_constant(setting: Setting, ground: Ground) -> Iterator[Derived]:
    """Yield e^(At) of a single state, as the author's time constant gives it."""
    for entry in setting.author.all("time constant") if ground.size == 1 else ():
        value = _value_of(entry, setting, ground)
        if isinstance(value, Element):
            rate = diagonal(ground.field, [-(ground.field.one / value)])
            yield Derived(matrix_exponential(rate), entry.root)


def _entry(found: Derived, subject: str, ground: Ground, whole: bool) -> Derived:  # noqa: FBT001
    if whole:
        return found
    assert isinstance(found.value, ExactMatrix)  # noqa: S101
    states = ground.truth.states
    if subject in states:
        return found.joined(found.value.rows[states.index(subject)][0])
    base = subject.rstrip("'")
    if base not in states:
        raise NotJudgedError("it is no state")
    value = found.value.rows[states.index(base)][0]
    for _ in range(len(subject) - len(base)):
        value = value.derivative()
    return found.joined(value)


def _from_derivatives(subject: str, setting: Setting, ground: Ground) -> Iterator[Derived]:
    """Yield the derivative of the author's x for x', and the author's row of a column."""
    base = subject.rstrip("'")
    for order in range(len(subject) - len(base)):
        for entry in setting.author.all("solution", base + "'" * order):
            value = _value_of(entry, setting, ground)
            if isinstance(value, Element):
                for _ in range(len(subject) - len(base) - order):
                    value = value.derivative()
                yield Derived(value, entry.root)
    for entry in setting.author.all("solution"):
        if ground.facts.has_vector(entry.claim.subject) or entry.claim.subject == "vector":
            value = _value_of(entry, setting, ground)
            if isinstance(value, ExactMatrix) and value.shape == (ground.size, 1):
                yield _entry(Derived(value, entry.root), subject, ground, whole=False)


def _from_particular(setting: Setting, ground: Ground) -> Iterator[Derived]:
    """Yield the column x_p + e^(At) (x0 - x_p(0)) for the author's particular solution."""
    initial = ground.initial
    if initial is None:
        return
    found: dict[str, Derived] = {}
    for entry in (*setting.author.all("particular solution"), *setting.author.all("steady state")):
        value = _value_of(entry, setting, ground)
        if isinstance(value, Element):
            found.setdefault(entry.claim.subject, Derived(value, entry.root))
        elif isinstance(value, ExactMatrix) and value.shape == (ground.size, 1):
            yield _with_free(Derived(value, entry.root), ground, initial)
    entries: list[Derived] = []
    for name, order in ground.truth.jets:
        own = found.get(name)
        if own is None or not isinstance(own.value, Element):
            return
        value = own.value
        for _ in range(order):
            value = value.derivative()
        entries.append(own.joined(value))
    values = [d.value for d in entries if isinstance(d.value, Element)]
    yield _with_free(entries[0].joined(column(ground.field, values), *entries), ground, initial)


def _with_free(particular: Derived, ground: Ground, initial: ExactMatrix) -> Derived:
    assert isinstance(particular.value, ExactMatrix)  # noqa: S101
    start = ground.stretches[0].start
    rest = initial - particular.value.mapped(lambda e: e.at(start))
    moved = ground.transition.mapped(lambda e: e.shifted(-start))
    return particular.joined(particular.value + moved @ rest)


def _values(claim: Claim, setting: Setting, ground: Ground) -> Iterator[Derived]:
    assert claim.at is not None  # noqa: S101
    at = setting.value(claim.at, ground)
    if isinstance(at, ExactMatrix):
        return
    for function in _solutions(claim.subject, setting, ground):
        if isinstance(function.value, Element):
            yield function.joined(function.value.at(at))


def _steady(claim: Claim, setting: Setting, ground: Ground) -> Iterator[Derived]:
    for function in _solutions(claim.subject, setting, ground):
        if isinstance(function.value, Element):
            limit = function.value.limit()
            if limit is not None:
                yield function.joined(limit)
    for entry in setting.author.all("particular solution", claim.subject):
        value = _value_of(entry, setting, ground)
        if value is not None:
            yield Derived(value, entry.root)


def _special(claim: Claim, setting: Setting, ground: Ground) -> int | None:
    """Return the root for claims that are judged by a property, not by one value."""
    try:
        match claim.says:
            case "eigenvalues":
                return _roots_of_polynomial(claim, setting, ground)
            case "eigenvector" | "generalized eigenvector":
                return _vector_of(claim, setting, ground)
            case "P":
                return with_wrong_column(claim, setting, ground)
            case "transform":
                return by_transform(claim, setting, ground)
            case "solution":
                for rule in (by_transform, by_equation, by_limit):
                    root = _tried(rule, claim, setting, ground)
                    if root is not None:
                        return root
        return _by_functions(claim, setting, ground) or _by_definitions(claim, setting, ground)
    except OUTSIDE:
        return None


def _tried(rule: Rule, claim: Claim, setting: Setting, ground: Ground) -> int | None:
    try:
        return rule(claim, setting, ground)
    except OUTSIDE:
        return None


def _roots_of_polynomial(claim: Claim, setting: Setting, ground: Ground) -> int | None:
    """Return the root if all listed eigenvalues solve the author's wrong polynomial."""
    listed = [form for forms, _ in roots_claimed(claim) for form in forms[-1:]]
    for own in _as_far_as_known(_of_quantities(setting, ground)) if ground.size == DEGREE else ():
        if own.root is not None and isinstance(own.value, ExactMatrix):
            true = [own.value.rows[k][k] for k in range(DEGREE)]
            if all(_is_one_of(form, true, claim, setting, ground) for form in listed):
                return own.root
    for entry in setting.author.all("characteristic polynomial"):
        if entry.root is None:
            continue
        polynomial = polynomial_of(entry, setting, ground)
        values = [setting.value(forms[-1], ground) for forms, _ in roots_claimed(claim)]
        if polynomial is not None and all(
            isinstance(value, Element) and polynomial.substituted({SPECTRAL: value}).is_zero
            for value in values
        ):
            return entry.root
    for matrix in _matrices("matrix", setting, ground):
        if matrix.root is not None and isinstance(matrix.value, ExactMatrix):
            unit = identity(ground.field, ground.size)
            values = [setting.value(forms[-1], ground) for forms, _ in roots_claimed(claim)]
            if all(
                isinstance(v, Element) and (matrix.value - unit.scaled(v)).determinant().is_zero
                for v in values
            ):
                return matrix.root
    return None


def _is_one_of(
    form: Written, values: list[Element], claim: Claim, setting: Setting, ground: Ground
) -> bool:
    opened, scope = setting.opened(form), setting.scope_of(ground)
    return any(
        compare(opened, value, scope, ground, approximate=claim.approximate).passes
        for value in values
    )


def _vector_of(claim: Claim, setting: Setting, ground: Ground) -> int | None:
    """Return the root if a vector satisfies all but one row of (A - lambda I) v = 0.

    That is how a vector is worked out from an eigenvalue that is none.
    """
    vector = setting.value(claim.values[-1], ground)
    if not isinstance(vector, ExactMatrix):
        return None
    if vector.shape[1] != 1:
        vector = vector.transposed
    if vector.is_zero or vector.shape[0] != ground.size:
        return None
    unit = identity(ground.field, ground.size)
    matrices = [Derived(ground.matrix), *_matrices("matrix", setting, ground)]
    for matrix in matrices:
        assert isinstance(matrix.value, ExactMatrix)  # noqa: S101
        for own in _diagonals(setting, ground):
            assert isinstance(own.value, ExactMatrix)  # noqa: S101
            for k in range(ground.size):
                image = (matrix.value - unit.scaled(own.value.rows[k][k])) @ vector
                zeros = sum(entry.is_zero for entry in image.entries)
                root = matrix.joined(image, own).root
                if root is not None and zeros >= ground.size - (own.root is not None):
                    return root
    return None


def _by_functions(claim: Claim, setting: Setting, ground: Ground) -> int | None:
    """Return the root if the members agree once the author's own functions stand in them."""
    found = [setting.author.solution_in(value) for value in claim.values]
    roots = [root for _, root in found if root is not None]
    if not roots or len(found) < 2:
        return None
    first, scope = setting.value(found[0][0], ground), setting.scope_of(ground)
    for member, _ in found[1:]:
        opened = setting.opened(member)
        if not compare(opened, first, scope, ground, approximate=claim.approximate).passes:
            return None
    return min(roots)


def _by_definitions(claim: Claim, setting: Setting, ground: Ground) -> int | None:
    """Return the root if the members agree with one another, by way of a wrong definition."""
    roots = setting.author.definition_roots
    used = {n.name for v in claim.values for n in walk(v) if isinstance(n, Symbol)}
    found = [roots[name] for name in sorted(used & set(roots))]
    if not found or len(claim.values) < 2:
        return None
    first = setting.value(claim.values[0], ground)
    scope = setting.scope_of(ground)
    for member in claim.values[1:]:
        opened = setting.opened(member)
        if not compare(opened, first, scope, ground, approximate=claim.approximate).passes:
            return None
    return min(found)
