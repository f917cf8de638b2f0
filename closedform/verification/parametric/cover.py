"""That the cases cover the domain: no point of it is left out silently.

At every branch the points of the domain fall apart into those where no exceptional
polynomial vanishes, which its formulas cover, and those where one does.  So it is enough
that each branch's list is complete, and that each item of it is excluded, or leads to a
branch on which it vanishes, or is reported as not covered.
"""

from __future__ import annotations

from collections.abc import Iterator, Mapping
from fractions import Fraction
from functools import lru_cache
from random import Random

from closedform.algebra.branches import Branch, Exceptional
from closedform.algebra.domain import Comparison, ParameterDomain
from closedform.algebra.equations import linear_solution
from closedform.algebra.exceptional import discriminant_of
from closedform.algebra.field import Scalar
from closedform.algebra.known_roots import has_known_roots
from closedform.algebra.parameter_field import ParameterField
from closedform.algebra.sample import PointValue, holds_at
from closedform.errors import Place
from closedform.notation import plain, read_formula
from closedform.notation.rational import rational_value
from closedform.response.parametric.case import Case
from closedform.response.parametric.conditions import WrittenComparison
from closedform.response.parametric.response import ParametricResponse
from closedform.verification.parametric.cells import cell_fault
from closedform.verification.parametric.conditions import follows, is_empty
from closedform.verification.parametric.identities import vanishes_on
from closedform.verification.record import Check

__all__ = ["applying_cases", "cover_check", "cover_points_check"]

_SMALL = tuple(Fraction(n) for n in (1, 2, 3, -1, -2, 0))
_SOUGHT = 40


def cover_check(response: ParametricResponse) -> Check:
    """Every branch's exceptional set is complete, and accounted for."""
    item = "the cases cover the domain"
    open_ones = 0
    for branch in response.branches:
        listed = {e.polynomials[0] for e in branch.exceptional if len(e.polynomials) == 1}
        for polynomial in _must_not_vanish(response.model.field, branch):
            if polynomial not in listed:
                how = f"{polynomial} may vanish on branch {branch.number} and is not listed"
                return Check(item, "refuted", how)
        for exceptional in branch.exceptional:
            if exceptional.fate == "not covered":
                open_ones += 1
            elif exceptional.fate == "branch":
                fault = _target_fault(response, branch, exceptional)
                if fault is not None:
                    return Check(item, "refuted", fault)
            elif not _is_excluded(response.model.field, branch, exceptional):
                return Check(item, "refuted", f"no reason excludes {exceptional.polynomials[0]}")
        fault = cell_fault(response, branch)
        if fault is not None:
            return Check(item, "refuted", fault)
    split = (
        "on every branch its formulas hold, or a denominator or discriminant vanishes, which is "
        "excluded or is a branch of its own; each combination of signs has one case"
    )
    if open_ones:
        split += f", but for {open_ones} listed as not covered"
    return Check(item, "proved", split)


def _target_fault(
    response: ParametricResponse, branch: Branch, exceptional: Exceptional
) -> str | None:
    """Return why a branch does not take over where the polynomials vanish, or None.

    They vanish on that branch.  Points that two branches share are left to one of them by a
    branch that both of them lead out of, and that has the polynomials in its list.
    """
    field = response.model.field
    target = response.branches[exceptional.branch or 0]
    if not exceptional.shared:
        for polynomial in exceptional.polynomials:
            if not vanishes_on(target, field.substituted(polynomial, target.values)):
                return f"{polynomial} does not vanish on branch {target.number}"
        return None
    for other in response.branches[: branch.number]:
        for item in other.exceptional:
            left = tuple(field.substituted(p, branch.values) for p in item.polynomials)
            known = not item.shared and item.fate == "branch" and item.branch == target.number
            if known and left == exceptional.polynomials:
                return None
    return f"nothing leaves what branch {branch.number} shares to branch {target.number}"


def _is_excluded(field: ParameterField, branch: Branch, exceptional: Exceptional) -> bool:
    """Whether the polynomials vanish together nowhere on a branch, for the reason that is given.

    The sign that was given as reason is that of one of them, and is found once more;
    conditions that contradict each other follow from the domain where they vanish.
    """
    left = [field.substituted(p, branch.values) for p in exceptional.polynomials]
    where = branch.domain.narrowed(*(Comparison(p, "=") for p in left))
    argument = exceptional.argument
    if argument is None:
        contradicted = exceptional.contradicted
        reason = ParameterDomain(field, contradicted).contradiction() is not None and all(
            follows(field, where, c) for c in contradicted
        )
    elif len(left) == 1 and branch.relation is None:
        same = argument.element in (*exceptional.polynomials, *left)
        reason = same and branch.domain.sign_of(argument.element).sign == argument.sign
    elif len(left) == 1:  # or it is about what the relation is where the polynomial vanishes
        solved = {n: linear_solution(field, left[0], n) for n in field.parameters}
        put = [{name: value} for name, value in solved.items() if value is not None]
        relations = [field.substituted(branch.relation, values) for values in put]
        parts = [f for relation in relations if relation for f in _factors(field, relation)]
        reason = argument.element in (*exceptional.polynomials, *left, *relations, *parts)
    else:  # it may be about one of them where the others vanish
        reason = True
    return reason and is_empty(field, where)


