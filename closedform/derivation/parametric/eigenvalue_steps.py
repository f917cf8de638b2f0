"""The steps that give the eigenvalues of the generic branch and the names in the results."""

from __future__ import annotations

from collections.abc import Sequence

from closedform.algebra.factor_structure import FactorStructure
from closedform.algebra.field import Scalar
from closedform.algebra.parameter_field import ParameterField
from closedform.algebra.spectrum import Factor
from closedform.derivation.parametric.definitions import Definitions
from closedform.derivation.parametric.formulas import named_or_written, polynomial_formula
from closedform.derivation.parametric.reasons import reason_of
from closedform.derivation.parametric.spectrum import certain_index, values_of
from closedform.derivation.parametric.structure_steps import structure_facts
from closedform.derivation.parametric.variables import (
    Variables,
    first_free,
    root_symbol,
    variables_of,
)
from closedform.derivation.step import Side, Statement, Step, Symbol
from closedform.notation.expression import (
    ONE,
    ZERO,
    Call,
    Expression,
    Name,
    Negation,
    Product,
    Quotient,
    Sum,
    power_of,
    product,
)
from closedform.notation.rational_formula import rational_formula
from closedform.notation.terms import negated, sum_of
from closedform.response.parametric.case import Case
from closedform.response.parametric.quantities import Letters
from closedform.response.parametric.response import ParametricResponse

__all__ = ["definitions_step", "eigenvalues_step"]


def eigenvalues_step(response: ParametricResponse, letters: Letters) -> Step:
    """Give the eigenvalues of the generic branch, factor by factor, and why they lie so."""
    branch = response.branches[0]
    cases = [c for c in response.cases if c.branch.number == 0]
    pairs = [f for f in branch.spectrum.factors if f.degree == 2]
    variables = variables_of(response)
    rows, first = [], variables.first
    for place, (factor, structure) in enumerate(
        zip(branch.spectrum.factors, branch.structures, strict=True)
    ):
        numbers = range(first, first + factor.degree)
        first += factor.degree
        number = None if len(pairs) < 2 or factor not in pairs else pairs.index(factor) + 1
        rows.append(_row(response, cases, place, numbers, structure, (letters, number)))
    facts = {
        "rows": rows,
        "cases": tuple(c.number for c in cases),
        "several": len(response.branches) > 1,
        "distinct": all(f.multiplicity == 1 for f in branch.spectrum.factors),
    }
    return Step("factors", (), facts, ("characteristic_polynomial",))


def _shared_index(cases: Sequence[Case], place: int) -> int | None:
    """The index of a factor's eigenvalues, if it is known in all cases."""
    found = {certain_index(case, place) for case in cases}
    return found.pop() if len(found) == 1 else None


def _row(
    response: ParametricResponse,
    cases: Sequence[Case],
    place: int,
    numbers: range,
    structure: FactorStructure | None,
    naming: tuple[Letters, int | None],
) -> dict[str, object]:
    field, variables = response.model.field, variables_of(response)
    factor = cases[0].branch.spectrum.factors[place]
    kinds = list(dict.fromkeys(c.regimes[place].kind for c in cases))
    row: dict[str, object] = {
        "degree": factor.degree,
        "multiplicity": factor.multiplicity,
        "index": _shared_index(cases, place),
        "kinds": kinds,
        "structure": None,
        "statements": (),
    }
    if factor.degree == 1:
        value = rational_formula(field, factor.roots.centre)
        row["statements"] = (Statement("eigenvalue", (root_symbol(variables, numbers), value)),)
    elif factor.degree == 2:
        row |= _quadratic(response, cases, place, numbers, naming)
    else:
        polynomial = polynomial_formula(field, factor.polynomial, variables.root)
        row["polynomial"] = Statement("factor", (polynomial, ZERO))
        row["whole"] = factor.degree == len(response.model.states)
        if structure is not None:
            row["structure"] = structure_facts(field, structure, len(response.model.states))
        row |= _roots(field, cases, factor, place, variables)
    return row


