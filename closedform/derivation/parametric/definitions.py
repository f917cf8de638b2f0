"""The names in the results: each defined once, with the cases in which it is used."""

from __future__ import annotations

from collections.abc import Sequence
from dataclasses import dataclass

from closedform.derivation.formulas import ZERO
from closedform.derivation.parametric.formulas import polynomial_formula
from closedform.derivation.parametric.known_numbers import amount_rows, known_rows
from closedform.derivation.parametric.variables import variables_of
from closedform.derivation.step import Statement
from closedform.notation.expression import Expression, Name
from closedform.response.parametric.case import Case, WrittenQuantity
from closedform.response.parametric.quantities import RootDefinition
from closedform.response.parametric.response import ParametricResponse

__all__ = ["Definitions", "definitions_of"]


@dataclass(frozen=True)
class _Key:
    name: str
    what: object


@dataclass(frozen=True)
class Definitions:
    """What a step defines: rows of formulas and of roots, in the order of definition.

    A row of `formulas` is {statement, cases, words}; one of `roots` is {statement, names,
    places, turned, cases}: the names are zeros of the polynomial at these places, counted
    from the smallest, or their opposites where `turned`.  `known` and `amounts` are those of
    roots that are numbers, as `known_rows` and `amount_rows` give them.
    """

    formulas: list[dict[str, object]]
    roots: list[dict[str, object]]
    known: list[dict[str, object]]
    amounts: list[dict[str, object]]


WORDS = {
    "delta": "decay rate",
    "omega_d": "damped angular frequency",
    "omega_n": "natural angular frequency",
    "tau": "time constant",
}


def definitions_of(
    response: ParametricResponse, cases: Sequence[Case], told: set[object], *, digits: int = 6
) -> Definitions:
    """Return the definitions that these cases need and that are not in `told`; add them to it.

    Numbers that do not hang on the parameters come with decimals of so many `digits`.
    """
    model = response.model
    own = {d.name for d in model.abbreviations}
    formulas: list[dict[str, object]] = []
    here = tuple(c.number for c in cases)
    for case in cases:
        for quantity in case.quantities:
            if quantity.formula is None or (quantity.name in own and quantity.origin == "user"):
                continue
            key = _Key(quantity.name, quantity.formula)
            if key in told:
                continue
            told.add(key)
            statement = Statement("definition", (Name(quantity.name), quantity.formula))
            formulas.append(
                {
                    "name": Name(quantity.name),
                    "statement": statement,
                    "cases": _holding(response, quantity),
                    "words": _words(quantity),
                    "only": _only(_holding(response, quantity), here),
                }
            )
    return Definitions(
        formulas,
        [row for case in cases for row in _roots(response, case, told, here)],
        [row for case in cases for row in known_rows(response, case, told, digits)],
        [row for case in cases for row in amount_rows(response, case, told, digits)],
    )


def _words(quantity: WrittenQuantity) -> str:
    stem, _, index = quantity.name.rpartition("_")
    known = WORDS.get(quantity.name) or (WORDS.get(stem) if index.isdigit() else None)
    return known or ""


def _holding(response: ParametricResponse, quantity: WrittenQuantity) -> tuple[int, ...]:
    """The cases in which a name means the same."""

    def same(other: WrittenQuantity) -> bool:
        return (other.name, other.formula, other.root) == (
            quantity.name,
            quantity.formula,
            quantity.root,
        )

    return tuple(c.number for c in response.cases if any(map(same, c.quantities)))


def _only(holding: tuple[int, ...], here: tuple[int, ...]) -> tuple[int, ...]:
    """The cases of a branch in which a name is used, if these are not all of them."""
    used = tuple(number for number in here if number in holding)
    return () if used == here else used


def _roots(
    response: ParametricResponse, case: Case, told: set[object], here: tuple[int, ...]
) -> list[dict[str, object]]:
    """One row for each factor that has named roots."""
    field = response.model.field
    rows: list[dict[str, object]] = []
    for mode in case.modes:
        if mode.regime.kind == "known roots":
            continue
        named = [q for q in case.quantities if q.name in mode.names and q.root is not None]
        fresh = [q for q in named if _Key(q.name, q.root) not in told]
        if not fresh:
            continue
        told.update(_Key(q.name, q.root) for q in fresh)
        turned = mode.regime.kind == "decaying"
        roots = [q.root for q in fresh if isinstance(q.root, RootDefinition)]
        degree = len(roots[0].polynomial) - 1
        places = [degree + 1 - r.which if turned else r.which for r in roots]
        polynomial = mode.factor.polynomial if turned else roots[0].polynomial
        variables = variables_of(response)
        variable = variables.even if mode.regime.kind == "squares" else variables.root
        written = polynomial_formula(field, polynomial, variable)
        rows.append(
            {
                "statement": Statement("named zeros", (written, ZERO)),
                "names": [Name(q.name) for q in fresh],
                "places": places,
                "turned": turned,
                "order": _order(mode.regime.kind, fresh),
                "kind": mode.regime.kind,
                "cases": _holding(response, fresh[0]),
                "only": _only(_holding(response, fresh[0]), here),
                "told": case.branch.number == 0 and polynomial == mode.factor.polynomial,
                "degree": degree,
            }
        )
    return rows


def _order(kind: str, named: Sequence[WrittenQuantity]) -> Statement | None:
    names: list[Expression] = [Name(q.name) for q in named]
    match kind:
        case "decaying":
            return Statement("sign", (*names, ZERO), ">")
        case "real roots" if len(names) > 1:
            return Statement("sign", tuple(names), ">")
        case "squares":
            return Statement("sign", (*reversed(names), ZERO), ">")
    return None
