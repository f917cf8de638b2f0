"""The independent reader passes right records and tells wrong ones."""

from __future__ import annotations

from copy import deepcopy
from fractions import Fraction
from typing import Any

import pytest
from flint import arb, ctx

from tests.parametric.plain_reader import (
    UnreadableError,
    ball_of,
    exact_value,
    names_in,
    parse,
    value,
)
from tests.parametric.record_reader import (
    DisagreementError,
    NotCoveredError,
    check_conditions,
    check_names,
    check_record,
    covering_cases,
    holds,
)

HALF = Fraction(1, 2)
Record = dict[str, Any]


def record(states: str, matrix: list[list[str]], cases: list[Record], **more: Any) -> Record:
    n = len(matrix)
    return {
        "layout": "closedform record 1",
        "title": "By hand",
        "time": "t",
        "states": states.split(),
        "matrix": matrix,
        "initial": ["1"] + ["0"] * (n - 1),
        "cases": [{"names": {}, "outputs": {}, **case} for case in cases],
        "not_covered": [],
        **more,
    }


def two_stages() -> Record:
    """Two stages of decay, with the case of equal rates."""
    return record(
        "n1 n2",
        [["-a", "0"], ["a", "-b"]],
        [
            {
                "condition": "a != b",
                "transition": [
                    ["exp(-a*t)", "0"],
                    ["a*(exp(-a*t) - exp(-b*t))/(b - a)", "exp(-b*t)"],
                ],
                "solution": ["exp(-a*t)", "a*(exp(-a*t) - exp(-b*t))/(b - a)"],
                "outputs": {"activity": "a*exp(-a*t) + a*b*(exp(-a*t) - exp(-b*t))/(b - a)"},
            },
            {
                "condition": "a = b",
                "transition": [["exp(-a*t)", "0"], ["a*t*exp(-a*t)", "exp(-a*t)"]],
                "solution": ["exp(-a*t)", "a*t*exp(-a*t)"],
                "outputs": {"activity": "(1 + a*t)*a*exp(-a*t)"},
            },
        ],
        parameters={"a": {"assume": "positive"}, "b": {"assume": "positive"}},
        characteristic_polynomial=["1", "a + b", "a*b"],
    )


def oscillator() -> Record:
    """x'' + 2 d x' + w2 x = 0 in its three cases, the first two with names."""
    above = "exp(-d*t)*cosh(kappa*t)", "exp(-d*t)*sinh(kappa*t)/kappa"
    below = "exp(-d*t)*cos(omega_d*t)", "exp(-d*t)*sin(omega_d*t)/omega_d"

    def entries(c: str, s: str) -> Record:
        transition = [[f"{c} + d*{s}", s], [f"-w2*{s}", f"{c} - d*{s}"]]
        return {"transition": transition, "solution": [row[0] for row in transition]}

    return record(
        "x v",
        [["0", "1"], ["-w2", "-2*d"]],
        [
            {
                "condition": "d^2 > w2",
                "names": {"kappa": {"definition": "sqrt(d^2 - w2)"}},
                **entries(*above),
            },
            {"condition": "d^2 == w2", **entries("exp(-d*t)", "t*exp(-d*t)")},
            {
                "condition": "d^2 < w2",
                "names": {"omega_d": {"definition": "sqrt(w2 - d^2)"}},
                **entries(*below),
            },
        ],
        parameters={"d": {"assume": "real"}, "w2": {"assume": "positive"}},
        characteristic_polynomial=["1", "2*d", "w2"],
    )


def two_compartments() -> Record:
    """Rates of exchange 1, elimination k, with named roots alpha > beta > 0."""
    p = ["1", "-(2 + k)", "k"]
    residue = "({z} - 1)*exp(-{z}*t)/(2*{z} - 2 - k)"
    central = f"{residue.format(z='alpha')} + {residue.format(z='beta')}"
    exchange = "(exp(-beta*t) - exp(-alpha*t))/(alpha - beta)"
    other = "({z} - 1 - k)*exp(-{z}*t)/(2*{z} - 2 - k)"
    return record(
        "a1 a2",
        [["-(1 + k)", "1"], ["1", "-1"]],
        [
            {
                "condition": "true",
                "names": {
                    "alpha": {"polynomial": p, "which": 2, "part": "real"},
                    "beta": {"polynomial": p, "which": 1, "part": "real"},
                },
                "transition": [
                    [central, exchange],
                    [exchange, f"{other.format(z='alpha')} + {other.format(z='beta')}"],
                ],
                "solution": [central, exchange],
            }
        ],
        parameters={"k": {"assume": "positive"}},
    )


