"""Judging functions of time: e^(Jt), e^(At), solutions and their parts, transforms, equations."""

from __future__ import annotations

from collections.abc import Callable, Iterator, Sequence
from dataclasses import replace
from functools import partial
from typing import Protocol

from flint import acb, arb

from closedform.algebra.elementary import Element, NotElementaryError
from closedform.checking.claim import Claim, Group
from closedform.checking.errors import NotJudgedError
from closedform.checking.judging.ansatz import Fit, fit, rank_of
from closedform.checking.judging.compare import has_decimals
from closedform.checking.judging.held import held_against
from closedform.checking.judging.similar import is_block_form, is_similar
from closedform.checking.judging.transforms import laplace, laplace_in_pieces
from closedform.checking.judging.vectors import (
    authors_diagonal,
    authors_matrix,
    matrix_value,
    right_products,
)
from closedform.checking.standing.ground import SPECTRAL, Ground, Stretch
from closedform.checking.standing.setting import Finding, Setting
from closedform.checking.values.exact import Value, applies, exact
from closedform.checking.values.exponential import matrix_exponential
from closedform.checking.values.matrices import (
    ExactMatrix,
    characteristic_coefficients,
    column,
    identity,
)
from closedform.checking.values.written_back import written_back
from closedform.notation.written.plain_form import plain_written
from closedform.notation.written.tree import (
    Array,
    Jet,
    Literal,
    Power,
    Range,
    Symbol,
    Transform,
    Written,
    walk,
)

__all__ = [
    "constants_of",
    "free_residual",
    "judge_block_exponential",
    "judge_homogeneous",
    "judge_particular",
    "judge_resolvent",
    "judge_solution",
    "judge_steady",
    "judge_transform",
    "judge_transition",
    "laplace",
    "solution_value",
    "stretches_meant",
]


def judge_transition(claim: Claim, setting: Setting) -> Finding:
    """Judge e^(At), or its value at an instant."""

    def true(ground: Ground) -> Value:
        if claim.at is None:
            return ground.transition
        instant = setting.value(claim.at, ground)
        if isinstance(instant, ExactMatrix):
            raise NotJudgedError("a matrix stands where an instant is wanted")
        return ground.transition.mapped(lambda entry: entry.at(instant))

    constants = constants_of(claim, setting)
    if constants and claim.at is None:
        return _open_member(claim, setting, constants, true, lambda member: member)

    def right(ground: Ground) -> Written | None:
        rows = ground.truth.transition
        if claim.at is not None:
            return written_back(true(ground))
        if ground.scope.symbols == setting.ground.scope.symbols and rows is not None:
            return Array(rows)
        return written_back(ground.transition)

    return held_against(claim, setting, true, right)


def judge_block_exponential(claim: Claim, setting: Setting) -> Finding:
    """Judge e^(Jt), for the author's J if that is right.

    Without a J that is similar to A, the line has to be the exponential of a matrix in
    blocks that is.
    """

    def own(ground: Ground) -> ExactMatrix | None:
        for says in ("J", "real form"):
            entry = setting.author.last(says)
            if entry is not None and entry.root is not None:
                asked = [product for product, _ in right_products(setting, ground)]
                return asked[0] if asked else None
            found = authors_matrix(says, setting, ground)
            if found is not None and found.shape == ground.matrix.shape:
                return found if is_similar(found, ground) else None
        return None

    def true(ground: Ground) -> Value:
        matrix = own(ground)
        if matrix is None:
            raise NotJudgedError("no J is stated")
        return matrix_exponential(matrix, ground.eigenvalues)

    if own(setting.ground) is not None:
        return held_against(claim, setting, true, lambda ground: written_back(true(ground)))
    return _any_block_exponential(claim, setting)


def _any_block_exponential(claim: Claim, setting: Setting) -> Finding:
    ground = setting.ground_for(*map(setting.opened, claim.values))
    value = matrix_value(claim.values[-1], setting, ground)
    if value.shape != (ground.size, ground.size):
        return Finding("fails", "it has not the size of A")
    rate = value.mapped(Element.derivative).mapped(lambda e: e.at(ground.field.zero))
    diagonal = authors_diagonal(setting, ground) or ground.jordan
    if is_similar(rate, ground) and is_block_form(rate):
        found = matrix_exponential(rate, ground.eigenvalues)
        if (found - value).is_zero:
            return Finding("holds")
        return Finding("fails", "it is no exponential", written_back(found))
    right = None
    if diagonal is not None:
        right = written_back(matrix_exponential(diagonal))
    return Finding("fails", "it is not the exponential of a form of A in blocks", right)


