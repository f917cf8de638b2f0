"""Short statements beside each other, as many in each line as fit."""

from __future__ import annotations

from collections.abc import Sequence

from closedform.derivation.step import Matrix, Statement
from closedform.document.display import AS_GIVEN, RELATIONS, Display, displayed_together
from closedform.document.matrices import with_front
from closedform.document.symbols import side_box
from closedform.notation.latex.box import EM_PER_LINE, RELATION, Box

__all__ = ["displayed_beside"]

GAP = 2.0
"""Between two statements, in em: that of a quad on both sides of nothing."""


def displayed_beside(statements: Sequence[Statement]) -> list[Display]:
    """Return the statements in one display without numbers, in lines; a long one breaks as ever.

    Raises ValueError for a relation that is not in `RELATIONS`.
    """
    boxes = [_box(statement) for statement in statements]
    if any(box.width > EM_PER_LINE for box in boxes):
        return displayed_together(statements, [""] * len(statements))
    lines: list[list[Box]] = []
    for box in boxes:
        used = sum(b.width + GAP for b in lines[-1]) if lines else 0.0
        if not lines or used + box.width > EM_PER_LINE:
            lines.append([])
        lines[-1].append(box)
    rows = [r" \qquad ".join(box.latex for box in line) for line in lines]
    kind = "equation*" if len(rows) == 1 else "gather*"
    inside = " \\\\\n  ".join(rows)
    return [Display(f"\\begin{{{kind}}}\n  {inside}\n\\end{{{kind}}}")]


def _box(statement: Statement) -> Box:
    sides = [with_front(s) if isinstance(s, Matrix) else s for s in statement.sides]
    if statement.says in AS_GIVEN or statement.says == "branch matrix":
        sides = list(statement.sides)
    boxes = [side_box(side) for side in sides]
    relation = RELATIONS.get(statement.relation)
    if relation is None:
        raise ValueError(f"no relation is written {statement.relation!r}")
    latex = f" {relation} ".join(box.latex for box in boxes)
    return Box(latex, sum(box.width for box in boxes) + RELATION * (len(boxes) - 1))
