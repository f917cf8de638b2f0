"""The results that a derivation states, and every digit of its tables."""

from __future__ import annotations

from decimal import Decimal
from fractions import Fraction

import mpmath
import pytest
from flint import acb, acb_mat, ctx

import closedform
from closedform.algebra.surds import SurdSum
from closedform.notation.expression import Name
from closedform.response.sampling import default_times
from closedform.verification import verify
from tests.algebra.test_enclosure import rounded_by_mpmath
from tests.derivation.values import (
    BITS,
    at,
    derivation_of,
    matrix_of,
    names_at,
    statements_of,
    steps_of,
)
from tests.response.systems import KINDS, response_to
from tests.response.test_sampling import expm_solution

each_kind = pytest.mark.parametrize("kind", KINDS)


@each_kind
@pytest.mark.parametrize("t", [Fraction(0), Fraction(4, 9)])
def test_the_solution_and_outputs_in_print_are_those_of_the_matrix(kind: str, t: Fraction) -> None:
    response = response_to(kind)
    derivation = derivation_of(response)
    field, model = response.field, response.model
    with ctx.workprec(BITS):
        names = names_at(response, t)
        exponential = (matrix_of(response) * names[model.time]).exp()
        start = acb_mat([[acb(field.enclose(row[0]))] for row in response.initial.to_list()])
        state = exponential * start
        solution = statements_of(derivation, "solution", "solution of state")
        assert [s.sides[0].letter for s in solution] == list(model.states)
        for i, statement in enumerate(solution):
            assert at(statement.sides[1], names).overlaps(state[i, 0])
        for statement, output in zip(
            statements_of(derivation, "outputs", "output"), model.outputs, strict=True
        ):
            value = sum(
                (
                    state[i, 0] * field.enclose(field.scalar(w))
                    for i, w in enumerate(output.weights)
                ),
                acb(0),
            )
            assert statement.sides[0].letter == output.name
            assert at(statement.sides[1], names).overlaps(value)


@each_kind
@pytest.mark.parametrize("digits", [4, 15])
def test_every_digit_of_the_table_of_values_is_right(kind: str, digits: int) -> None:
    response = response_to(kind)
    (step,) = steps_of(derivation_of(response, digits), "values")
    model = response.model
    header = step.facts["header"]
    assert header[0] == Name(model.time)
    columns = [*model.states, *(o.name for o in model.outputs)]
    assert [symbol.letter for symbol in header[1:]] == columns
    mp = mpmath.mp.clone()
    mp.dps = digits + 40
    times = default_times(response)
    assert len(step.facts["rows"]) == len(times)
    for time, (instant, *texts) in zip(times, step.facts["rows"], strict=True):
        assert Fraction(Decimal(instant)) == time.as_fraction()
        state = expm_solution(response, time, mp)
        outputs = [
            mp.fsum(
                mp.mpf(w.as_fraction().numerator) * x / w.as_fraction().denominator
                for w, x in zip(o.weights, state, strict=True)
            )
            for o in model.outputs
        ]
        for text, value in zip(texts, [*state, *outputs], strict=True):
            if abs(value) < mp.mpf(10) ** -(digits + 20):
                assert text == "0"
            else:
                many = mp.nstr(value, digits + 20, strip_zeros=False)
                assert Decimal(text) == rounded_by_mpmath(many, digits)


@pytest.mark.parametrize(
    ("time", "text"),
    [
        ("0", "0"),
        ("1/2", "0.5"),
        ("5/4", "1.25"),
        ("1/3", "1/3"),
        ("-1/8", "-0.125"),
        ("12", "12"),
        ("3/1000", "0.003"),
        ("sqrt(2)", "sqrt(2)"),
        ("22/7", "22/7"),
    ],
)
def test_instants_are_written_exactly(time: str, text: str) -> None:
    model = closedform.system([[-1]], initial=[1], times=[time])
    (step,) = steps_of(derivation_of(closedform.respond(model)), "values")
    assert [row[0] for row in step.facts["rows"]] == [text]
    assert not step.facts["chosen"]


@pytest.mark.parametrize("kind", ["named cubic", "named quartic"])
def test_amounts_are_defined_by_what_the_table_says(kind: str) -> None:
    """r(lambda)/p'(lambda) at a real root; 2 Re and -2 Im of it at a pair."""
    response = response_to(kind)
    (step,) = steps_of(derivation_of(response, 12), "abbreviations")
    numerator = None
    seen = set()
    with ctx.workprec(BITS):
        names = names_at(response, Fraction(0))
        for row in step.facts["rows"]:
            numerator = row["numerator"] or numerator
            root = acb(at(row["at"], names))
            factor = response.spectrum.factors[int(row["factor"]) - 1]
            slope = acb(0)
            for c in factor.p.diff().to_list():
                slope = slope * root + response.field.enclose(c)
            value = acb(at(numerator, {"lambda": root})) / slope
            real = root.imag == 0
            parts = (value.real, None) if real else (2 * value.real, -2 * value.imag)
            for constant, part in zip(row["constants"], parts, strict=True):
                if constant is None:
                    continue
                name, decimal = constant
                seen.add(name.text)
                assert names[name.text].real.overlaps(part)
                error = abs(acb(decimal).real - part)
                assert error <= abs(part) * acb(10).real ** -11
    shown = {
        name.text
        for kind_, says in (("solution", "solution of state"), ("outputs", "output"))
        for s in statements_of(derivation_of(response), kind_, says)
        for name in names_of(s.sides[1])
        if name.text.startswith("C")
    }
    assert shown <= seen


def names_of(formula: object) -> list[Name]:
    if isinstance(formula, Name):
        return [formula]
    found = []
    for attribute in getattr(formula, "__slots__", ()):
        value = getattr(formula, attribute)
        for part in value if isinstance(value, tuple) else (value,):
            found += names_of(part)
    return found


@each_kind
def test_the_record_is_listed_check_by_check(kind: str) -> None:
    response = response_to(kind)
    (step,) = steps_of(derivation_of(response), "verification")
    rows = step.facts["rows"]
    checks = derivation_of(response).checks
    assert checks[:-1] == verify(response).checks
    assert checks[-1].item == "statements of the derivation"
    assert [(r["outcome"], r["how"]) for r in rows] == [(c.outcome, c.how) for c in checks]


def test_a_time_that_is_a_surd_has_certified_values() -> None:
    model = closedform.system([[0, 1], [0, 0]], initial=[1, 2], times=["sqrt(2)"])
    (step,) = steps_of(derivation_of(closedform.respond(model)), "values")
    ((_, first, second),) = step.facts["rows"]
    assert (first, second) == ("3.82843", "2")  # 1 + 2 sqrt(2), exactly 2
    assert model.times == (SurdSum.of({2: Fraction(1)}),)