def judge_solution(claim: Claim, setting: Setting) -> Finding:
    """Judge the solution of a state or output, or of all states as a column.

    With constants of integration that nothing defines it is judged as the general solution.
    """
    found = _inverse_transforms(claim, setting)
    if found is not None:
        return found
    constants = constants_of(claim, setting)
    if constants:
        return _general(claim, setting, constants)
    return _on_stretches(
        claim,
        setting,
        lambda ground, stretch: solution_value(claim.subject, ground, stretch),
        lambda ground: _solution_tree(claim.subject, ground),
    )


def _inverse_transforms(claim: Claim, setting: Setting) -> Finding | None:
    """Return what is wrong with members that are inverse transforms; None if nothing is.

    What stands in the braces has to be the transform of the function, as far as it is judged.
    """
    for member in claim.values:
        match member:
            case Transform(body, back=True) if not isinstance(body, Jet):
                group = Group((), (body,))
                inside = replace(claim, says="transform", groups=(group,))
                try:
                    finding = judge_transform(inside, setting)
                except (NotJudgedError, NotElementaryError):
                    continue
                if not finding.passes:
                    reason = "what is transformed back is not the transform"
                    return replace(finding, reason=f"{reason}: {finding.reason}".rstrip(": "))
    return None


def solution_value(subject: str, ground: Ground, stretch: Stretch) -> Value:
    """Return the true solution of a state, a derivative, an output, or of all states.

    Raises NotJudgedError if the model has nothing of that name.
    """
    if subject == "vector" or ground.facts.has_vector(subject.rstrip("'")):
        value = ground.column(stretch)
        for _ in range(len(subject) - len(subject.rstrip("'"))):
            value = value.mapped(Element.derivative)
        return value
    found = ground.function(subject, stretch)
    if found is None:
        base = subject.rstrip("'")
        found = ground.function(base, stretch)
        if found is None:
            raise NotJudgedError(f"the model has no state, unknown or output called {base}")
        for _ in range(len(subject) - len(base)):
            found = found.derivative()
    return found


def _solution_tree(subject: str, ground: Ground) -> Written | None:
    if len(ground.stretches) != 1:
        return None
    tree = ground.piece_tree(subject, ground.stretches[0])
    if tree is not None and not ground.put_in:
        return tree
    try:
        return written_back(solution_value(subject, ground, ground.stretches[0]))
    except NotJudgedError:
        return None


class SolutionOn(Protocol):
    """The true value of a claim on an interval."""

    def __call__(self, ground: Ground, stretch: Stretch) -> Value:
        """Return it."""


def _on_stretches(
    claim: Claim,
    setting: Setting,
    true: SolutionOn,
    right: Callable[[Ground], Written | None],
) -> Finding:
    """Judge the members of a claim on every interval to which the line applies."""
    findings = []
    for stretch in stretches_meant(claim, setting):
        inside = replace(setting, ground=setting.ground.within(stretch))
        findings.append(held_against(claim, inside, partial(true, stretch=stretch), right))
    worst = next((f for f in findings if not f.passes), None)
    if worst is not None:
        return worst
    digits = next((f for f in findings if f.word == "holds to the digits shown"), None)
    return digits or findings[0]


def stretches_meant(claim: Claim, setting: Setting) -> Iterator[Stretch]:
    """Yield the intervals that the conditions beside a line leave; all if there are none."""
    ground = setting.ground
    ranges = [r for statement in claim.statements for r in statement.conditions]
    timed = [r for r in ranges if Symbol(ground.facts.time) in r.members and "→" not in r.signs]
    found = False
    for stretch in ground.stretches:
        if all(_inside(range_, stretch, setting) for range_ in timed):
            found = True
            yield stretch
    if not found:
        raise NotJudgedError("no interval of the solution lies in the range that is stated")


def _inside(range_: Range, stretch: Stretch, setting: Setting) -> bool:
    scope = replace(setting.scope_of(setting.ground), instant=stretch.inside)
    return applies(range_, scope)


