"""What is said about the model, its polynomial and its eigenvalues is true."""

from __future__ import annotations

from decimal import Decimal
from fractions import Fraction
from typing import Any

import mpmath
import pytest
from flint import acb, acb_mat, arb, ctx

import closedform
from closedform.algebra.enclosure import ball_of
from closedform.derivation.step import Symbol
from closedform.notation.expression import Name
from closedform.response.names import RootPart
from tests.derivation.values import (
    BITS,
    at,
    derivation_of,
    matrix_at,
    matrix_of,
    names_at,
    statements_of,
    steps_of,
    unit,
)
from tests.response.systems import KINDS, response_to

each_kind = pytest.mark.parametrize("kind", KINDS)


@each_kind
def test_the_characteristic_polynomial_is_the_determinant(kind: str) -> None:
    response = response_to(kind)
    (statement,) = statements_of(
        derivation_of(response), "characteristic_polynomial", "characteristic polynomial"
    )
    _, _, *printed = statement.sides
    assert 1 <= len(printed) <= 2
    n = len(response.model.states)
    with ctx.workprec(BITS):
        for number in (acb(0), acb(2), acb(-3, 5)):
            determinant = (unit(n) * number - matrix_of(response)).det()
            for formula in printed:
                assert at(formula, {"lambda": number}).overlaps(determinant)


@each_kind
def test_the_model_is_stated_as_given(kind: str) -> None:
    response = response_to(kind)
    derivation = derivation_of(response)
    model, n = response.model, len(response.model.states)
    with ctx.workprec(BITS):
        (statement,) = statements_of(derivation, "model", "matrix")
        shown = matrix_at(statement.sides[1], {})
        expected = acb_mat([[acb(ball_of(x)) for x in row] for row in model.matrix])
        assert all(a.overlaps(b) for a, b in zip(shown.entries(), expected.entries(), strict=True))
        (statement,) = statements_of(derivation, "model", "initial")
        column = matrix_at(statement.sides[-1], {})
        assert all(column[i, 0].overlaps(acb(ball_of(model.initial[i]))) for i in range(n))
        outputs = statements_of(derivation, "model", "output")
        assert [s.sides[0] for s in outputs] == [Name(o.name) for o in model.outputs]
        states = {name: acb(7 * i + 2, i) for i, name in enumerate(model.states)}
        for stated, output in zip(outputs, model.outputs, strict=True):
            value = sum(
                (ball_of(w) * states[s] for w, s in zip(output.weights, model.states, strict=True)),
                acb(0),
            )
            assert at(stated.sides[1], states).overlaps(value)


def eigenvalues(response: Any) -> list[acb]:
    """The distinct eigenvalues in the order of printing, pairs with + first."""
    found = []
    for factor in response.spectrum.factors:
        found += list(factor.roots.enclosures())
    return found


@each_kind
def test_printed_eigenvalues_are_eigenvalues(kind: str) -> None:
    response = response_to(kind)
    derivation = derivation_of(response)
    with ctx.workprec(BITS):
        names, known = names_at(response, Fraction(0)), eigenvalues(response)
        found = []
        for statement in statements_of(derivation, "eigenvalues", "eigenvalues"):
            symbol, value = statement.sides
            if isinstance(symbol, Name):  # the definition of a frequency
                assert at(value, {}).overlaps(names[symbol.text])
                continue
            if isinstance(value, Symbol):
                rate, frequency = (at(part, names) for part in value.parts)
                turn = frequency * acb(0, 1) if value.kind == "pair" else frequency
                found += [rate + turn, rate - turn]
            else:
                found.append(acb(at(value, names)))
        assert all(sum(z.overlaps(w) for w in known) == 1 for z in found)
        if not kind.startswith("named"):
            assert len(found) == len(known)


