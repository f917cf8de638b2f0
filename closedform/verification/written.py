"""Every formula as it is written, read back from plain notation, against ball arithmetic.

The values of the names in them come from their definitions; where a definition says
"the k-th root of p", `closedform.verification.eigenvalues` proves that the number is it.
"""

from __future__ import annotations

from collections.abc import Iterator, Mapping, Sequence
from fractions import Fraction

from flint import acb_mat, arb, arb_mat

from closedform.algebra.enclosure import ball_of
from closedform.algebra.spectrum import Factor
from closedform.notation import enclose, plain, read_formula
from closedform.notation.errors import FormulaError, UndeclaredNameError
from closedform.notation.expression import Expression, Product
from closedform.response.response import Response
from closedform.verification.comparison import AGREED, Finding, Pair, check_of, compared, listed
from closedform.verification.eigenvalues import NamedValues
from closedform.verification.enclosures import References
from closedform.verification.record import Check

__all__ = ["formula_check", "impulse_check"]


def formula_check(response: Response, references: References, values: NamedValues) -> Check:
    """Every formula as written, read back from plain notation, against ball arithmetic."""
    item = "formulas as written"
    try:
        parsed = _read_back(response, dict(_written(response)))
    except UndeclaredNameError as error:
        return Check(item, "refuted", f"{error.name} has no definition")
    except FormulaError as error:  # its text is longer or deeper than what is read
        return Check(item, "not attempted", f"a formula was not read back: {error}")

    def finding(t: Fraction) -> Finding:
        def evaluate(names: Sequence[str]) -> Iterator[Pair]:
            known = {**values.balls(), response.model.time: ball_of(t)}
            expected = _expected(response, references.at(t))
            return ((enclose(parsed[name], known), expected[name]) for name in names)

        return compared(parsed, evaluate, where=f" at time {t}")

    return check_of(
        item,
        map(finding, references.times),
        f"{len(parsed)} formulas were read back from their text; agree with the matrix "
        f"exponential of ball arithmetic {AGREED} at the times {listed(references.times)}",
    )


def impulse_check(response: Response, times: tuple[Fraction, ...], values: NamedValues) -> Check:
    """Each g is read back, and is the corner of the exponential of a companion matrix."""
    item = "functions g as written"
    pairs = zip(response.spectrum.factors, response.closed_forms.impulses, strict=True)
    given = {
        f"g_{number}": (factor, impulse)
        for number, (factor, impulse) in enumerate(pairs, start=1)
        if impulse is not None
    }
    try:
        parsed = _read_back(response, {name: impulse for name, (_, impulse) in given.items()})
    except FormulaError as error:
        return Check(item, "not attempted", f"a formula was not read back: {error}")

    def finding(t: Fraction) -> Finding:
        def evaluate(names: Sequence[str]) -> Iterator[Pair]:
            known = {**values.balls(), response.model.time: ball_of(t)}
            return (
                (enclose(parsed[name], known), _companion_corner(response, given[name][0], t))
                for name in names
            )

        return compared(parsed, evaluate, where=f" at time {t}")

    return check_of(
        item,
        map(finding, times),
        f"read back from their text; agree with the exponential of the companion matrix {AGREED} "
        f"at the times {listed(times)}",
    )


def _read_back(response: Response, formulas: Mapping[str, Expression]) -> dict[str, Expression]:
    names = frozenset({response.model.time, *(c.name for c in response.closed_forms.constants)})
    return {place: read_formula(plain(formula), names=names) for place, formula in formulas.items()}


def _companion_corner(response: Response, factor: Factor, t: Fraction) -> arb:
    """e^(Ct) in row 1, last column: the solution of p(d/dt) g = 0 that starts as t^(d-1)/(d-1)!."""
    d = factor.degree
    coefficients = [response.field.enclose(c) for c in reversed(factor.polynomial[1:])]
    rows = [[arb(int(k == i + 1)) for k in range(d)] for i in range(d - 1)]
    companion = arb_mat([*rows, [-c for c in coefficients]])
    return acb_mat(companion * ball_of(t)).exp()[0, d - 1].real


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
