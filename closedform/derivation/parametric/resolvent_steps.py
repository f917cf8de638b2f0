"""The step from the resolvent to e^(At): the adjugate, residues, and constant matrices."""

from __future__ import annotations

from collections.abc import Iterator, Sequence
from fractions import Fraction
from math import factorial

from closedform.algebra.exponential import ModalTerm
from closedform.algebra.field import FieldMatrix
from closedform.algebra.parameter_field import ParameterField
from closedform.derivation.parametric.formulas import (
    element_matrix,
    exponential,
    factored_formula,
    polynomial_formula,
)
from closedform.derivation.parametric.kernels import PAIR, function_of, kernel_letters, kernel_row
from closedform.derivation.parametric.spectrum import real_eigenvalues
from closedform.derivation.parametric.variables import variables_of
from closedform.derivation.step import Matrix, Side, Statement, Step, Symbol
from closedform.notation.expression import (
    ONE,
    ZERO,
    Expression,
    Name,
    Negation,
    Number,
    Quotient,
    Sum,
    operations,
    power_of,
    product,
)
from closedform.notation.rational_formula import rational_formula
from closedform.notation.terms import negated, sum_of
from closedform.response.parametric.case import Case
from closedform.response.parametric.modes import Mode
from closedform.response.parametric.quantities import Letters
from closedform.response.parametric.response import ParametricResponse

__all__ = ["transform_step"]

ADJUGATE_UP_TO = 4


def transform_step(response: ParametricResponse, cases: Sequence[Case], letters: Letters) -> Step:
    """Give the resolvent N(s)/p(s), and its partial fractions as far as they are short."""
    model, case = response.model, cases[0]
    s, t, n = variables_of(response).laplace, Name(model.time), len(model.states)
    statements = [
        Statement(
            "resolvent",
            (
                Symbol("resolvent", argument=s, letter="A"),
                Symbol("quotient", parts=(_numerator(s), _denominator(s))),
            ),
        )
    ]
    statements.append(
        Statement("numerator", (_numerator(s), Symbol("adjugate", argument=s, letter="A")))
    )
    facts: dict[str, object] = {
        "n": n,
        "cases": tuple(c.number for c in cases),
        "kernels": [],
        "only": len(response.cases) == 1,
    }
    if n <= ADJUGATE_UP_TO:
        rows = _adjugate(model.field, case.branch.matrix, s)
        statements.append(Statement("adjugate", (_numerator(s), Matrix(rows))))
    factors = case.branch.spectrum.factors
    simple = all(f.multiplicity == 1 for f in factors)
    short = all(
        m.factor.degree == 1 or (m.factor.index == 1 and m.regime.kind in PAIR)
        for c in cases
        for m in c.modes
    )
    circular = any(m.regime.kind in PAIR for c in cases for m in c.modes)
    if short and (circular or not simple):
        facts["route"] = "matrices"
        statements += _expansion(response, cases, letters, facts)
    elif simple:
        facts["route"] = "residues"
        statements.append(
            Statement(
                "residues",
                (Symbol("transition", argument=t), _residue_sum(response, t)),
            )
        )
        if len({tuple(m.names for m in c.modes) for c in cases}) == 1:
            statements += _slopes(response, case)
    else:
        facts["route"] = "entries"
    return Step("transform", tuple(statements), facts, ("characteristic_polynomial",))


def _residue_sum(response: ParametricResponse, t: Name) -> Symbol:
    return Symbol("residue sum", argument=t, letter="N", parts=(variables_of(response).root,))


def _numerator(s: Name) -> Symbol:
    return Symbol("matrix", letter="N", argument=s)


def _denominator(s: Name) -> Symbol:
    return Symbol("characteristic polynomial", letter="p", argument=s)


def _adjugate(
    field: ParameterField, matrix: FieldMatrix, s: Name
) -> tuple[tuple[Expression, ...], ...]:
    """adj(s I - A) = sum of B_k s^(n-1-k), B_k = A B_(k-1) + c_k I; or by minors, if shorter.

    Source:  D. K. Faddeev and V. N. Faddeeva, Computational Methods of Linear Algebra, 1963.
    """
    n = matrix.shape[0]
    coefficients = matrix.charpoly()
    parts = [field.identity(n)]
    for c in coefficients[1:n]:
        parts.append(matrix * parts[-1] + field.identity(n) * c)
    rows = [part.to_list() for part in parts]

    def entry(i: int, k: int) -> Expression:
        polynomial = field.polynomial([part[i][k] for part in rows])
        written = factored_formula(field, polynomial, s)
        if n != 3 or written == ZERO:
            return written
        return min(written, _minor(field, matrix, (k, i), s), key=operations)

    return tuple(tuple(entry(i, k) for k in range(n)) for i in range(n))


def _minor(
    field: ParameterField, matrix: FieldMatrix, place: tuple[int, int], s: Name
) -> Expression:
    """The cofactor of s I - A at an entry, as a difference of two products; n = 3."""
    row, column = place
    above, below = (i for i in range(3) if i != row)
    left, right = (k for k in range(3) if k != column)
    rows = matrix.to_list()

    def at(i: int, k: int) -> Expression:
        element = rows[i][k]
        if i != k:
            return rational_formula(field, -element)
        return polynomial_formula(field, [field.domain.one, -element], s)

    sign = -1 if (row + column) % 2 else 1
    return sum_of(
        [
            _signed_product(sign, at(above, left), at(below, right)),
            _signed_product(-sign, at(above, right), at(below, left)),
        ]
    )