def _must_not_vanish(field: ParameterField, branch: Branch) -> Iterator[Scalar]:
    """The irreducible polynomials among denominators and discriminants, found once more."""
    for term, structure in zip(branch.exponential.terms, branch.structures, strict=True):
        elements = [
            e
            for residue in term.residues
            for matrix in residue.coefficients
            for row in matrix.to_list()
            for e in row
            if e
        ]
        for element in elements:
            yield from _factors(field, field.of_polynomial(element.denom))
        factor = term.factor
        for c in factor.polynomial:
            for made in _factors(field, field.of_polynomial(c.denom)):
                if not branch.domain.sign_of(made).never_zero:
                    yield made
        if has_known_roots(field, factor.p):
            continue  # an irreducible polynomial in numbers: its roots are simple
        if factor.degree > 2 and factor.roots.form == "even" and factor.roots.squares is not None:
            yield from _factors(field, field.of_polynomial(factor.roots.squares.nth(0).numer))
        if factor.degree > 2 and (structure is None or structure.simple is None):
            squares = factor.roots.squares if factor.roots.form == "even" else None
            roots_of = factor.p if squares is None else squares
            yield from _factors(field, field.of_polynomial(discriminant_of(field, roots_of).numer))


def _factors(field: ParameterField, element: Scalar) -> Iterator[Scalar]:
    if field.number_sign(element) is None:
        for polynomial, _ in field.factored(element).factors:
            made = field.of_polynomial(polynomial)
            if field.number_sign(made) is None:
                yield made


def cover_points_check(response: ParametricResponse) -> Check:
    """At points of the domain, many of them on exceptional sets, exactly one case applies."""
    item = "one case applies"
    points = [*response.domain.sample(_SOUGHT // 2, seed=7), *_small_points(response)]
    if not response.model.field.free:
        points = points[:1]
    if not points:
        return Check(item, "not attempted", "no point of the domain was found", essential=False)
    complete = all(e.fate != "not covered" for b in response.branches for e in b.exceptional)
    for point in points:
        cases = applying_cases(response, point)
        if len(cases) > 1 or (complete and not cases):
            where = ", ".join(f"{name} = {value}" for name, value in point.items())
            return Check(item, "refuted", f"{len(cases)} cases apply at {where}")
    return Check(
        item,
        "proved",
        (
            f"exactly one at each of {len(points)} points, many on exceptional sets"
            if response.model.field.free
            else "exactly one: nothing is left open in the model"
        )
        + ("" if complete else ", or none where that is said"),
    )


def _small_points(response: ParametricResponse) -> list[dict[str, PointValue]]:
    """Points with small values, so that parameters often agree."""
    names = response.model.field.free
    random = Random(3)  # noqa: S311  the same points each time, no secret
    found: list[dict[str, PointValue]] = []
    for _ in range(20 * _SOUGHT):
        point: dict[str, PointValue] = {name: random.choice(_SMALL) for name in names}
        if all(holds_at(c, point) for c in response.domain.conditions):
            found.append(point)
        if len(found) == _SOUGHT:
            break
    return found


def applying_cases(
    response: ParametricResponse, point: Mapping[str, PointValue]
) -> tuple[Case, ...]:
    """Return the cases whose conditions, as they are written, hold at a point."""
    field = response.model.field
    values = {n: field.scalar(v) if isinstance(v, Fraction) else v for n, v in point.items()}
    return tuple(
        case for case in response.cases if all(_is_true(field, c, values) for c in case.conditions)
    )


def _is_true(
    field: ParameterField, comparison: WrittenComparison, values: Mapping[str, Scalar]
) -> bool:
    """Decide a comparison from its text.  Where a side is not defined it does not hold."""
    sides = []
    for side in (comparison.left, comparison.right):
        element = _read_back(field, plain(side))
        try:
            sides.append(field.substituted(element, values))
        except ZeroDivisionError:
            return False
    sign = field.sign(sides[0] - sides[1])
    return {
        "<": sign < 0,
        ">": sign > 0,
        "<=": sign <= 0,
        ">=": sign >= 0,
        "!=": sign != 0,
        "==": sign == 0,
    }[comparison.sign]


@lru_cache(maxsize=1024)
def _read_back(field: ParameterField, text: str) -> Scalar:
    """What a text says, which is asked at many points."""
    return rational_value(read_formula(text, names=frozenset(field.parameters)), field, Place())
