"""Derivations from numbers: the same seed, the same model and lines."""

from __future__ import annotations

from dataclasses import replace
from random import Random

import mpmath

from tests.checking.generated.cases import Case, case_of
from tests.checking.generated.form_slips import slipped
from tests.checking.generated.lines import Derivation, Line
from tests.checking.generated.motion import MotionSheet
from tests.checking.generated.object_slips import SLIPS
from tests.checking.generated.parametric import parametric
from tests.checking.generated.pen import pen_of

__all__ = ["derivation_of"]

STAGES = (
    ("equation", 0.25),
    ("matrix", 0.25),
    ("polynomial", 0.7),
    ("eigenvalues", 0.85),
    ("vector", 0.45),
    ("J first", 0.3),
    ("P", 0.6),
    ("P inverse", 0.5),
    ("J", 0.5),
    ("exp J", 0.45),
    ("exp A", 0.55),
    ("particular", 0.7),
    ("solution", 0.9),
    ("column", 0.2),
    ("derivative", 0.3),
    ("value", 0.6),
    ("value", 0.3),
    ("steady", 0.4),
)
WRITERS = {
    "equation": MotionSheet.equation_line,
    "matrix": MotionSheet.matrix_line,
    "polynomial": MotionSheet.polynomial_line,
    "eigenvalues": MotionSheet.eigenvalue_line,
    "vector": MotionSheet.vector_lines,
    "P": MotionSheet.transformation_line,
    "P inverse": MotionSheet.inverse_line,
    "J": MotionSheet.canonical_line,
    "exp J": MotionSheet.block_exponential_line,
    "exp A": MotionSheet.transition_line,
    "particular": MotionSheet.particular_line,
    "solution": MotionSheet.solution_lines,
    "column": MotionSheet.column_line,
    "derivative": MotionSheet.derivative_line,
    "value": MotionSheet.value_line,
    "steady": MotionSheet.steady_line,
}


def derivation_of(seed: int) -> Derivation:
    """Return a derivation: a right one, or one with a single slip."""
    with mpmath.workdps(60):
        return _derivation(seed)


def _derivation(seed: int) -> Derivation:
    rng = Random(seed)
    if rng.random() < 0.25:
        return parametric(seed, rng)
    case = case_of(rng)
    plain_i = not {"i", "j"} & set(case.states)
    pen = pen_of(rng, case.names, plain_i=plain_i)
    if any(s[0] == "s" for s in case.states):
        pen.spectral = r"\lambda"
    way = rng.choice(("right", "right", "object", "object", "object", "form", "form"))
    sheet = MotionSheet(rng, case, pen, carry=rng.random() < 0.6)
    planned = _plan(rng, case, sheet)
    stages = [stage for stage in planned if stage in SLIPS]
    if way == "object" and stages:
        sheet.slip = rng.choice(stages)
    sheet.chained = way == "right"
    sheet.begin(planned)
    for stage in planned:
        WRITERS[stage](sheet)
    lines = sheet.lines
    made = sheet.made
    if way == "form" and lines:
        at = rng.randrange(len(lines))
        changed = slipped(lines[at], rng)
        if changed is not None:
            lines[at] = changed.written(pen)
            made = changed.slip
    told = [
        replace(line, stated=line.stated or (not line.of and rng.random() < 0.4)) for line in lines
    ]
    return Derivation(seed, case.kind, case.text, tuple(told), made)


def _plan(rng: Random, case: Case, sheet: MotionSheet) -> tuple[str, ...]:
    chosen = {stage for stage, chance in STAGES if rng.random() < chance}
    if case.size == 1:
        chosen -= {"matrix", "polynomial", "vector", "J first", "P", "P inverse", "J", "exp J"}
    if case.size == 4:
        chosen -= {"exp A"}
    chained = any(len(c.columns) > 1 for c in case.chains)
    if "exp J" in chosen or ("P" in chosen and (sheet.real_form or chained)):
        chosen.add("J")
    if "P" not in chosen:
        chosen.discard("P inverse")
    order = [stage for stage, _ in STAGES]
    if "J first" in chosen and "J" in chosen:
        order.remove("J")
        order[order.index("J first")] = "J"
    found = [stage for stage in order if stage in chosen and stage != "J first"]
    return tuple(found) or ("solution",)


def lines_text(lines: tuple[Line, ...]) -> str:
    """Return lines as text, to be looked at."""
    return "\n".join(f"{k}: {line.says}: {line.latex}" for k, line in enumerate(lines, 1))
