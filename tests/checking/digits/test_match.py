"""Printed decimals are matched with exact numbers, and judged by them."""

from __future__ import annotations

from fractions import Fraction

import pytest
from flint import arb, ctx
from hypothesis import given
from hypothesis import strategies as st

from closedform.checking.balls.enclosing import NoValueError, Quantities, enclose_written
from closedform.checking.digits import (
    DigitsMatch,
    largest_difference,
    match_digits,
    told,
    value_digits,
    value_from_rounded,
)
from closedform.notation.written.tree import Literal
from tests.checking.digits.typed import written

DAMPED = "exp(-t/2)*(3*cos(sqrt(19)*t/2)-7/5*sin(sqrt(19)*t/2))"
"""With the amplitude sqrt(10.96) = 3.31 and the phase atan(7/15) = 0.4366."""


def matched(claimed: str, true: str, *variables: str, approximate: bool = False) -> DigitsMatch:
    pair = (written(claimed), written(true))
    return match_digits((pair,), variables or ("t",), approximate=approximate)


@pytest.mark.parametrize(
    ("claimed", "true"),
    [
        ("3.31*exp(-0.5*t)*cos(2.179*t+0.437)", DAMPED),
        ("3.311*e**(-0.500*t)*cos(2.18*t+0.4)", DAMPED),
        ("3.00*exp(-0.5*t)*cos(2.179*t)-1.40*exp(-0.50*t)*sin(2.179*t)", DAMPED),
        ("exp(-0.5*t)*(3.0*cos(2.18*t)-1.4*sin(2.179*t))", DAMPED),
        ("exp(-t/2.0)*(3*cos(2.18*t)-1.4*sin(2.18*t))", DAMPED),
        (
            "(1.5+0.7*I)*exp((-0.5+2.179*I)*t)+(1.5-0.7*I)*exp((-0.5-2.179*I)*t)",
            DAMPED,
        ),
        ("re((3.00+1.40*I)*exp((-0.5+2.18*I)*t))", DAMPED),
        (
            "0.500*exp(-1.00*t)-0.667*exp(-2.00*t)+0.167*exp(-5.00*t)",
            "exp(-t)/2-2/3*exp(-2*t)+exp(-5*t)/6",
        ),
        ("1.0*exp(-2.0*t)+3.0*t*exp(-2.0*t)", "exp(-2*t)+3*t*exp(-2*t)"),
        (
            "1.00*exp(-0.01*t)+0.50*exp(-100.0*t)+0.33*cos(12.0*t)",
            "exp(-t/100)+exp(-100*t)/2+cos(12.03*t)/3",
        ),
        ("0.00*exp(-3.3*t)+1.00*exp(-2.0*t)", "exp(-2*t)"),
        ("0.00*exp(-3.3*t)+1.00*exp(-2.0*t)", "exp(-2*t)+0.004*exp(-3.27*t)"),
        ("0.05*20*exp(-t)", "exp(-t)"),
        ("0.39*2.56*exp(-t)", "0.3949*2.5551*exp(-t)"),
        ("1.41*exp(-2.0*t)+1.41*exp(-2.0*t)", "sqrt(8)*exp(-2*t)"),
        ("0.0*exp(-2.0*t)", "t-t"),
        (
            "2.07*exp(-3.74*t)-5.69*exp(-3.44*t)+1.44*exp(-3.45*t)",
            "sqrt(154)/6*exp(-sqrt(14)*t)-sqrt(291)/3*exp(-sqrt(189)/4*t)+sqrt(132)/8*exp(-sqrt(107)/3*t)",
        ),
        ("2.0-1.0*exp(-3.0e-3*t)", "2-exp(-3*t/1000)"),
        ("4.9*t**2+0.33", "49/10*t**2+1/3"),
    ],
)
def test_rounded_formulas_of_time_are_right(claimed: str, true: str) -> None:
    match = matched(claimed, true)
    assert (match.kind, told(match)) == ("right", "")
    for found in match.judged:
        assert found.deviation <= arb(0.5) * float(found.literal.last_place) + arb(2) ** -90


