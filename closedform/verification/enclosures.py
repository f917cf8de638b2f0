"""Certified numbers against routes that share no code with the result.

The result, and separately every formula as it is written in plain notation and read
back, is compared with the matrix exponential of ball arithmetic and with mpmath's.
"""

from __future__ import annotations

from collections.abc import Iterable, Iterator
from fractions import Fraction
from typing import Any

import mpmath
from flint import acb, acb_mat, arb, arb_mat, ctx

from closedform.algebra.enclosure import ball_of, enclosed_to
from closedform.algebra.spectrum import Factor
from closedform.algebra.surds import SurdSum
from closedform.notation import enclose, plain, read_formula
from closedform.notation.expression import Expression, Product
from closedform.response.names import constant_values
from closedform.response.response import Response
from closedform.verification.record import Check

__all__ = [
    "ball_check",
    "ball_exponentials",
    "determinant_ball_check",
    "eigenvalue_check",
    "formula_check",
    "impulse_check",
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


def eigenvalue_check(response: Response) -> Check:
    """The numbers and names in which eigenvalues are written, against isolated roots."""
    item = "eigenvalues as written"
    forms = response.closed_forms
    with ctx.workprec(64 + 5 * DIGITS):
        values = constant_values(forms.constants)

        def ball(number: SurdSum | str | None) -> arb:
            if number is None:
                return arb(0)
            return values[number] if isinstance(number, str) else ball_of(number)

        for factor, modes in zip(response.spectrum.factors, forms.modes, strict=True):
            roots, met = factor.roots.enclosures(), set[int]()
            for mode in modes:
                rate, turn = ball(mode.rate), ball(mode.frequency)
                signs = (1,) if mode.kind == "real" else (1, -1)
                for sign in signs:
                    circular = mode.kind == "circular"
                    written = acb(rate, sign * turn) if circular else acb(rate + sign * turn)
                    places = [k for k, root in enumerate(roots) if _meets(written, root)]
                    if len(places) != 1:
                        return Check(item, "refuted", f"{written} is no root of its factor")
                    met.add(places[0])
            if len(met) != factor.degree:
                return Check(item, "refuted", "some eigenvalues are missing, or said twice")
    return Check(item, "enclosed", "each lies in the ball of its own isolated root")


def impulse_check(response: Response, times: tuple[Fraction, ...]) -> Check:
    """Each g is read back, and is the corner of the exponential of a companion matrix."""
    item = "functions g as written"
    forms = response.closed_forms
    names = frozenset({response.model.time, *(c.name for c in forms.constants)})
    for number, (factor, impulse) in enumerate(
        zip(response.spectrum.factors, forms.impulses, strict=True), start=1
    ):
        if impulse is None:
            continue
        parsed = read_formula(plain(impulse), names=names)
        for t in times:
            with ctx.workprec(64 + 5 * DIGITS):
                values = {**constant_values(forms.constants), response.model.time: ball_of(t)}
                expected = _companion_corner(response, factor, t)
                ball = enclose(parsed, values)
                if not (ball.is_finite() and ball.overlaps(expected)):
                    return Check(item, "refuted", f"g_{number} differs at t = {t}")
    return Check(item, "enclosed", _agreed(times, "the exponential of the companion matrix"))


def _meets(written: acb, root: acb) -> bool:
    return bool(written.is_finite()) and written.overlaps(root)


def _companion_corner(response: Response, factor: Factor, t: Fraction) -> arb:
    """e^(Ct) in row 1, last column: the solution of p(d/dt) g = 0 that starts as t^(d-1)/(d-1)!."""
    d = factor.degree
    coefficients = [response.field.enclose(c) for c in reversed(factor.polynomial[1:])]
    rows = [[arb(int(k == i + 1)) for k in range(d)] for i in range(d - 1)]
    companion = arb_mat([*rows, [-c for c in coefficients]])
    return acb_mat(companion * ball_of(t)).exp()[0, d - 1].real


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
    front, rows = forms.fronted_transition
    for i, row in enumerate(rows, start=1):
        for k, formula in enumerate(row, start=1):
            whole = formula if front is None else Product((front, formula))
            yield f"entry ({i}, {k}) of e^(At), factor in front", whole
    for state, formula in zip(model.states, forms.solution, strict=True):
        yield f"state {state}", formula
    # a number of outputs that is not the model's is found by the exact check of outputs
    for output, formula in zip(model.outputs, forms.outputs, strict=False):
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