def constants_of(claim: Claim, setting: Setting) -> list[str]:
    """Return the names of constants of integration: those that nothing gives a meaning."""
    facts = setting.ground.facts
    opened = [setting.opened(value) for value in claim.values]
    names = {n.name for tree in opened for n in walk(tree) if isinstance(n, Symbol)}
    single = claim.says not in OF_MATRICES and not any(
        isinstance(n, Array) for tree in opened for n in walk(tree)
    )
    raised = {n.name for tree in opened for n in _exponents(tree) if isinstance(n, Symbol)}
    unknown = names - facts.names - ((raised & {"A", "J"}) if single else {"A", "P", "J"})
    if claim.says == "transform":
        unknown -= {"s", "p", SPECTRAL}
    shaped = {name for name in unknown if name.rstrip("0123456789_") in CONSTANTS}
    return sorted(unknown) if unknown and unknown == shaped else []


def _exponents(tree: Written) -> Iterator[Written]:
    """Yield what stands in the exponents of e."""
    for node in walk(tree):
        if isinstance(node, Power):
            yield from walk(node.exponent)


CONSTANTS = frozenset({"c", "C", "k", "K", "a", "A", "B", "b", "alpha", "beta", "D", "E", "F"})
"""Letters that constants of integration go by (common practice)."""
OF_MATRICES = ("exp A", "resolvent")


def _general(claim: Claim, setting: Setting, constants: list[str]) -> Finding:
    """Judge a general solution: the true one plus functions that the free equation allows."""
    whole = claim.says != "homogeneous solution"
    return _modulo_free(claim, setting, whole=whole, constants=constants)


def judge_particular(claim: Claim, setting: Setting) -> Finding:
    """Judge a particular solution: it may differ from another by any free response."""
    return _modulo_free(claim, setting, whole=True, constants=constants_of(claim, setting))


def judge_homogeneous(claim: Claim, setting: Setting) -> Finding:
    """Judge a solution of the free equations."""
    return _modulo_free(claim, setting, whole=False, constants=constants_of(claim, setting))


def _modulo_free(claim: Claim, setting: Setting, *, whole: bool, constants: list[str]) -> Finding:
    """Judge whether a function, less the true solution if `whole`, satisfies the free equations.

    A column x has to satisfy x' = A x; a single function is sent to zero by the
    characteristic polynomial in d/dt, as every component of a free response is.
    """
    last: Finding | None = None
    for stretch in stretches_meant(claim, setting):
        for member in claim.values:
            opened = setting.opened(member)
            ground = setting.ground_for(opened).within(stretch)
            scope = setting.scope_of(ground)
            scope = scope.with_symbols({c: ground.field.name(c) for c in constants})
            value = exact(opened, scope)
            difference = value
            if whole:
                difference = _minus(value, solution_value(claim.subject, ground, stretch))
            rest = free_residual(difference, ground)
            if constants:
                last = _with_constants(claim, constants, (value, difference, rest), ground, stretch)
            elif rest.is_zero:
                last = Finding("holds")
            elif has_decimals(opened):
                last = _rounded_part(claim, setting, stretch)
            else:
                last = Finding(
                    "fails", "it does not satisfy the equations", _particular(claim, ground)
                )
            if not last.passes:
                return last
    if last is None:
        raise NotJudgedError("no function is given")
    return last


def _with_constants(
    claim: Claim,
    constants: list[str],
    found: tuple[Value, Value, Value],
    ground: Ground,
    stretch: Stretch,
) -> Finding:
    """Judge a function with open constants, less the true one, and put into the free equations.

    A general solution satisfies the equations whatever they are, and contains the true one; a
    free one has as many as it needs.  Any other is an ansatz, right if some values make it so.
    """
    value, difference, rest = found
    start = stretch.start
    if not rest.is_zero:
        partly = claim.says == "particular solution"
        fitted = fit(rest if partly else difference, constants, ground, start)
        if fitted is None or claim.says == "homogeneous solution":
            if _may_be_rounded(claim, value, rest, ground):
                raise NotJudgedError("decimals beside open constants are not judged")
            return Finding("fails", "it does not satisfy the equations", _particular(claim, ground))
        return Finding("holds", notes=(_ansatz_note(constants, fitted),))
    if claim.says == "homogeneous solution":
        wanted = _freedom(claim.subject, ground)
        if wanted is not None and rank_of(value, constants, ground, start) < wanted:
            return Finding("fails", f"it has fewer than {wanted} independent constants")
    elif claim.says != "particular solution" and fit(difference, constants, ground, start) is None:
        return Finding("fails", "no constants give it the initial values")
    return Finding("holds", notes=_count_note(constants))