@pytest.mark.parametrize(
    ("claimed", "true", "variables"),
    [
        ("lam**2+4.36*lam+1.27", "lam**2+sqrt(19)*lam+1.2749", ("lam",)),
        ("lam**3+12.0*lam**2+1.0e4*lam+0.67", "lam**3+12*lam**2+10000*lam+2/3", ("lam",)),
        ("1/(s**2+0.40*s+9.16)", "1/(s**2+2/5*s+229/25)", ("s",)),
        ("0.632*sqrt(k/m)", "sqrt(2/5*k/m)", ("k", "m")),
        ("1.33*F/k*(1-exp(-0.71*t*k/c))", "4/3*F/k*(1-exp(-k*t/c/sqrt(2)))", ("t", "k", "c", "F")),
    ],
)
def test_other_variables_serve_as_well(claimed: str, true: str, variables: tuple[str, ...]) -> None:
    assert matched(claimed, true, *variables).kind == "right"


@pytest.mark.parametrize(
    ("claimed", "true", "kind", "text"),
    [
        ("3.31*exp(-0.5*t)*cos(2.180*t+0.437)", DAMPED, "rounding",
         "2.180 → 2.179 (exact value 2.1794495…)"),
        ("3.00*exp(-0.5*t)*cos(2.180*t)-1.40*exp(-0.50*t)*sin(2.179*t)", DAMPED, "rounding",
         "2.180 → 2.179 (exact value 2.1794495…)"),
        ("3.31*exp(-0.5*t)*cos(2.179*t+0.436)", DAMPED, "rounding",
         "0.436 → 0.437 (cut off where it is to be rounded: exact value 0.4366272…)"),
        ("3.31*exp(-0.5*t)*cos(2.15*t+0.437)", DAMPED, "rounding",
         "2.15 → 2.18 (exact value 2.179449…)"),
        ("3.31*exp(-0.5*t)*cos(2.179*t-0.437)", DAMPED, "wrong", "0.437 has the wrong sign"),
        ("3.31*exp(0.5*t)*cos(2.179*t+0.437)", DAMPED, "wrong", "0.5 has the wrong sign"),
        ("3.00*exp(-0.5*t)*cos(2.179*t)-1.40*exp(-0.50*t)*sin(2.719*t)", DAMPED, "wrong",
         "2.719 → 2.179 (exact value 2.1794495…)"),
        ("0.01*exp(-3.3*t)+1.00*exp(-2.0*t)", "exp(-2*t)", "rounding",
         "0.01 → 0.00 (exact value 0)"),
        ("0.5*1.273*exp(-t)", "64/100*exp(-t)", "rounding", "1.273 → 1.280 (exact value 1.28)"),
        ("0.05*20*exp(-t)", "6/5*exp(-t)", "rounding", "0.05 → 0.06 (exact value 0.06)"),
        ("7.5*exp(-2.0*t)", "exp(-2*t)", "wrong", "7.5 → 1.0 (exact value 1)"),
        ("cos(2.179*t)", "sin(sqrt(19)/2*t)", "none", ""),
        ("1.27*exp(-0.5*t)", DAMPED, "none", ""),
        ("exp(-0.5*t)*(3.0*cos(2.18*t)+1.4*t)", DAMPED, "none", ""),
        ("t+1", "t+2", "none", ""),
        ("1.41*exp(-2.0*t)+1.41*exp(-2.0*t)", "2.831*exp(-2*t)", "rounding",
         "1.41 → 1.42 (exact value 1.421)"),
        ("0.3*exp(-2.0*t)", "t-t", "wrong", "0.3 → 0.0 (exact value 0)"),
    ],
)  # fmt: skip
def test_what_is_not_right_is_told(claimed: str, true: str, kind: str, text: str) -> None:
    match = matched(claimed, true)
    assert (match.kind, told(match)) == (kind, text)


@pytest.mark.parametrize(
    ("claimed", "true", "kind", "verdict", "correct"),
    [
        ("0.0400", "1/25", "right", "right", "0.0400"),
        ("0.040", "0.0404", "right", "right", "0.040"),
        ("0.0400", "0.0404", "rounding", "off", "0.0404"),
        ("0.0400", "0.04012", "rounding", "last place", "0.0401"),
        ("0.12", "1/8", "right", "right", "0.13"),
        ("0.13", "1/8", "right", "right", "0.13"),
        ("0.14", "27/200", "right", "right", "0.14"),
        ("0.13", "27/200", "rounding", "truncated", "0.14"),
        ("0.245", "0.2449", "right", "right", "0.245"),
        ("0.245", "-0.2449", "wrong", "off", "-0.245"),
        ("5.86e2", "586.08", "right", "right", "586"),
        ("5.8e2", "586.08", "rounding", "truncated", "5.9e2"),
        ("1.23e-7", "sqrt(2)/10**7", "wrong", "off", "1.41e-7"),
        ("2.0", "2", "right", "right", "2.0"),
        ("0.0", "0", "right", "right", "0.0"),
        ("0.00", "-1/250", "right", "right", "0.00"),
        ("3.14", "pi", "right", "right", "3.14"),
        ("3.15", "pi", "rounding", "last place", "3.14"),
    ],
)
def test_single_numbers_are_judged(
    claimed: str, true: str, kind: str, verdict: str, correct: str
) -> None:
    match = value_digits(written(claimed), written(true))
    (found,) = match.judged
    assert (match.kind, found.verdict, found.correct) == (kind, verdict, correct)


