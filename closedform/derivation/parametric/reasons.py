"""Why an element has a sign: arguments as sentences of words and mathematics.

A sentence is a list of texts and statements.  What it states is proved as printed; that a
sum of squares, or of terms of one sign, has that sign is left to the reader's eye, and so is
between which zeros of an element its parameter lies.
"""

from __future__ import annotations

from collections.abc import Sequence

from closedform.algebra.domain import Comparison, ParameterDomain
from closedform.algebra.field import Scalar
from closedform.algebra.parameter_field import PI, ParameterField
from closedform.algebra.sign_argument import (
    ByCells,
    ByCondition,
    ByExpansion,
    ByFactors,
    ByPi,
    BySquares,
    ByTerms,
    Combined,
    Constant,
    Sign,
    SignArgument,
    Square,
    Undecided,
    Whereabouts,
)
from closedform.derivation.parametric.formulas import compared, sign_statement
from closedform.derivation.step import Side, Statement
from closedform.notation.expression import (
    Expression,
    Name,
    Negation,
    Sum,
    operations,
    power_of,
    product,
)
from closedform.notation.rational_formula import rational_formula
from closedform.notation.terms import sum_of

__all__ = ["Sentence", "contradiction_of", "reason_of"]

Sentence = list[Side | Statement | str]

SIGNS: dict[Sign, str] = {
    "positive": "are positive",
    "negative": "are negative",
    "nonnegative": "are positive or zero",
    "nonpositive": "are negative or zero",
    "nonzero": "are not zero",
    "zero": "are zero",
    "unknown": "may have any sign",
}

WHERE: dict[Whereabouts, str] = {
    "zeros": "is one of its zeros",
    "below": "lies below every zero",
    "between": "lies between two zeros",
    "above": "lies above every zero",
}
"""Where conditions leave a parameter, seen from the zeros of an element."""


def reason_of(field: ParameterField, argument: SignArgument, *, deep: bool = False) -> Sentence:
    """Return why an element has its sign; `deep` adds why the parts of the argument have theirs."""
    element = argument.element
    said = sign_statement(field, element, argument.sign)
    match argument.reason:
        case Constant() | ByPi():
            return _of_number(field, element, said)
        case ByTerms():
            if len(field.names_in(element)) <= 1:
                return [said]
            size = "positive" if argument.sign in ("positive", "nonnegative") else "negative"
            zero = " or zero" if argument.sign in ("nonnegative", "nonpositive") else ""
            return [said, f", as all its terms are {size}{zero}"]
        case ByCondition(comparison, multiple, rest):
            return _by_condition(field, argument, comparison, multiple, rest, deep=deep)
        case BySquares(squares, rest):
            return _by_squares(field, argument, squares, rest, deep=deep)
        case ByFactors(_, factors):
            return [said, ", by its factors:", *_by_factors(field, factors, deep=deep)]
        case ByExpansion(comparison, _, coefficients):
            return _by_expansion(field, argument, comparison, coefficients, deep=deep)
        case ByCells(name, comparisons, where):
            return _by_cells(field, argument, name, comparisons, where)
        case Combined(arguments):
            telling = [a for a in arguments if not isinstance(a.reason, Undecided)]
            best = [a for a in telling if a.sign == argument.sign] or telling
            if best[0].sign == argument.sign:
                return reason_of(field, best[0], deep=deep)
            sentence: Sentence = []
            for k, part in enumerate(telling):
                sentence += ["; and"] if k else []
                sentence += reason_of(field, part, deep=deep)
            return sentence
        case Undecided():
            raise ValueError(f"no argument says which sign {element} has")


def _of_number(field: ParameterField, element: Scalar, said: Statement) -> Sentence:
    terms = len(element.numer) + len(element.denom) if element else 0
    return (
        [said, ", by the digits of", Name(PI)] if field.holds_pi(element) and terms > 2 else [said]
    )


def _by_factors(
    field: ParameterField, factors: Sequence[tuple[SignArgument, int]], *, deep: bool
) -> Sentence:
    sentence: Sentence = []
    for k, (factor, exponent) in enumerate(factors):
        sentence += [", "] if k else []
        if factor.sign == "unknown":  # of an even power only
            square = factor.element**exponent
            sentence += [sign_statement(field, square, "nonnegative")]
        else:
            sentence += _part(field, factor, deep=deep)
    return sentence


def _part(field: ParameterField, argument: SignArgument, *, deep: bool) -> Sentence:
    if deep and not isinstance(argument.reason, Undecided):
        return reason_of(field, argument, deep=True)
    return [sign_statement(field, argument.element, argument.sign)]


