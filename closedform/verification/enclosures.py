"""Certified numbers against routes that share no code with the result.

The result, and separately every formula as it is written in plain notation and read
back, is compared with the matrix exponential of ball arithmetic and with mpmath's.
"""

from __future__ import annotations

from collections.abc import Iterable, Iterator
from fractions import Fraction
from typing import Any

import mpmath
from flint import acb_mat, arb, arb_mat, ctx

from closedform.algebra.enclosure import ball_of, enclosed_to
from closedform.notation import enclose, plain, read_formula
from closedform.notation.expression import Expression
from closedform.response.names import constant_values
from closedform.response.response import Response
from closedform.verification.record import Check

__all__ = [
    "ball_check",
    "ball_exponentials",
    "determinant_ball_check",
    "formula_check",
    "mpmath_check",
    "trial_times",
]

DIGITS = 30
References = dict[Fraction, arb_mat]
"""The exponential of ball arithmetic at each instant of comparison."""
LARGEST_FOR_MPMATH = 12


def trial_times(response: Response) -> tuple[Fraction, ...]:
    """Return three instants: 1/3, 1 and 7 times a power of 2 near 1/|lambda|, lambda largest."""
    with ctx.workprec(64):
        roots = [z for f in response.spectrum.factors for z in f.roots.enclosures()]
        largest = max((abs(z).mid() for z in roots), key=float)
    mantissa, exponent = largest.man_exp()
    order = int(mantissa).bit_length() + int(exponent) if mantissa else 0
    unit = Fraction(2) ** -order
    return (unit / 3, unit, unit * 7)


def ball_exponentials(response: Response, times: tuple[Fraction, ...]) -> References:
    """Return e^(At) at each instant by the scaling and Taylor series of acb_mat."""
    return {t: _ball_exponential(response, t) for t in times}


def _ball_exponential(response: Response, t: Fraction) -> arb_mat:
    def evaluate() -> arb_mat:
        scaled = response.field.enclose_matrix(response.matrix) * ball_of(t)
        value = acb_mat(scaled).exp()
        return arb_mat(value.nrows(), value.ncols(), [e.real for e in value.entries()])

    return enclosed_to(evaluate, DIGITS + 5)


def ball_check(response: Response, references: References) -> Check:
    """e^(At) evaluated from its exact form, against the exponential of ball arithmetic."""
    item = "e^(At), numbers"
    for t, other in references.items():
        fault = _first_apart(_own_exponential(response, t), other)
        if fault is not None:
            return Check(item, "refuted", f"entry {fault} differs at t = {t}")
    return Check(item, "enclosed", _agreed(references, "the matrix exponential of ball arithmetic"))


def formula_check(response: Response, references: References) -> Check:
    """Every formula as written, read back from plain notation, against ball arithmetic."""
    item = "formulas as written"
    forms = response.closed_forms
    names = frozenset({response.model.time, *(c.name for c in forms.constants)})
    parsed = {
        place: read_formula(plain(formula), names=names) for place, formula in _written(response)
    }
    for t, transition in references.items():
        with ctx.workprec(64 + 5 * DIGITS):
            expected = _expected(response, transition)
            values = {**constant_values(forms.constants), response.model.time: ball_of(t)}
            for place, formula in parsed.items():
                ball = enclose(formula, values)
                if not (ball.is_finite() and ball.overlaps(expected[place])):
                    return Check(item, "refuted", f"{place} differs at t = {t}")
                if ball.rad() > _allowance(expected[place]):
                    return Check(item, "refuted", f"{place} is not settled at t = {t}")
    return Check(
        item,
        "enclosed",
        f"{len(parsed)} formulas were read back from their text; "
        + _agreed(references, "the matrix exponential of ball arithmetic"),
    )