def _may_be_rounded(claim: Claim, value: Value, rest: Value, ground: Ground) -> bool:
    """Whether the decimals of a claim could be why the equations leave a small rest.

    That is so unless the rest is larger, against the terms of the equation, than the sum of all
    relative errors, each twice what rounding makes.
    """
    literals = [n for v in claim.values for n in walk(v) if isinstance(n, Literal)]
    errors = [n.last_place / n.value for n in literals if n.is_decimal and n.value]
    if not errors:
        return False
    whole = sum((_size(part, ground) for part in _terms_of_equation(value, ground)), arb(0))
    return not _size(rest, ground) > whole * (arb(sum(errors).numerator) / sum(errors).denominator)


def _terms_of_equation(value: Value, ground: Ground) -> Iterator[Value]:
    """Yield the terms of which `free_residual` is the sum."""
    if isinstance(value, ExactMatrix):
        yield value.mapped(Element.derivative)
        yield ground.matrix @ value
        return
    derivative = value
    for coefficient in characteristic_coefficients(ground.matrix):
        yield coefficient * derivative
        derivative = derivative.derivative()


def _size(value: Value, ground: Ground) -> arb:
    """Return the size of a function at an instant, open constants being 1."""
    total, known = arb(0), ground.sampled()
    for entry in value.entries if isinstance(value, ExactMatrix) else (value,):
        names = {name: known.get(name, arb(1)) for name in entry.free_names}
        total += abs(entry.enclosure(acb(arb(3) / 7), names))
    return total


def _ansatz_note(constants: list[str], fitted: Fit) -> str:
    values = [
        f"{n} = {plain_written(written_back(v))}"
        for n, v in zip(constants, fitted.values, strict=True)
    ]
    return f"an ansatz, which holds for {', '.join(values)}"


def _freedom(subject: str, ground: Ground) -> int | None:
    """Return how many constants the free motion of a state has: the rank of c, cA, cA^2, ..."""
    if subject == "vector" or ground.facts.has_vector(subject):
        return ground.size
    if subject not in ground.truth.states:
        return None
    place = ground.truth.states.index(subject)
    row = ExactMatrix(ground.field, (identity(ground.field, ground.size).rows[place],))
    rows = []
    for _ in range(ground.size):
        rows.append(row.rows[0])
        row = row @ ground.matrix
    return ExactMatrix(ground.field, tuple(rows)).rank()


def _rounded_part(claim: Claim, setting: Setting, stretch: Stretch) -> Finding:
    """Judge a part of the solution with decimals against the one that the model has."""
    pieces = setting.ground.truth.particular.get(claim.subject, ())
    if claim.says != "particular solution" or len(pieces) != 1:
        raise NotJudgedError("a part of the solution with decimals is not judged here")
    inside = replace(setting, ground=setting.ground.within(stretch))

    def true(ground: Ground) -> Value:
        return ground.number(ground.truth.particular[claim.subject][0].formula)

    return held_against(claim, inside, true, lambda ground: written_back(true(ground)))


def _count_note(constants: list[str]) -> tuple[str, ...]:
    if not constants:
        return ()
    return (f"a general solution with the constants {', '.join(constants)}",)


def _minus(one: Value, other: Value) -> Value:
    match one, other:
        case Element(), Element():
            return one - other
        case ExactMatrix(), ExactMatrix():
            return one - other
    raise NotJudgedError("a function stands where a column is wanted, or the other way round")


def free_residual(value: Value, ground: Ground) -> Value:
    """Return a function put into the free equations: zero if it is a free response.

    Of a column it is x' - A x, of a single function p(d/dt) x for the characteristic polynomial.
    """
    if isinstance(value, ExactMatrix):
        return value.mapped(Element.derivative) - ground.matrix @ value
    total, derivative = ground.field.zero, value
    for coefficient in characteristic_coefficients(ground.matrix):
        total, derivative = total + coefficient * derivative, derivative.derivative()
    return total


def _particular(claim: Claim, ground: Ground) -> Written | None:
    if claim.says != "particular solution":
        return None
    pieces = ground.truth.particular.get(claim.subject, ())
    return pieces[0].formula if len(pieces) == 1 and not ground.put_in else None