def _quadratic(
    response: ParametricResponse,
    cases: Sequence[Case],
    place: int,
    numbers: range,
    naming: tuple[Letters, int | None],
) -> dict[str, object]:
    field = response.model.field
    factor, case = cases[0].branch.spectrum.factors[place], cases[0]
    mode = case.modes[place]
    discriminant = factor.roots.discriminant
    argument = case.branch.domain.sign_of(discriminant)
    symbol = root_symbol(variables_of(response), numbers)
    if mode.regime.kind == "decaying":
        total, last = (rational_formula(field, factor.p.nth(k)) for k in (1, 0))
        names = [Name(name) for name in mode.names]
        return {
            "statements": (
                Statement("sum of roots", (sum_of(names), total)),
                Statement("product of roots", (product(names), last)),
            ),
            "order": Statement("sign", (*names, ZERO), ">"),
            "names": names,
            "why": reason_of(field, argument),
            "fully": reason_of(field, argument, deep=True),
            "numbers": symbol,
        }
    letters, number = naming
    name = Name(first_free(letters, ("D", "Delta", "E"), number))
    centre = rational_formula(field, factor.roots.centre)
    root: Side = Symbol("real pair", parts=(centre, Call("sqrt", name)))
    row: dict[str, object] = {
        "statements": (
            Statement("eigenvalue", (symbol, root)),
            Statement("definition", (name, _over_one(field, discriminant))),
        ),
        "name": name,
        "regimes": [
            {
                "number": alike[0].number + 1,
                "sign": Statement("sign", (name, ZERO), _RELATIONS[kind]),
                "cases": tuple(c.number for c in alike),
                "value": _shared_value(field, symbol, alike, place),
            }
            for kind, alike in _by_kind(cases, place)
        ],
        "weak": None,
    }
    if argument.sign in _WEAK:
        row["weak"] = Statement("sign", (name, ZERO), _WEAK[argument.sign])
    row["why"] = reason_of(field, argument) if argument.sign != "unknown" else []
    row["fully"] = reason_of(field, argument, deep=True) if argument.sign != "unknown" else []
    return row


def _shared_value(
    field: ParameterField, symbol: Side, cases: Sequence[Case], place: int
) -> Statement | None:
    """The pair as it is printed in cases, if it is printed alike in all of them."""
    found = {next(values_of(field, c, c.modes[place])) for c in cases}
    return Statement("eigenvalue", (symbol, found.pop())) if len(found) == 1 else None


def _by_kind(cases: Sequence[Case], place: int) -> list[tuple[str, list[Case]]]:
    """The cases by the kind of a factor's regime in them."""
    found: dict[str, list[Case]] = {}
    for case in cases:
        found.setdefault(case.regimes[place].kind, []).append(case)
    return list(found.items())


def _over_one(field: ParameterField, element: Scalar) -> Expression:
    """An element as one fraction, unless it is shorter and without fractions in fractions."""
    written = rational_formula(field, element)
    above = rational_formula(field, field.of_polynomial(element.numer))
    below = rational_formula(field, field.of_polynomial(element.denom))
    nested = isinstance(written, Quotient) and _has_quotient(written.numerator)
    if below == ONE or not nested:
        return written
    return Quotient(above, below)


def _has_quotient(formula: Expression) -> bool:
    match formula:
        case Quotient():
            return True
        case Sum(parts) | Product(parts):
            return any(map(_has_quotient, parts))
        case Negation(inside):
            return _has_quotient(inside)
    return False


_WEAK = {"nonnegative": ">=", "nonpositive": "<="}
_RELATIONS = {"circular": "<", "double": "=", "hyperbolic": ">"}


def _roots(
    field: ParameterField,
    cases: Sequence[Case],
    factor: Factor,
    place: int,
    variables: Variables,
) -> dict[str, object]:
    """Where the roots of a factor of higher degree lie, in each of the cases."""
    regimes = [
        {
            "number": c.number + 1,
            "cases": (c.number,),
            "values": [
                Statement("zero", (value,)) for value in values_of(field, c, c.modes[place])
            ],
        }
        for c in cases
    ]
    found: dict[str, object] = {"regimes": regimes}
    squares = factor.roots.squares
    if factor.roots.form == "even" and squares is not None:
        mu, root = variables.square, variables.root
        centre = named_or_written(field, cases[0], factor.roots.centre)
        base: Expression = root if centre == ZERO else Sum((root, negated(centre)))
        found["substitution"] = Statement("substitution", (mu, power_of(base, 2)))
        found["squares"] = Statement(
            "polynomial in the square", (polynomial_formula(field, squares.to_list(), mu), ZERO)
        )
    return found


def _told(rows: Sequence[dict[str, object]]) -> list[dict[str, object]]:
    """What is said of the names in a sentence: names used in the same cases only together."""
    groups: list[dict[str, object]] = []
    for row in rows:
        words, only, name = row["words"], row["only"], row["name"]
        last = groups[-1] if groups else None
        if last is not None and not words and (last["words"], last["only"]) == ("", only):
            last["names"] = [*_list(last["names"]), name]
        elif words or only:
            groups.append({"names": [name], "words": words, "only": only})
    return groups


def _list(item: object) -> list[object]:
    return list(item) if isinstance(item, list) else [item]


def definitions_step(
    response: ParametricResponse, definitions: Definitions, *, branch: int
) -> Step | None:
    """Define the names in the results; None if there is nothing to define."""
    if not (definitions.formulas or definitions.roots or definitions.known):
        return None
    facts = {
        "known": definitions.known,
        "amounts": definitions.amounts,
        "several": len(response.branches[branch].spectrum.factors) > 1,
        "formulas": definitions.formulas,
        "roots": definitions.roots,
        "told": _told(definitions.formulas),
        "all": len(response.cases),
        "branch": branch,
    }
    return Step("definitions", (), facts, depth="summary")