def _signed_product(sign: int, first: Expression, second: Expression) -> Expression:
    """Sign · first · second, its sign outside."""
    negative, sizes = sign < 0, []
    for factor in (first, second):
        negative ^= isinstance(factor, Negation)
        sizes.append(factor.operand if isinstance(factor, Negation) else factor)
    whole = ZERO if ZERO in sizes else product(sizes)
    return Negation(whole) if negative and whole != ZERO else whole


def _slopes(response: ParametricResponse, case: Case) -> Iterator[Statement]:
    """p'(lambda) at the roots that are printed one by one, as products of differences."""
    field = response.model.field
    values = [(m, v) for m in case.modes for v in real_eigenvalues(field, case, m)]
    for _, value in values:
        argument = Symbol("scalar", letter="p", order=1, argument=value)
        parts = [_difference(value, root) for _, root in values if root != value]
        parts += [
            _polynomial_at(field, other, value)
            for other in case.modes
            if not real_eigenvalues(field, case, other)
        ]
        negative = sum(isinstance(part, Negation) for part in parts) % 2 == 1
        sizes = [part.operand if isinstance(part, Negation) else part for part in parts]
        sizes.sort(key=lambda part: isinstance(part, Sum))
        whole = product(sizes)
        yield Statement("slope", (argument, Negation(whole) if negative else whole))


def _difference(value: Expression, root: Expression) -> Expression:
    """Value - root; b - a for value = -a and root = -b."""
    if isinstance(value, Negation) and isinstance(root, Negation):
        return Sum((root.operand, Negation(value.operand)))
    if value == ZERO:
        return negated(root)
    if root == ZERO:
        return value
    return sum_of([value, negated(root)])


def _polynomial_at(field: ParameterField, mode: Mode, value: Expression) -> Expression:
    degree = mode.factor.degree
    terms = []
    for k, c in enumerate(mode.factor.polynomial):
        if c:
            power = power_of(value, degree - k) if value != ZERO else ONE if degree == k else ZERO
            if power != ZERO:
                terms.append(product([rational_formula(field, c), power]))
    return sum_of(terms)


def _expansion(
    response: ParametricResponse,
    cases: Sequence[Case],
    letters: Letters,
    facts: dict[str, object],
) -> Iterator[Statement]:
    """e^(At) as a sum of functions times constant matrices, and these."""
    model, field, case = response.model, response.model.field, cases[0]
    t = Name(model.time)
    terms = case.branch.exponential.terms
    several = sum(m.factor.degree == 1 for m in case.modes) > 1
    pairs = [k for k, m in enumerate(case.modes) if m.factor.degree == 2]
    parts: list[Side] = []
    matrices: list[Statement] = []
    kernel_rows: list[dict[str, object]] = []
    for place, (mode, term) in enumerate(zip(case.modes, terms, strict=True)):
        front = exponential(field, case, mode.factor.roots.centre, model.time)
        if mode.factor.degree == 1:
            made = _single(field, term, front, t, (place + 1,) if several else ())
            for coefficient, symbol, matrix in made:
                parts.append(symbol if coefficient == ONE else (coefficient, symbol))
                matrices.append(Statement("residue matrix", (symbol, matrix)))
            continue
        number = pairs.index(place) + 1 if len(pairs) > 1 else None
        kernels = tuple(function_of(name, t) for name in kernel_letters(letters, number))
        index = () if number is None else (str(number),)
        u, v = (Symbol("matrix", index, letter=letter) for letter in "UV")
        inner = Symbol("sum", parts=((kernels[0], u), (kernels[1], v)))
        parts += inner.parts if front == ONE else [(front, inner)]
        residue = term.residues[0].coefficients
        matrices.append(Statement("residue matrix", (u, element_matrix(field, residue[1]))))
        shifted = residue[0] + residue[1] * mode.factor.roots.centre
        matrices.append(Statement("residue matrix", (v, element_matrix(field, shifted))))
        both = (kernels[0], kernels[1])
        made_rows = [kernel_row(response, c, place, both) for c in cases]
        kernel_rows.append({"kernels": both, "rows": made_rows})
    facts["kernels"] = kernel_rows
    yield Statement(
        "expansion", (Symbol("transition", argument=t), Symbol("sum", parts=tuple(parts)))
    )
    yield from matrices


def _single(
    field: ParameterField,
    term: ModalTerm,
    front: Expression,
    t: Name,
    index: tuple[int, ...],
) -> Iterator[tuple[Expression, Symbol, Matrix]]:
    """t^j/j! e^(lambda t), the letter and the matrix for each j."""
    several = len(term.residues) > 1
    for j, residue in enumerate(term.residues):
        matrix = residue.coefficients[0]
        if matrix.is_zero_matrix:
            continue
        power: Expression = power_of(t, j)
        if j > 1:
            power = Quotient(power, Number(Fraction(factorial(j))))
        numbers = ",".join(map(str, (*index, *((j,) if several else ()))))
        symbol = Symbol("matrix", (numbers,) if numbers else (), letter="R")
        yield product([power, front]), symbol, element_matrix(field, matrix)
