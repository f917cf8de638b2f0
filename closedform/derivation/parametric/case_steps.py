"""The step that says which cases there are, how they were found, and that they are all."""

from __future__ import annotations

from collections.abc import Iterator

from closedform.algebra.branches import Branch, Exceptional
from closedform.algebra.domain import Comparison
from closedform.algebra.field import Scalar
from closedform.algebra.sign_argument import ByCondition, Constant
from closedform.derivation.parametric.formulas import written_comparison_statement
from closedform.derivation.parametric.reasons import contradiction_of, reason_of
from closedform.derivation.parametric.spectrum import eigenvalues_of, functions_of
from closedform.derivation.step import Statement, Step
from closedform.notation.expression import ZERO
from closedform.notation.rational_formula import rational_formula
from closedform.response.parametric.case import Case
from closedform.response.parametric.conditions import written_comparison
from closedform.response.parametric.response import ParametricResponse

__all__ = ["case_conditions_of", "cases_step"]


def cases_step(response: ParametricResponse) -> Step:
    """Tabulate the cases; say what may vanish and why the rest does not."""
    found = [row for branch in response.branches for row in _found(response, branch)]
    facts = {
        "rows": [_case_row(response, case) for case in response.cases],
        "found": [row for row in found if not row["plain"]],
        "plain": [row for row in found if row["plain"]],
        "branches": len(response.branches),
        "regimes": len(response.cases) > len(response.branches),
        "open": sum(e.fate == "not covered" for b in response.branches for e in b.exceptional),
        "all": len(response.cases),
    }
    return Step("cases", (), facts, ("factors",), depth="summary")


def case_conditions_of(case: Case) -> tuple[Statement, ...]:
    """Return what selects a case, one statement for each comparison."""
    return tuple(written_comparison_statement(c, "case condition") for c in case.conditions)


def _case_row(response: ParametricResponse, case: Case) -> dict[str, object]:
    field, time = response.model.field, response.model.time
    return {
        "number": case.number + 1,
        "cases": (case.number,),
        "conditions": case_conditions_of(case),
        "eigenvalues": [
            {
                "value": Statement("zero", (e.value,)),
                "multiplicity": e.multiplicity,
                "index": e.index,
            }
            for e in eigenvalues_of(field, case)
        ],
        "functions": Statement("functions", tuple(functions_of(field, case, time))),
    }


def _found(response: ParametricResponse, branch: Branch) -> Iterator[dict[str, object]]:
    here = _numbers(response, branch.number)
    if not here:  # all of it belongs to others, or it is empty
        return
    seen: set[tuple[object, ...]] = set()
    for exceptional in branch.exceptional:
        if exceptional.polynomials not in seen:
            seen.add(exceptional.polynomials)
            yield _exceptional_row(response, branch, exceptional, here)


def _numbers(response: ParametricResponse, branch: int) -> tuple[int, ...]:
    return tuple(c.number for c in response.cases if c.branch.number == branch)


def _exceptional_row(
    response: ParametricResponse, branch: Branch, exceptional: Exceptional, here: tuple[int, ...]
) -> dict[str, object]:
    """One polynomial, or several together, that must not vanish; and what came of it."""
    field = response.model.field
    row: dict[str, object] = {
        "cases": here,
        "fate": exceptional.fate,
        "plain": False,
        "apart": Statement(
            "apart", tuple(rational_formula(field, p) for p in exceptional.polynomials)
        ),
        "vanishing": {
            "equations": [
                Statement("vanishing", (rational_formula(field, p), ZERO))
                for p in exceptional.polynomials
            ],
            "cases": (),
        },
        "why": [],
        "fully": [],
    }
    if exceptional.fate == "branch" and exceptional.branch is not None:
        there = _numbers(response, exceptional.branch)
        row["there"] = there
        row["vanishing"] = {
            "equations": [_equation(branch, p) for p in exceptional.polynomials],
            "cases": () if exceptional.shared else there,
        }
    elif exceptional.argument is not None:
        argument = exceptional.argument
        simple = isinstance(argument.reason, ByCondition | Constant)
        row["plain"] = simple and len(field.names_in(argument.element)) <= 1
        row["why"] = reason_of(field, argument)
        row["fully"] = reason_of(field, argument, deep=True)
    elif exceptional.contradicted:
        row["why"] = contradiction_of(field, branch.domain, exceptional.contradicted)
        row["fully"] = row["why"]
    return row


def _equation(branch: Branch, polynomial: Scalar) -> Statement:
    written = written_comparison(branch.domain, Comparison(polynomial, "="))
    statement = written_comparison_statement(written, "vanishing")
    if statement.sides[0] == ZERO:
        return Statement("vanishing", statement.sides[::-1], "=")
    return statement
