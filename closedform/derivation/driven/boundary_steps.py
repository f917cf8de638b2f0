"""Conditions at points: as they are stated, and the step that finds the constants from them."""

from __future__ import annotations

from collections.abc import Iterator

from closedform.algebra.domain import SignArgument
from closedform.algebra.field import Scalar
from closedform.derivation.driven.writing import Writing
from closedform.derivation.step import Side, Statement, Step, Symbol
from closedform.model.driven.model import PointCondition
from closedform.notation.expression import ONE, ZERO, Expression, Name, Negation, product
from closedform.notation.terms import negated, opened, sum_of
from closedform.response.driven.boundary import Block
from closedform.response.driven.determined import PointConstants, stem_of_constants
from closedform.response.driven.solution import DrivenSolution

__all__ = ["DETERMINANT", "conditions_step", "constant_names", "point_conditions", "state_side"]

DETERMINANT = Symbol("scalar", letter="Delta")


def point_conditions(writing: Writing) -> Iterator[Statement]:
    """Yield the conditions of a model as weights times states at an instant."""
    for condition in writing.model.conditions:
        value = writing.element(condition.value)
        yield Statement("point condition", (state_side(writing, condition), value))


def state_side(writing: Writing, condition: PointCondition) -> Side:
    """Return the left side of a condition."""
    at = writing.element(condition.at)
    parts: list[Side] = []
    for name, weight in zip(writing.model.names, condition.of_states, strict=True):
        if weight:
            state = Symbol("scalar", argument=at, letter=name)
            front = writing.element(weight)
            parts.append(state if front == ONE else (front, state))
    return parts[0] if len(parts) == 1 else Symbol("sum", parts=tuple(parts))


def conditions_step(
    writing: Writing, solution: DrivenSolution, facts: dict[str, object]
) -> Step | None:
    """Find the constants of the free motion; None where initial values are given."""
    points = solution.points
    if points is None:
        return None
    names = constant_names(writing, points)
    written = [points.formula(value) for value in points.found.values]
    told = {
        **facts,
        "driven": any(part.summands for part in solution.functions.sustained),
        "switched": len(solution.functions.intervals) > 1,
        "motion": Statement("free motion", (writing.response("h"), _motion(writing, points))),
        "conditions": list(point_conditions(writing)),
        "blocks": [
            _block(writing, points, block, argument)
            for block, argument in zip(points.found.blocks, points.arguments, strict=True)
        ],
        "constants": [
            {"constant": k, "statement": Statement("constant", (name, formula))}
            for k, (name, formula) in enumerate(zip(names, written, strict=True))
        ],
        "provided": [Statement("point divisor", (formula,)) for formula in points.provided],
        "count": len(names),
    }
    return Step("conditions_at_points", (), told, ("particular",))


def constant_names(writing: Writing, points: PointConstants) -> list[Name]:
    """Return what the constants are called."""
    stem = stem_of_constants(writing.model)
    return [Name(f"{stem}_{k}") for k in range(1, len(points.found.values) + 1)]


def _motion(writing: Writing, points: PointConstants) -> Side:
    """The sum of constant · e^(A (t - origin)) column."""
    parts: list[Side] = []
    for name, (origin, column) in zip(
        constant_names(writing, points), points.found.basis, strict=True
    ):
        at = writing.element(origin)
        later = writing.t if at == ZERO else opened(sum_of([writing.t, negated(at)]))
        exponential = writing.exponential(later)
        front: tuple[Side, ...] = (name,) if exponential == ONE else (name, exponential)
        vector = writing.column([writing.element(e) for (e,) in column.to_list()])
        parts.append(front if vector == ONE else (*front, vector))
    return parts[0] if len(parts) == 1 else Symbol("sum", parts=tuple(parts))


def _block(
    writing: Writing, points: PointConstants, block: Block, argument: SignArgument | None
) -> dict[str, object]:
    names = constant_names(writing, points)
    equations = []
    for place, row, value in zip(block.conditions, block.matrix, block.right, strict=True):
        left = _combination(points, row, [names[k] for k in block.constants])
        sides = (left, points.formula(value))
        equations.append({"condition": place, "statement": Statement("condition equation", sides)})
    determinant = points.formula(block.determinant)
    small = len(block.constants) == 1
    return {
        "equations": equations,
        "single": small,
        "conditions": block.conditions,
        "constants": block.constants,
        "determinant": None
        if small
        else Statement("point determinant", (DETERMINANT, determinant)),
        "sign": _sign(points, block.determinant, argument, determinant),
    }


def _sign(
    points: PointConstants, element: Scalar, argument: SignArgument | None, formula: Expression
) -> str:
    """What is known of a determinant: its sign, that it is a number, or nothing."""
    if argument is not None:
        return argument.sign
    if points.found.numbers.lowered(element) is not None and points.writer.case is None:
        return "exact"
    del formula
    return "number" if points.writer.case is None or not points.provided else "open"


def _combination(points: PointConstants, row: tuple[Scalar, ...], names: list[Name]) -> Expression:
    """The sum of entry · constant."""
    terms: list[Expression] = []
    for entry, name in zip(row, names, strict=True):
        formula = points.formula(entry)
        if formula == ZERO:
            continue
        minus = isinstance(formula, Negation)
        inside = formula.operand if isinstance(formula, Negation) else formula
        term = product([inside, name])
        terms.append(Negation(term) if minus else term)
    return opened(sum_of(terms)) if terms else ZERO