def determinant_ball_check(response: Response, times: tuple[Fraction, ...]) -> Check:
    """The determinant of e^(At) against e^(tr(A) t), in certified numbers."""
    item = "det e^(At), numbers"
    for t in times:
        with ctx.workprec(128 + 4 * DIGITS + 32 * response.matrix.shape[0]):
            determinant = response.exponential.enclosure(ball_of(t)).det()
            trace = sum(
                (
                    response.field.enclose(response.matrix[i, i].element)
                    for i in range(response.matrix.shape[0])
                ),
                arb(0),
            )
            if not determinant.overlaps((trace * ball_of(t)).exp()):
                return Check(item, "refuted", f"differs at t = {t}")
    return Check(item, "enclosed", f"balls meet at t = {_listed(times)}")


def mpmath_check(response: Response, times: tuple[Fraction, ...]) -> Check:
    """e^(At) against mpmath's Taylor series, in a context of its own."""
    item = "e^(At), second opinion"
    n = response.matrix.shape[0]
    if n > LARGEST_FOR_MPMATH:
        return Check(item, "not attempted", f"done up to {LARGEST_FOR_MPMATH} states")
    mp = mpmath.mp.clone()
    mp.dps = 2 * DIGITS
    for t in times:
        ours = _own_exponential(response, t)
        with ctx.workprec(8 * DIGITS):
            scaled = response.field.enclose_matrix(response.matrix) * ball_of(t)
            entries = [mp.mpf(e.mid().str(3 * DIGITS, radius=False)) for e in scaled.entries()]
        theirs = mp.expm(mp.matrix(n, n) + mp.matrix(_rows(entries, n)), method="taylor")
        size = max(1, *(abs(e) for e in theirs))
        for i in range(n):
            for k in range(n):
                value = mp.mpf(ours[i, k].mid().str(DIGITS + 15, radius=False))
                if abs(value - theirs[i, k]) > size * mp.mpf(10) ** -DIGITS:
                    return Check(item, "refuted", f"entry {(i + 1, k + 1)} differs at t = {t}")
    return Check(item, "enclosed", _agreed(times, "mpmath's matrix exponential"))


def _own_exponential(response: Response, t: Fraction) -> arb_mat:
    return enclosed_to(lambda: response.exponential.enclosure(ball_of(t)), DIGITS + 5)


def _written(response: Response) -> Iterator[tuple[str, Expression]]:
    forms, model = response.closed_forms, response.model
    for i, row in enumerate(forms.transition, start=1):
        for k, formula in enumerate(row, start=1):
            yield f"entry ({i}, {k}) of e^(At)", formula
    for state, formula in zip(model.states, forms.solution, strict=True):
        yield f"state {state}", formula
    for output, formula in zip(model.outputs, forms.outputs, strict=True):
        yield f"output {output.name}", formula


def _expected(response: Response, transition: arb_mat) -> dict[str, arb]:
    model, field = response.model, response.field
    n = len(model.states)
    found = {
        f"entry ({i + 1}, {k + 1}) of e^(At){written}": transition[i, k]
        for i in range(n)
        for k in range(n)
        for written in ("", ", factor in front")
    }
    initial = arb_mat(n, 1, [field.enclose(row[0]) for row in response.initial.to_list()])
    state = transition * initial
    found |= {f"state {name}": state[i, 0] for i, name in enumerate(model.states)}
    for output in model.outputs:
        weights = [field.enclose(field.scalar(w)) for w in output.weights]
        found[f"output {output.name}"] = sum(
            (w * state[i, 0] for i, w in enumerate(weights)), arb(0)
        )
    return found


def _allowance(ball: arb) -> arb:
    return arb(10) ** -DIGITS * (1 + abs(ball).upper())


def _first_apart(left: arb_mat, right: arb_mat) -> tuple[int, int] | None:
    return next(
        (
            (i + 1, k + 1)
            for i in range(left.nrows())
            for k in range(left.ncols())
            if not left[i, k].overlaps(right[i, k])
        ),
        None,
    )


def _rows(entries: list[Any], n: int) -> list[list[Any]]:
    return [entries[i * n : (i + 1) * n] for i in range(n)]


def _agreed(times: Iterable[Fraction], other: str) -> str:
    return f"agree with {other} to {DIGITS} digits at t = {_listed(times)}"


def _listed(times: Iterable[Fraction]) -> str:
    return ", ".join(map(str, times))
