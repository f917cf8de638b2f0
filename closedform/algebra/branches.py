"""Every case of a system with parameters: the generic solution, and where it does not hold.

A branch is a part of the domain, cut out by equations, with the exponential of its matrix.
The coefficients of an exponential are rational functions: the identities that prove it
hold wherever their denominators do not vanish and the roots of each factor stay apart.
The irreducible polynomials among these are the exceptional set of a branch.  Each is
excluded by the domain, with a reason, or leads to a branch of its own, solved again under
its equation, and so on.  At every branch the domain is split into "no exceptional
polynomial vanishes" and "this one does", so the branches cover the domain, but for what is
listed as not covered.
"""

from __future__ import annotations

from collections.abc import Iterator
from dataclasses import dataclass, replace
from functools import cached_property
from typing import Literal

from closedform.algebra.domain import Comparison, ParameterDomain, SignArgument
from closedform.algebra.equations import Equation, Start, imposed
from closedform.algebra.exceptional import exceptional_elements
from closedform.algebra.exponential import ExponentialMatrix, exponential_by_resolvent
from closedform.algebra.factor_structure import FactorStructure, structure_of_factor
from closedform.algebra.field import FieldMatrix, Scalar
from closedform.algebra.normal_form import UnderRelation, under_relation
from closedform.algebra.parameter_field import ParameterField
from closedform.algebra.parametric_spectrum import parametric_spectrum, spectrum_under_relation
from closedform.algebra.regimes import require_known_roots
from closedform.algebra.spectrum import Spectrum

__all__ = [
    "MOST_AT_ONCE",
    "MOST_BRANCHES",
    "Branch",
    "Exceptional",
    "case_tree",
    "put_in",
    "uncovered",
]

MOST_BRANCHES = 16
"""Branches that are solved, the generic one among them: more would be no use in print."""
MOST_AT_ONCE = 8
"""Equations that lead out of the generic branch.  Where there are more, the branches of which
each is a part are too many, and none of them is solved."""


@dataclass(frozen=True)
class Exceptional:
    """Polynomials that must not vanish (together) for a branch to hold, and what came of it.

    `fate` is "excluded" by the domain, with `argument` the sign that says so or
    `contradicted` the conditions that cannot hold then; a "branch" with this number; or
    "not covered", with `reason`.  With `shared` the branch's formulas would hold there too, and
    the points are left to the other branch: so each belongs to one.
    """

    polynomials: tuple[Scalar, ...]
    fate: Literal["excluded", "branch", "not covered"]
    argument: SignArgument | None = None
    contradicted: tuple[Comparison, ...] = ()
    branch: int | None = None
    reason: str = ""
    shared: bool = False


@dataclass(frozen=True)
class Branch:
    """One part of the domain with its exact exponential; number 0 is the generic one.

    Shapes:  `matrix` and `exponential` are n x n.  `equations` are put in already;
    `relation` is the one that was kept, if any: equality then means equality where it
    vanishes.  `structures` follow the factors of the spectrum.
    """

    number: int
    equations: tuple[Equation, ...]
    domain: ParameterDomain
    matrix: FieldMatrix
    spectrum: Spectrum
    exponential: ExponentialMatrix
    structures: tuple[FactorStructure | None, ...]
    exceptional: tuple[Exceptional, ...] = ()

    @property
    def relation(self) -> Scalar | None:
        """The polynomial that vanishes on this branch without being solved for a parameter."""
        return next((e.polynomial for e in self.equations if e.parameter is None), None)

    @cached_property
    def under(self) -> UnderRelation | None:
        """The forms that elements have under the relation that was kept, if any."""
        return _under(self.domain, self.relation)

    @property
    def values(self) -> dict[str, Scalar]:
        """What the equations put in the place of parameters."""
        return {e.parameter: e.value for e in self.equations if e.parameter is not None}


def case_tree(
    field: ParameterField,
    matrix: FieldMatrix,
    domain: ParameterDomain,
    *,
    most: int = MOST_BRANCHES,
) -> tuple[Branch, ...]:
    """Return the branches of x' = A x, the generic one first, breadth first.

    `matrix` is over the field, its denominators do not vanish on the domain.  Equations among
    the conditions of the domain are put in first.
    Exact:   no number is rounded; every exclusion has an argument.
    """
    starts = [_under_conditions(field, domain)]
    parents: dict[int, int] = {}
    known: dict[object, int] = {_key(starts[0]): 0}
    branches: list[Branch] = []
    for number, start in enumerate(starts):  # it grows while it is walked through
        solved = _solved(field, matrix, start, number)
        fates = [
            (polynomials, _fate(field, solved, polynomials))
            for polynomials in exceptional_elements(
                field, solved.exponential, solved.structures, start.domain
            )
        ]
        ahead = {_key(fate) for _, fate in fates if isinstance(fate, Start)}
        room = most if len(ahead) <= MOST_AT_ONCE else 1
        found = []
        for polynomials, fate in fates:
            if isinstance(fate, Exceptional):
                found.append(fate)
                continue
            key = _key(fate)
            if key not in known and len(starts) < room:
                known[key] = len(starts)
                parents[len(starts)] = number
                starts.append(fate)
            found.append(
                Exceptional(polynomials, "branch", branch=known[key])
                if key in known
                else Exceptional(polynomials, "not covered", reason="budget")
            )
        branches.append(replace(solved, exceptional=tuple(found)))
    return tuple(
        replace(b, exceptional=(*b.exceptional, *_left_to_others(field, branches, parents, b)))
        for b in branches
    )