def turning() -> Record:
    """D^3 x = k x: one real root rho and a pair sigma +/- i omega of an irreducible cubic."""
    cubic = ["1", "0", "0", "-k"]
    real, turn = "exp(rho*t)", "exp(sigma*t)"
    zero = f"({real} + 2*{turn}*cos(omega*t))/3"
    first, second = (
        f"({real} + {turn}*({sign}sqrt(3)*sin(omega*t) - cos(omega*t)))/(3*rho{power})"
        for sign, power in (("", ""), ("-", "^2"))
    )
    return record(
        "x y z",
        [["0", "1", "0"], ["0", "0", "1"], ["k", "0", "0"]],
        [
            {
                "condition": "k > 0",
                "names": {
                    "rho": {"polynomial": cubic, "which": 3, "part": "real"},
                    "sigma": {"polynomial": cubic, "which": 1, "part": "real"},
                    "omega": {"polynomial": cubic, "which": 2, "part": "imaginary"},
                },
                "transition": [
                    [zero, first, second],
                    [f"k*({second})", zero, first],
                    [f"k*({first})", f"k*({second})", zero],
                ],
                "solution": [zero, f"k*({second})", f"k*({first})"],
            }
        ],
        parameters={"k": {"assume": "positive"}},
    )


ACTIVITY = {"activity": "a*n1 + b*n2"}
RIGHT: list[tuple[str, Record, dict[str, Any], dict[str, str]]] = [
    ("two rates", two_stages(), {"a": 2, "b": HALF}, ACTIVITY),
    ("close rates", two_stages(), {"a": 1, "b": 1 + Fraction(1, 10**80)}, ACTIVITY),
    ("equal rates", two_stages(), {"a": HALF, "b": HALF}, ACTIVITY),
    ("rates with roots", two_stages(), {"a": "sqrt(2)", "b": "sqrt(3)/2"}, ACTIVITY),
    ("equal rates with roots", two_stages(), {"a": "sqrt(8)", "b": "2*sqrt(2)"}, ACTIVITY),
    ("strong damping", oscillator(), {"d": 3, "w2": 4}, {}),
    ("critical damping", oscillator(), {"d": Fraction(-1, 3), "w2": Fraction(1, 9)}, {}),
    ("light damping", oscillator(), {"d": Fraction(1, 7), "w2": 4}, {}),
    ("named real roots", two_compartments(), {"k": HALF}, {}),
    ("named real roots of balls", two_compartments(), {"k": "sqrt(2)"}, {}),
    ("named pair", turning(), {"k": 2}, {}),
    ("named pair, rational root", turning(), {"k": 27}, {}),
    ("named pair of balls", turning(), {"k": "sqrt(5)"}, {}),
]


@pytest.mark.parametrize(
    ("stated", "values", "outputs"), [case[1:] for case in RIGHT], ids=[case[0] for case in RIGHT]
)
def test_a_right_record_passes(stated: Record, values: Any, outputs: Any) -> None:
    assert check_record(stated, values, outputs=outputs) == 1
    check_names(stated)


def test_two_cases_that_hold_at_once_are_both_checked() -> None:
    stated = two_stages()
    stated["cases"].append({**stated["cases"][0], "condition": "b > a"})
    assert check_record(stated, {"a": 1, "b": 2}) == 2
    stated["cases"][1]["condition"] = "a > 0"
    with pytest.raises(DisagreementError, match="case 1"):
        check_record(stated, {"a": 1, "b": 2})


def changed(stated: Record, old: str, new: str) -> Record:
    """Return the record with every formula and condition rewritten."""

    def at(part: Any) -> Any:
        if isinstance(part, str):
            return part.replace(old, new)
        if isinstance(part, list):
            return [at(item) for item in part]
        if isinstance(part, dict):
            return {key: at(item) for key, item in part.items()}
        return part

    result = {**stated, "cases": at(stated["cases"])}
    assert result != stated
    return result


def placed(stated: Record, name: str, **more: Any) -> Record:
    """Return the record with another place or part for a named root."""
    result = deepcopy(stated)
    result["cases"][0]["names"][name] |= more
    return result


WRONG: list[tuple[str, Record, dict[str, Any], str]] = [
    ("sign", changed(two_stages(), "(b - a)", "(a - b)"), {"a": 2, "b": 1}, r"entry \(2, 1\)"),
    ("condition", changed(two_stages(), "a = b", "2*a = b"), {"a": 1, "b": 2}, "case 1"),
    ("gap", changed(two_stages(), "a = b", "2*a = b"), {"a": 1, "b": 1}, "no case covers"),
    ("pole", changed(two_stages(), "a != b", "a > 0"), {"a": 1, "b": 1}, "divides by 0"),
    ("name", changed(oscillator(), "d^2 - w2)", "d^2 + w2)"), {"d": 3, "w2": 4}, "transition"),
    ("which", placed(two_compartments(), "alpha", which=1), {"k": 1}, "no finite value"),
    ("no such root", placed(two_compartments(), "alpha", which=3), {"k": 1}, "no root 3"),
    ("part", placed(turning(), "omega", part="real"), {"k": 2}, "transition"),
    ("other root", placed(turning(), "sigma", which=3), {"k": 2}, "transition"),
    ("undefined", changed(turning(), "cos(omega*t)", "cos(nu*t)"), {"k": 2}, "nu has no value"),
    ("no number", changed(oscillator(), "d^2 - w2)", "w2 - d^2)"), {"d": 3, "w2": 4}, "finite"),
    (
        "polynomial",
        {**two_stages(), "characteristic_polynomial": ["1", "a - b", "a*b"]},
        {"a": 1, "b": 2},
        "characteristic",
    ),
    (
        "matrix",
        {**oscillator(), "matrix": [["0", "1"], ["-w2", "2*d"]]},
        {"d": 1, "w2": 2},
        "characteristic",
    ),
    ("start", {**two_stages(), "initial": ["1", "1"]}, {"a": 1, "b": 2}, "solution"),
]