def _by_condition(
    field: ParameterField,
    argument: SignArgument,
    comparison: Comparison,
    multiple: SignArgument,
    rest: SignArgument | None,
    *,
    deep: bool,
) -> Sentence:
    said = sign_statement(field, argument.element, argument.sign)
    condition = compared(field, comparison, "condition")
    same = {said.sides, (*said.sides[1:], *said.sides[:1])}
    if rest is None and (condition.sides in same or multiple.sign == "unknown"):
        return [condition] if condition.sides in same else [said, ", as", condition]
    if rest is None:
        return [said, ", by", condition]
    whole = rational_formula(field, argument.element)
    inside = product(
        [rational_formula(field, multiple.element), rational_formula(field, comparison.element)]
    )
    split = sum_of([inside, rational_formula(field, rest.element)])
    sentence: Sentence = [said, ", as it is", _whole(whole, split), "with", condition]
    sentence += [", ", *_part(field, rest, deep=deep)]
    return sentence


def _whole(whole: Expression, split: Expression) -> Side | Statement:
    return Statement("identity", (whole, split))


def _by_squares(
    field: ParameterField,
    argument: SignArgument,
    squares: Sequence[Square],
    rest: SignArgument | None,
    *,
    deep: bool,
) -> Sentence:
    terms = [_square(field, s) for s in squares]
    terms += [] if rest is None else [rational_formula(field, rest.element)]
    whole = rational_formula(field, argument.element)
    split = sum_of(terms)
    relation = sign_statement(field, argument.element, argument.sign).relation
    zero = Statement("sign", (split, rational_formula(field, field.domain.zero)), relation)
    if operations(whole) < 3:
        return [zero, ", as squares are not negative"]
    sentence: Sentence = [zero if whole == split else Statement("identity", (whole, split))]
    sentence += [zero.relation and f", a sum of parts that {SIGNS[argument.sign]}"]
    if deep and rest is not None:
        sentence += [":", *_part(field, rest, deep=True)]
    return sentence


def _square(field: ParameterField, square: Square) -> Expression:
    weight = rational_formula(field, square.weight)
    base = power_of(rational_formula(field, square.base), 2)
    if isinstance(weight, Negation):
        return Negation(product([weight.operand, base]))
    return product([weight, base])


def _by_expansion(
    field: ParameterField,
    argument: SignArgument,
    comparison: Comparison,
    coefficients: Sequence[SignArgument],
    *,
    deep: bool,
) -> Sentence:
    condition = compared(field, comparison, "condition")
    said = sign_statement(field, argument.element, argument.sign)
    if comparison.relation == "=":
        first = coefficients[0]
        put: Sentence = [said, ", as it is", _expression(field, first.element), "where", condition]
        known = field.constant(first.element) is not None
        return put if known or not deep else [*put, ", ", *_part(field, first, deep=True)]
    base = rational_formula(field, comparison.element)
    terms = [
        product([rational_formula(field, c.element), power_of(base, k)])
        for k, c in enumerate(coefficients)
        if c.element
    ]
    split = Sum(tuple(terms)) if len(terms) > 1 else terms[0]
    whole = rational_formula(field, argument.element)
    sentence: Sentence = [said, ", as it is", Statement("identity", (whole, split)), "with"]
    sentence.append(condition)
    if deep:
        for c in coefficients:
            if c.element and field.constant(c.element) is None:
                sentence += [", ", *_part(field, c, deep=True)]
    return sentence


def _by_cells(
    field: ParameterField,
    argument: SignArgument,
    name: str,
    comparisons: Sequence[Comparison],
    where: Whereabouts,
) -> Sentence:
    element = argument.element
    said = sign_statement(field, element, argument.sign)
    known = _joined([compared(field, c, "condition") for c in comparisons])
    whole = element.denom.is_ground
    if known and whole and max(map(sum, element.numer.monoms())) == 1:
        return [said, ", by", *known]
    poles = " or pole" if where in ("below", "above", "no zeros") else " or poles"
    if whole or where == "zeros":
        poles = ""
    sentence: Sentence
    if where == "no zeros":
        return [said, f", as it has no real zero{poles} in", Name(name)]
    if where == "several":
        sentence = [said, f", by its signs between its zeros{poles} in", Name(name)]
    else:
        sentence = [said, ", as", Name(name), WHERE[where] + poles]
    return [*sentence, ", by", *known] if known else sentence


def _expression(field: ParameterField, element: Scalar) -> Side:
    return rational_formula(field, element)


def contradiction_of(
    field: ParameterField, domain: ParameterDomain, contradicted: Sequence[Comparison]
) -> Sentence:
    """Return the sentence that conditions cannot hold together."""
    known = [compared(field, c, "condition") for c in contradicted if c in domain.conditions]
    new = [compared(field, c, "contradicted") for c in contradicted if c not in domain.conditions]
    if not new:
        raise ValueError("conditions of a branch contradict each other")
    sentence: Sentence = ["then", *_joined(new), "would follow"]
    if known:
        return [*sentence, ", against", *_joined(known)]
    return [*sentence, ", which cannot be"]


def _joined(statements: Sequence[Statement]) -> Sentence:
    sentence: Sentence = []
    for k, statement in enumerate(statements):
        sentence += ["and", statement] if k else [statement]
    return sentence