@pytest.mark.parametrize(
    ("claimed", "true", "kind"),
    [
        ("-0.500+2.179*I", "-1/2+sqrt(19)/2*I", "right"),
        ("-0.500+2.180*I", "-1/2+sqrt(19)/2*I", "rounding"),
        ("-0.500-2.179*I", "-1/2+sqrt(19)/2*I", "wrong"),
        ("2.179", "sqrt(19)/2*I", "none"),
        ("-2.18", "-sqrt(19)/2", "right"),
        ("20*0.32", "6.4", "right"),
        ("sqrt(4.75)", "sqrt(19)/2", "right"),
    ],
)
def test_values_may_be_complex_or_worked_out(claimed: str, true: str, kind: str) -> None:
    assert value_digits(written(claimed), written(true)).kind == kind


@pytest.mark.parametrize(
    ("claimed", "approximate", "kind", "correct"),
    [
        ("586", True, "right", "586"),
        ("587", True, "rounding", "586"),
        ("586", False, "none", None),
        ("586*exp(-3*t)", True, "right", "586"),
        ("587*exp(-3*t)", True, "rounding", "586"),
        ("1173/2*exp(-3*t)", True, "rounding", "1172"),
        ("586.1*exp(-3*t)", False, "right", "586.1"),
    ],
)
def test_integers_are_rounded_numbers_in_approximate_lines_only(
    claimed: str,
    approximate: bool,  # noqa: FBT001
    kind: str,
    correct: str | None,
) -> None:
    true = "58608/100*exp(-3*t)" if "t" in claimed else "58608/100"
    match = matched(claimed, true, approximate=approximate)
    assert match.kind == kind
    assert [j.correct for j in match.judged][:1] == ([correct] if correct else [])


def test_each_entry_of_a_matrix_is_judged_by_itself() -> None:
    claimed = ("1.00*exp(-1.0*t)", "0.33*exp(-1.0*t)", "0.34*exp(-1.0*t)", "0.00")
    true = ("exp(-t)", "exp(-t)/3", "exp(-t)/3", "0")
    pairs = [(written(a), written(b)) for a, b in zip(claimed, true, strict=True)]
    match = match_digits(pairs, ("t",))
    assert match.kind == "rounding"
    assert [(j.pair, j.correct) for j in match.wrong] == [(2, "0.33")]
    broken = match_digits([*pairs, (written("t"), written("1"))], ("t",))
    assert (broken.kind, broken.pair) == ("none", 4)


def test_quantities_and_samples_of_parameters_are_used() -> None:
    known = Quantities((("r", None), ("w", written("sqrt(k)*r"))), lambda: {"r": arb(3).sqrt()})
    pair = (written("0.50*sin(1.732*t*sqrt(k))"), written("sin(w*t)/2"))
    samples = [{"k": written(text)} for text in ("2", "7/3", "5")]
    assert match_digits((pair,), ("t", "k"), known, samples=samples).kind == "right"
    off = (written("0.50*sin(1.733*t*sqrt(k))"), pair[1])
    assert match_digits((off,), ("t", "k"), known, samples=samples).kind == "rounding"


def test_formulas_are_compared_within_their_interval() -> None:
    pair = (written("1.00*abs(t-5)"), written("5-t"))
    assert match_digits((pair,), ("t",), between={"t": (Fraction(0), Fraction(5))}).kind == "right"
    assert match_digits((pair,), ("t",), between={"t": (Fraction(4), None)}).kind == "none"


def test_a_formula_without_value_is_an_error() -> None:
    with pytest.raises(NoValueError, match="the name q"):
        matched("1.0*q", "t")


def test_the_precision_is_left_as_it_was() -> None:
    before = ctx.prec
    matched("3.31*exp(-0.5*t)*cos(2.179*t+0.437)", DAMPED)
    assert ctx.prec == before


