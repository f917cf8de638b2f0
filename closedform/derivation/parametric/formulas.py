"""Elements of the field of the parameters, and what is made of them, as formulas for print."""

from __future__ import annotations

from collections.abc import Iterable, Sequence

from closedform.algebra.domain import Comparison
from closedform.algebra.field import FieldMatrix, Polynomial, Scalar
from closedform.algebra.parameter_field import ParameterField
from closedform.derivation.step import Matrix, Statement
from closedform.notation.expression import (
    ONE,
    ZERO,
    Call,
    Expression,
    Name,
    Negation,
    Number,
    Product,
    Sum,
    names_in,
    operations,
    power_of,
    product,
)
from closedform.notation.rational_formula import rational_formula, weighted_rational
from closedform.notation.terms import negated, sum_of
from closedform.response.parametric.case import Case
from closedform.response.parametric.closed_form import Term, fronted_matrix
from closedform.response.parametric.conditions import WrittenComparison

__all__ = [
    "as_given",
    "compared",
    "element_matrix",
    "exponential",
    "factored_formula",
    "named_or_written",
    "plus_minus",
    "polynomial_formula",
    "sign_statement",
    "written_comparison_statement",
]


def polynomial_formula(
    field: ParameterField, coefficients: Sequence[Scalar], variable: Name
) -> Expression:
    """Return a polynomial with these coefficients, highest first, highest power first."""
    degree = len(coefficients) - 1
    terms = [
        _times(rational_formula(field, c), power_of(variable, degree - k))
        for k, c in enumerate(coefficients)
        if c
    ]
    return Sum(tuple(terms)) if len(terms) > 1 else sum_of(terms)


def _times(coefficient: Expression, power: Expression) -> Expression:
    if power == ONE:
        return coefficient
    if isinstance(coefficient, Negation):
        return Negation(product([coefficient.operand, power]))
    return product([coefficient, power])


def factored_formula(field: ParameterField, polynomial: Polynomial, variable: Name) -> Expression:
    """Return a polynomial over the field, in factors where that is shorter."""
    if polynomial.is_zero:
        return ZERO
    whole = polynomial_formula(field, polynomial.to_list(), variable)
    lead, factors = polynomial.factor_list()
    parts = [power_of(polynomial_formula(field, p.to_list(), variable), m) for p, m in factors]
    front = rational_formula(field, lead)
    inside = product(parts)
    if isinstance(front, Negation):
        split: Expression = Negation(product([front.operand, inside]))
    else:
        split = product([front, inside])
    return min(split, whole, key=operations)


def as_given(field: ParameterField, rows: Iterable[Iterable[Scalar]]) -> Matrix:
    """Return a matrix over the field, entry by entry."""
    return Matrix(tuple(tuple(rational_formula(field, e) for e in row) for row in rows))


def element_matrix(field: ParameterField, matrix: FieldMatrix) -> Matrix:
    """Return a matrix over the field with what its entries share in front, if that is shorter."""
    rows = matrix.to_list()
    zero = field.domain.zero
    terms = [[[Term(e, 0, zero)] if e else [] for e in row] for row in rows]
    if not any(e for row in rows for e in row):
        return as_given(field, rows)
    front, written = fronted_matrix(field, terms, as_given(field, rows).rows, "t")
    return Matrix(written, front)


def named_or_written(field: ParameterField, case: Case, element: Scalar) -> Expression:
    """Return an element by the name that a case has for it or its opposite, else written out."""
    written = rational_formula(field, element)
    opposite = rational_formula(field, -element)
    for quantity in case.quantities:
        if quantity.formula == written and written != ZERO:
            return Name(quantity.name)
        if quantity.formula == opposite and written != ZERO:
            return Negation(Name(quantity.name))
    return written


def exponential(field: ParameterField, case: Case, rate: Scalar, time: str) -> Expression:
    """Return e^(rate t); 1 where the rate is 0."""
    if not rate:
        return ONE
    match named_or_written(field, case, rate):
        case Name() as name:
            return Call("exp", Product((name, Name(time))))
        case Negation(Name() as name):
            return Call("exp", Negation(Product((name, Name(time)))))
    return Call("exp", weighted_rational(field, rate, [Name(time)], []))


def plus_minus(middle: Expression, distance: Expression, sign: int) -> Expression:
    """Return middle + sign · distance."""
    turned = distance if sign > 0 else negated(distance)
    return turned if middle == ZERO else Sum((middle, turned))


def compared(field: ParameterField, comparison: Comparison, says: str) -> Statement:
    """Return element relation 0; for -x > 0 it is x < 0."""
    written = rational_formula(field, comparison.element)
    relation: str = comparison.relation
    if isinstance(written, Negation) and relation in (">", ">="):
        return Statement(says, (written.operand, ZERO), {">": "<", ">=": "<="}[relation])
    return Statement(says, (written, ZERO), relation)


def sign_statement(field: ParameterField, element: Scalar, sign: str) -> Statement:
    """Return that an element has a sign, as a comparison with 0."""
    relations = {
        "positive": ">",
        "negative": "<",
        "nonnegative": ">=",
        "nonpositive": "<=",
        "nonzero": "!=",
        "zero": "=",
    }
    return Statement("sign", (rational_formula(field, element), ZERO), relations[sign])


def written_comparison_statement(comparison: WrittenComparison, says: str) -> Statement:
    """Return a comparison as it is written in the record."""
    relation = "=" if comparison.sign == "==" else comparison.sign
    return Statement(says, (comparison.left, comparison.right), relation)


def is_number(formula: Expression) -> bool:
    """Whether a formula is a number, with a sign or without."""
    return isinstance(formula, Number) or not names_in(formula)