def judge_steady(claim: Claim, setting: Setting) -> Finding:
    """Judge a steady state: the limit, or what persists when the free response has died away."""

    def true(ground: Ground) -> Value:
        names = ground.truth.states if _is_vector(claim, ground) else (claim.subject,)
        values = [_steady_value(name, ground) for name in names]
        return column(ground.field, values) if _is_vector(claim, ground) else values[0]

    def right(ground: Ground) -> Written | None:
        try:
            return written_back(true(ground))
        except NotJudgedError:
            return None

    finding = held_against(claim, setting, true, right)
    if finding.passes or not finding.pairs:
        return finding
    return finding


def _is_vector(claim: Claim, ground: Ground) -> bool:
    return claim.subject == "vector" or ground.facts.has_vector(claim.subject)


def _steady_value(name: str, ground: Ground) -> Element:
    tree = ground.truth.steady.get(name)
    if tree is not None:
        return ground.number(tree)
    last = ground.stretches[-1]
    value = solution_value(name, ground, last)
    limit = value.limit() if isinstance(value, Element) else None
    if limit is None:
        raise NotJudgedError(f"{name or 'the model'} has no steady state that is known")
    return limit


def judge_transform(claim: Claim, setting: Setting) -> Finding:
    """Judge the Laplace transform of a solution from the time 0 on, in pieces or in one."""
    ground = setting.ground
    if not ground.stretches[0].start.is_zero:
        raise NotJudgedError("the transform is held against a solution that begins at 0 only")

    def true(ground: Ground) -> Value:
        values = [solution_value(claim.subject, ground, stretch) for stretch in ground.stretches]
        return laplace_in_pieces(values, ground)

    def prepare(member: Written) -> Written:
        known = ground.facts.names
        names = {n.name for n in walk(member) if isinstance(n, Symbol)} - known
        names -= set(constants)
        if len(names) != 1:
            raise NotJudgedError("it is not told which name is the variable of the transform")
        return setting.renamed(member, names)

    constants = constants_of(claim, setting)
    closed = tuple(v for v in claim.values if not _has_names(setting.opened(v), constants))
    if len(closed) < len(claim.values):
        found = _open_member(claim, setting, constants, true, prepare)
        if not found.passes or not closed:
            return found
    return held_against(
        claim,
        setting,
        true,
        lambda g: written_back(true(g), TRANSFORM_NAMES),
        prepare=prepare,
        values=closed,
    )


def _has_names(tree: Written, names: Sequence[str]) -> bool:
    return any(isinstance(node, Symbol) and node.name in names for node in walk(tree))


def _open_member(
    claim: Claim,
    setting: Setting,
    constants: Sequence[str],
    true: Callable[[Ground], Value],
    prepare: Callable[[Written], Written],
) -> Finding:
    """Judge the members with open constants: some values of these have to make them true."""
    notes: tuple[str, ...] = ()
    for member in claim.values:
        opened = setting.opened(member)
        if not _has_names(opened, constants):
            continue
        opened = prepare(opened)
        ground = setting.ground_for(opened)
        scope = setting.scope_of(ground)
        scope = scope.with_symbols({c: ground.field.name(c) for c in constants})
        difference = _minus(exact(opened, scope), true(ground))
        fitted = fit(difference, constants, ground, ground.stretches[0].start)
        if fitted is None:
            reason = f"no {', '.join(constants)} make it true"
            return Finding("fails", reason, written_back(true(ground), TRANSFORM_NAMES))
        notes = (_ansatz_note(list(constants), fitted),)
    return Finding("holds", notes=notes)


TRANSFORM_NAMES = {SPECTRAL: "s"}


def judge_resolvent(claim: Claim, setting: Setting) -> Finding:
    """Judge (s I - A)^(-1), whatever its variable is called."""

    def true(ground: Ground) -> Value:
        unit = identity(ground.field, ground.size)
        return (unit.scaled(ground.field.name(SPECTRAL)) - ground.matrix).inverse()

    def prepare(member: Written) -> Written:
        names = {n.name for n in walk(member) if isinstance(n, Symbol)}
        return setting.renamed(member, names - setting.ground.facts.names - {"A"})

    return held_against(
        claim, setting, true, lambda g: written_back(true(g), TRANSFORM_NAMES), prepare=prepare
    )