@each_kind
@pytest.mark.parametrize("digits", [3, 12])
def test_decimals_of_eigenvalues_are_right(kind: str, digits: int) -> None:
    response = response_to(kind)
    derivation = derivation_of(response, digits)
    (step,) = steps_of(derivation, "eigenvalues")
    mp = mpmath.mp.clone()
    mp.dps = 50
    known = []
    with ctx.workprec(BITS):
        for z in eigenvalues(response):
            parts = [x.mid().str(60, radius=False) for x in (z.real, z.imag)]
            known.append(mp.mpc(*parts))
    printed = [z for row in step.facts["rows"] for z in numbers_in(row["decimal"], mp)]
    assert len(printed) == len(known)
    for z in printed:
        near = min(known, key=lambda w: abs(z - w))
        for one, other in ((z.real, near.real), (z.imag, near.imag)):
            assert (
                abs(one - other) <= abs(other) * mp.mpf(10) ** (1 - digits) / 2 + mp.mpf(10) ** -40
            )
        known.remove(near)


def numbers_in(text: str, mp: mpmath.MPContext) -> list[mpmath.mpc]:
    """Both numbers of "a ± bi" or "a and b", or the one of "a"."""
    if " and " in text:
        return [mp.mpc(mp.mpf(part), 0) for part in text.split(" and ")]
    if "±" not in text:
        return [mp.mpc(mp.mpf(text), 0)]
    left, right = (part.strip() for part in text.split("±"))
    rate = mp.mpf(left) if left else mp.mpf(0)
    turn = mp.mpc(0, mp.mpf(right[:-1])) if right.endswith("i") else mp.mpc(mp.mpf(right), 0)
    return [rate + turn, rate - turn]


@each_kind
def test_multiplicities_in_the_table_add_up(kind: str) -> None:
    response = response_to(kind)
    (step,) = steps_of(derivation_of(response), "eigenvalues")
    total = 0
    for row in step.facts["rows"]:
        count = 1 if row["meaning"] == "real" else 2
        assert row["multiplicity"] == sum(row["blocks"])
        assert row["index"] == max(row["blocks"])
        total += count * row["multiplicity"]
    assert total == len(response.model.states)


UNDAMPED = [  # three masses in a row, s^6 + 12 s^4 + 40 s^2 + 34 or so
    [0, 0, 0, 1, 0, 0],
    [0, 0, 0, 0, 1, 0],
    [0, 0, 0, 0, 0, 1],
    [-3, 1, 0, 0, 0, 0],
    [1, -4, 2, 0, 0, 0],
    [0, 2, -5, 0, 0, 0],
]


@pytest.mark.parametrize("make", ["named cubic", "named quartic", "undamped"])
def test_named_roots_lie_in_their_intervals_and_have_their_decimals(make: str) -> None:
    if make == "undamped":
        response = closedform.respond(closedform.system(UNDAMPED, initial=[1] * 6))
    else:
        response = response_to(make)
    derivation = derivation_of(response, 9)
    steps = steps_of(derivation, "named_roots")
    constants = {c.name: c.definition for c in response.closed_forms.constants}
    rows = [row for step in steps for row in step.facts["rows"]]
    named = [n for n, d in constants.items() if isinstance(d, RootPart)]
    assert [row["name"].text for row in rows] == named
    with ctx.workprec(BITS):
        for row in rows:
            ball = constants[row["name"].text].enclosure()
            low, high = (ball_of(Fraction(Decimal(x))) for x in row["interval"])
            assert low <= ball <= high
            decimal = Fraction(Decimal(row["decimal"]))
            assert abs(ball_of(decimal) - ball) <= abs(ball) * arb(10) ** -8 / 2
        for step in steps:
            for statement in step.statements:
                if statement.says != "polynomial":
                    continue
                formula, zero = statement.sides
                factor = next(f for f in response.spectrum.factors if f.degree > 2)
                for z in factor.roots.enclosures():
                    moved = z - response.field.enclose(factor.roots.centre)
                    value = at(formula, {"lambda": z, "mu": moved * moved})
                    assert value.contains(0)
                assert at(zero, {}) == 0


def test_an_undamped_model_says_what_mu_is() -> None:
    response = closedform.respond(closedform.system(UNDAMPED, initial=[1] * 6))
    statements = statements_of(derivation_of(response), "named_roots", "substitution")
    assert len(statements) == 1
    name, square = statements[0].sides
    assert name == Name("mu")
    assert at(square, {"lambda": acb(3)}) == 9