def _left_to_others(
    field: ParameterField, branches: list[Branch], parents: dict[int, int], branch: Branch
) -> Iterator[Exceptional]:
    """Yield what a branch shares with branches of lower number that part from its way.

    Where two ways out of a branch meet, the points go to the first of them.
    """
    own = {e.polynomials for e in branch.exceptional}
    step = branch.number
    while step in parents:
        for exceptional in branches[parents[step]].exceptional:
            other = exceptional.branch
            if other is None or other >= step:
                continue
            left = tuple(field.substituted(p, branch.values) for p in exceptional.polynomials)
            apart = any(p and branch.domain.sign_of(p).never_zero for p in left)
            if not apart and left not in own and not _excluded(field, branch, left):
                own.add(left)
                yield Exceptional(left, "branch", branch=other, shared=True)
        step = parents[step]


def _excluded(field: ParameterField, branch: Branch, polynomials: tuple[Scalar, ...]) -> bool:
    """Whether the relation of a branch keeps it away from where the polynomials vanish.

    It does so if one of them has a form of which no factor vanishes on the branch.
    """
    under = branch.under
    if under is None:
        return False
    forms = (f for p in polynomials for f in (p, under.reduced(p)) if f and under.is_defined(f))
    return any(
        all(
            isinstance(fate := _fate(field, branch, (field.of_polynomial(q),)), Exceptional)
            and fate.fate == "excluded"
            for q, exponent in field.factored(form).factors
            if exponent > 0
        )
        for form in forms
    )


def _under_conditions(field: ParameterField, domain: ParameterDomain) -> Start:
    """The start of the generic branch: the equations of the domain are put in."""
    start = Start((), domain)
    for condition in domain.conditions:
        if condition.relation == "=":
            step = imposed(field, start, condition.element)
            start = step if isinstance(step, Start) else start
    return start


def put_in(field: ParameterField, matrix: FieldMatrix, values: dict[str, Scalar]) -> FieldMatrix:
    """Return a matrix with elements in the place of parameters."""
    if not values:
        return matrix
    rows = matrix.to_list()
    return field.matrix([[field.substituted(e, values) for e in row] for row in rows])


def _solved(field: ParameterField, matrix: FieldMatrix, start: Start, number: int) -> Branch:
    values = {e.parameter: e.value for e in start.equations if e.parameter is not None}
    a = put_in(field, matrix, values)
    relation = next((e.polynomial for e in start.equations if e.parameter is None), None)
    under = _under(start.domain, relation)
    spectrum = parametric_spectrum(field, a)
    if under is not None:
        spectrum = spectrum_under_relation(field, spectrum, under)
    structures = tuple(
        structure_of_factor(field, a, f.p, start.domain) if f.degree > 2 else None
        for f in spectrum.factors
    )
    for factor, structure in zip(spectrum.factors, structures, strict=True):
        require_known_roots(field, factor, structure)
    exponential = exponential_by_resolvent(field, a, spectrum)
    if under is not None:
        exponential = under.exponential(exponential)
    return Branch(number, start.equations, start.domain, a, spectrum, exponential, structures)


def _under(domain: ParameterDomain, relation: Scalar | None) -> UnderRelation | None:
    return None if relation is None else under_relation(domain, relation)


def _fate(
    field: ParameterField, branch: Branch, polynomials: tuple[Scalar, ...]
) -> Exceptional | Start:
    """Say what becomes of the points of a branch at which the polynomials vanish together."""
    for polynomial in polynomials:
        argument = branch.domain.sign_of(polynomial)
        if argument.never_zero:
            return Exceptional(polynomials, "excluded", argument)
    start = Start(branch.equations, branch.domain)
    for polynomial in polynomials:
        step = imposed(field, start, polynomial)
        if isinstance(step, SignArgument):
            return Exceptional(polynomials, "excluded", step)
        if isinstance(step, str):
            return Exceptional(polynomials, "not covered", reason=step)
        contradicted = step.domain.contradiction() if step is not start else None
        if contradicted is not None:
            return Exceptional(polynomials, "excluded", contradicted=contradicted)
        start = step
    return start


def _key(start: Start) -> object:
    """The branch's equations: solved ones by parameter, kept ones as they are."""
    return frozenset(
        (e.parameter, e.value if e.parameter is not None else e.polynomial) for e in start.equations
    )


def uncovered(branches: tuple[Branch, ...]) -> Iterator[tuple[Branch, Exceptional]]:
    """Yield what no branch covers, with the branch that it belongs to."""
    for branch in branches:
        for exceptional in branch.exceptional:
            if exceptional.fate == "not covered":
                yield branch, exceptional