@pytest.mark.parametrize(("shown", "agrees"), [("-1.74", True), ("-1.73", False), ("-2", True)])
def test_a_value_of_the_printed_formula_is_told_from_one_of_the_exact(
    shown: str,
    agrees: bool,  # noqa: FBT001
) -> None:
    formula = written("3.31*exp(-0.5*t)*cos(2.179*t+0.437)")
    assert value_from_rounded(formula, {"t": written("1")}, written(shown)) is agrees


def test_the_largest_difference_is_found_and_certified() -> None:
    pairs = [
        (written("exp(-t)"), written("exp(-t)")),
        (written("1/t+exp(-t)"), written("1/t+exp(-2*t)")),
        (written("t"), written("t+1/100")),
    ]
    found = largest_difference(pairs, "t", [Fraction(k, 2) for k in range(4)])
    assert found is not None
    assert (found.pair, found.instant) == (1, Fraction(1, 2))
    with ctx.workprec(200):
        exact = enclose_written(written("exp(-1/2)-exp(-1)"), {})
    assert found.difference.overlaps(exact)
    assert found.difference.real.rel_accuracy_bits() >= 40
    assert largest_difference(pairs[:1], "t", [Fraction(1)]) is None


def rounded(exact: str, places: int) -> str:
    with ctx.workprec(300):
        value = enclose_written(written(exact), {}).real * arb(10) ** places
        whole = (value + arb(0.5)).floor().unique_fmpz()
    assert whole is not None
    digits = str(int(whole)).rjust(places + 1, "0")
    return f"{digits[:-places]}.{digits[-places:]}"


@st.composite
def four_numbers(draw: st.DrawFn) -> tuple[str, ...]:
    """Surds between 0.15 and 18, none near another: then every one is determined."""
    surd = st.tuples(st.integers(2, 300), st.integers(1, 9))
    found: list[tuple[int, int]] = []
    while len(found) < 4:
        found.append(draw(surd.filter(lambda new: all(are_apart(new, old) for old in found))))
    return tuple(f"(sqrt({radicand})/{below})" for radicand, below in found)


def are_apart(one: tuple[int, int], other: tuple[int, int]) -> bool:
    squares = sorted(Fraction(radicand, below**2) for radicand, below in (one, other))
    return squares[1] > squares[0] * Fraction(3, 2)


FORMS = (
    "{}*exp(-{}*t)+{}*exp(-{}*t)",
    "exp(-{}*t)*({}*cos({}*t)+{}*sin(5*t))",
    "{}*exp(-{}*t)*cos({}*t+{})",
    "{}*exp(-{}*t)*(1+{}*t)+{}",
    "{}/(t**2+{}*t+{})+{}",
)


@given(st.sampled_from(FORMS), four_numbers(), st.integers(2, 5), st.data())
def test_exactly_rounded_formulas_are_right_and_others_are_not(
    form: str, exact: tuple[str, ...], places: int, data: st.DataObject
) -> None:
    true = form.format(*exact)
    shown = [rounded(number, places) for number in exact]
    assert matched(form.format(*shown), true).kind == "right"
    index = data.draw(st.integers(0, 3))
    units = data.draw(st.integers(1, 30)) * data.draw(st.sampled_from((1, -1)))
    moved = Fraction(shown[index]) + Fraction(units, 10**places)
    if moved < 0:
        return
    changed = list(shown)
    changed[index] = rounded(f"{moved.numerator}/{moved.denominator}", places)
    match = matched(form.format(*changed), true)
    assert match.kind != "right"
    if match.kind == "rounding" and len(match.wrong) == 1:
        assert match.wrong[0].literal.value == moved
        assert match.wrong[0].correct == shown[index]


@given(st.fractions(-50, 50, max_denominator=999), st.integers(0, 4), st.integers(-3, 3))
def test_a_number_is_right_within_half_a_unit_and_nowhere_else(
    exact: Fraction, places: int, units: int
) -> None:
    unit = Fraction(1, 10**places)
    printed = abs(round(exact / unit) + units) * unit
    literal = Literal(printed, unit, is_decimal=True)
    (found,) = value_digits(literal, written(f"({exact.numerator})/{exact.denominator}")).judged
    error = abs(printed - exact)
    if error != unit / 2:
        assert (found.verdict == "right") == (error < unit / 2)
    assert Fraction(found.correct) - exact in (unit / 2, -unit / 2) or (
        abs(Fraction(found.correct) - exact) < unit / 2
    )
    if found.verdict == "truncated":
        assert printed == exact // unit * unit
