"""Judging general, particular and homogeneous solutions: what the free equations leave of them."""

from __future__ import annotations

from collections.abc import Iterator
from dataclasses import replace

from flint import acb, arb

from closedform.algebra.elementary import Element
from closedform.checking.claim import Claim
from closedform.checking.errors import NotJudgedError
from closedform.checking.judging.ansatz import fit, rank_of
from closedform.checking.judging.compare import has_decimals
from closedform.checking.judging.held import held_against
from closedform.checking.judging.open_constants import ansatz_note, constants_of, minus
from closedform.checking.judging.true_solutions import solution_value, stretches_meant
from closedform.checking.standing.ground import Ground
from closedform.checking.standing.setting import Finding, Setting
from closedform.checking.standing.stretch import Stretch
from closedform.checking.values.exact import exact
from closedform.checking.values.matrices import ExactMatrix, characteristic_coefficients, identity
from closedform.checking.values.scope import Value
from closedform.checking.values.written_back import written_back
from closedform.notation.written.tree import Literal, Written, walk

__all__ = ["free_residual", "judge_general", "judge_homogeneous", "judge_particular"]


def judge_general(claim: Claim, setting: Setting, constants: list[str]) -> Finding:
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
                difference = minus(value, solution_value(claim.subject, ground, stretch))
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
        return Finding("holds", notes=(ansatz_note(constants, fitted),))
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