@pytest.mark.parametrize(
    ("stated", "values", "words"), [case[1:] for case in WRONG], ids=[case[0] for case in WRONG]
)
def test_a_wrong_record_is_told(stated: Record, values: Any, words: str) -> None:
    with pytest.raises(DisagreementError, match=words):
        check_record(stated, values)


def test_a_wrong_output_is_told() -> None:
    with pytest.raises(DisagreementError, match="output activity"):
        check_record(two_stages(), {"a": 1, "b": 2}, outputs={"activity": "a*n1 - b*n2"})
    with pytest.raises(DisagreementError, match="the outputs are activity"):
        check_record(two_stages(), {"a": 1, "b": 2}, outputs={"other": "n1"})


def test_a_difference_in_the_fortieth_digit_is_told() -> None:
    stated = changed(two_stages(), "*t*exp", f"*t*(1 + 1/{10**40})*exp")
    with pytest.raises(DisagreementError, match="transition"):
        check_record(stated, {"a": 1, "b": 1})


def test_what_is_not_covered_is_told_apart_from_a_gap() -> None:
    stated = changed(two_stages(), "a = b", "2*a = b")
    stated["not_covered"] = ["a = b"]
    with pytest.raises(NotCoveredError, match="a = b"):
        check_record(stated, {"a": 1, "b": 1})


def test_a_name_that_nothing_defines_is_told() -> None:
    with pytest.raises(DisagreementError, match="uses nu"):
        check_names(changed(turning(), "cos(omega*t)", "cos(nu*t)"))


def test_a_condition_that_holds_nowhere_is_told() -> None:
    check_conditions(two_stages())
    check_conditions(oscillator())
    for old, new in (("a != b", "a != b and a == b"), ("a = b", "a < b and 2 > 1 and a > b")):
        with pytest.raises(DisagreementError, match="holds nowhere"):
            check_conditions(changed(two_stages(), old, new))


@pytest.mark.parametrize(
    ("condition", "answer"),
    [
        ("true", True),
        ("a < b and b <= 2", True),
        ("a < b and b < 2", False),
        ("0 < a <= 1 < b", True),
        ("a != 1", False),
        ("a^2 - 1 = 0 and b == 2*a", True),
        ("sqrt(b)*sqrt(b) >= 2", True),
        ("sqrt(b) > 3/2", False),
    ],
)
def test_a_condition_is_decided(condition: str, answer: object) -> None:
    with ctx.workprec(400):
        assert holds(condition, {"a": Fraction(1), "b": Fraction(2)}) is answer


def test_what_cannot_be_decided_or_read_is_no_condition() -> None:
    with pytest.raises(DisagreementError, match="cannot be decided"):
        holds("a = 0", {"a": arb(0, 1e-9)})
    with pytest.raises(DisagreementError, match="no comparison"):
        holds("a", {"a": Fraction(1)})
    assert covering_cases(two_stages(), {"a": Fraction(1), "b": Fraction(1)}) == [1]


# --- plain notation ---------------------------------------------------------------------------


@pytest.mark.parametrize(
    ("text", "number"),
    [
        ("-a^2/2", Fraction(-9, 8)),
        ("2 - 3 - 4", -5),
        ("(1/2)*a", Fraction(3, 4)),
        ("-(a - 1)*a", Fraction(-3, 4)),
        ("a^(0 - 2)", Fraction(4, 9)),
        ("sqrt(9/4) - a", 0),
        ("exp(0) + sin(0) + cos(0) + sinh(0)*cosh(0)", 2),
    ],
)
def test_rational_values_are_exact(text: str, number: Fraction) -> None:
    assert exact_value(parse(text), {"a": Fraction(3, 2)}) == number


@pytest.mark.parametrize(
    ("text", "close"),
    [("exp(t)", 2.718281828459045), ("2*sinh(-t/2)", -1.0421906109874948), ("2^(t/2)", 2**0.5)],
)
def test_other_values_are_narrow_balls(text: str, close: float) -> None:
    with ctx.workprec(200):
        found = ball_of(value(parse(text), {"t": Fraction(1)}))
        assert abs(float(found) - close) < 1e-14
        assert found.rad() < 1e-50


@pytest.mark.parametrize(
    "text", ["", "a b", "1.5", "a/2*b", "a/b/c", "(a", "a)", "2a", "a**2", "-", "tan(a)", "a^", "é"]
)
def test_what_is_not_plain_notation_is_refused(text: str) -> None:
    with pytest.raises(UnreadableError):
        value(parse(text), {"a": Fraction(1), "b": Fraction(1), "c": Fraction(1)})


def test_the_names_of_a_formula_are_found() -> None:
    assert names_in(parse("exp(-a*t)*(b + 2)/sqrt(a)")) == {"a", "b", "t"}
