"""Bad input under every key of a driven model: one error that says where, what, and what to do."""

from __future__ import annotations

from pathlib import Path

import pytest

from closedform.errors import InputError
from closedform.model import load

ONE = '{ x = "1" }'
TWO = """{ x = "1", "x'" = "0" }"""


def _stated(
    *equations: str, inputs: str = "", initial: str = ONE, more: str = "", after: str = ""
) -> str:
    """The text of a model file; `more` stands before the tables, `after` behind them."""
    texts = ", ".join(f'"{equation}"' for equation in equations)
    lines = ['title = "Bench"', f"equations = [{texts}]", more]
    if initial:
        lines.append(f"initial = {initial}")
    if inputs:
        lines += ["[inputs]", inputs]
    return "\n".join([*lines, after])


def _found(tmp_path: Path, text: str) -> str:
    path = tmp_path / "bench.toml"
    path.write_bytes(text.encode())
    with pytest.raises(InputError) as caught:
        load(path)
    found = str(caught.value)
    assert found.startswith(str(path))
    assert len(found) < 2_000
    return found


EQUATIONS = {
    "": "an equation has a sign =",
    "x'": "an equation has a sign =",
    "= x": "one side of the equation is empty",
    "x' = x = 1": "an equation has one sign =",
    "x' == x": "write = for it",
    "x' <= x": "two sides are compared",
    "x = x": "no unknown is left in the equation 'x = x'",
    "x'' - x'' = F": "no unknown is left in the equation",
    "0*x' = F": "no unknown is left in the equation '0*x' = F'",
    "0*x' + x = F": "the equations leave no state",
    "x' = x/0": "'x/0' divides by zero",
    "x' = x/(1 - 1)": "divides by zero",
    "x'*x = F": "the term 'x'*x' of the equation 'x'*x = F' is a product of unknowns",
    "x' = F*x": "the term 'F*x'",
    "x' = F^2": "the term 'F^2'",
    "x' = x^2": "has an unknown in a power",
    "x' = sin(x) + F": "the term 'sin(x)' of the equation 'x' = sin(x) + F' has an unknown inside",
    "x' = F/x": "the term 'F/x' of the equation 'x' = F/x' has an unknown in its denominator",
    "x' = t*x": "the term 't*x' of the equation 'x' = t*x' multiplies an unknown",
    "x' = step(t - 1)*x": "multiplies an unknown by what depends on the time",
    "x' = k*x + F": "'k' in the term 'k*x' of the equation 'x' = k*x + F' is declared nowhere",
    "x' = x(t - 1)": "the term 'x(t - 1)' of the equation 'x' = x(t - 1)' is an unknown at another",
    "x' = x(2*t)": "is an unknown at another time",
    "x' = u(t - 1)": "'u' in the term 'u(t - 1)' of the equation 'x' = u(t - 1)' is declared",
    "x' = F(2*t)": "the term 'F(2*t)'",
    "x' = F(0)": "no function",
    "x' = (x)' + F": "a prime stands behind a bracket",
    "x' = t' + F": "what has a prime here does not depend on the time",
    "x' = 3'": "a number has a prime",
    "x' = delta(t)^2": "'delta(t)^2' has no meaning",
    "x' = step(t^2)": "the argument of 'step(t^2)' does not change its sign at one known instant",
    "x' = delta(0)": "the argument of 'delta(0)'",
    "x' = 1/t": "'1/t' divides by a function of the time",
    "x' = sin(t^2)": "the argument of 'sin(t^2)' is not of the form a*t + b",
    "x' = t^t": "'t^t' is not read",
    "x' = t^9999": "'t^9999' is not read",
    "x' = sqrt(t)": "'sqrt(t)' is not read as a function of the time",
    "x' = sqrt(-1)": "the square root of a negative number",
    "x' = tan(t)": "it is no function",
    "x' = nan": "'nan' is no value",
    "x' = 1e9999*x": "is too large to be held exactly",
    "x' = 9^9^9*x": "is too large to be held exactly",
    "x' = " + "7" * 5_000 + "*x": "is too large to be held exactly",
    "x' = " + "(" * 3_000 + "x" + ")" * 3_000: "nested more than 100 levels deep",
    "x' = " + "-" * 5_000 + "x": "nested more than 100 levels deep",
    "x' = i*x": "there is no imaginary unit here, formulas are real",
    "y" * 900 + "' = F": "names have at most",
    "dx/dt = x": "a derivative is written as a quotient",
    "diff(x, t) = x": "a derivative is written as a function",
    "x_dot = x": "a derivative is written with dots",
    "\N{LATIN SMALL LETTER X WITH DOT ABOVE} = x": "a derivative is written with dots",
    "x\N{RIGHT DOUBLE QUOTATION MARK} = x": "a character does not belong to a formula",
    "\N{FULLWIDTH LATIN SMALL LETTER X}' = x": "a character does not belong to a formula",
    "x' = x + y + F": "1 equation for 2 unknowns",
    "x' = F + 0x10": "'x10' has the weight 0 in the equation 'x' = F + 0x10'",
    "x' = x; y' = y": "an equation has one sign =",
}


@pytest.mark.parametrize("equation", EQUATIONS)
def test_an_equation_that_is_none_is_told(tmp_path: Path, equation: str) -> None:
    found = _found(tmp_path, _stated(equation, inputs='F = "1"'))
    assert EQUATIONS[equation] in found
    assert "equations" in found


SYSTEMS: dict[str, tuple[tuple[str, ...], str, str]] = {
    "one twice": (("x' = x", "x' = x"), "", "equation 2, 'x' = x', says nothing new"),
    "a multiple": (("x' = y", "2*x' = 2*y"), "", "it is a combination of equation 1"),
    "a multiple with constants": (
        ("x' = y", "x + y = 1", "2*x + 2*y = 2"),
        "",
        "equation 3, '2*x + 2*y = 2', says nothing new: it is a combination of equation 2",
    ),
    "a multiple with functions": (
        ("x' = y", "x + y = sin(t)^2", "2*x + 2*y = 1 - cos(2*t)"),
        "",
        "equation 3, '2*x + 2*y = 1 - cos(2*t)', says nothing new",
    ),
    "against each other": (("x' = x", "x' = x + 1"), "", "contradict each other"),
    "one too many": (("x' = x", "x = 3"), "", "2 equations for 1 unknown"),
    "one too few": (("x' + y' = 0",), "", "1 equation for 2 unknowns, 'x' and 'y'"),
    "a fixed place": (("x'' = F_c", "x = sin(t)"), "", "equation 2, 'x = sin(t)', fixes x"),
    "a hidden constraint": (("x' = y", "y' = z", "x = t"), "", "fixes x"),
    "no motion": (("x = 2*sin(t)",), "", "the equations leave no state"),
    "what cancels": (("x' = x", "y = y + x"), "", "'y' has the weight 0 in the equation"),
    "an impulse of an unknown": (
        ("x' = -x", "y = 2*x + d"),
        'd = "delta(t - 1)"',
        "'y' follows at each instant from the states and from 'd', which strikes at 1",
    ),
    "a jump of what is differentiated": (
        ("x' = -x", "y = 2*x + d'"),
        'd = "step(t - 1)"',
        "'y' follows at each instant from the states and from 'd'', which strikes at 1",
    ),
    "impulses again and again": (
        ("x' = y", "x + y = d"),
        'd = { is = "delta(t)", period = "2" }',
        "'y' follows at each instant from the states and from 'd', which strikes at 0",
    ),
    "the derivative of an impulse": (
        ("x' = -x + d'",),
        'd = "delta(t - 1)"',
        "'d'' is the derivative of an impulse",
    ),
    "an input that is the unknown": (("x' = -x",), 'x = "1"', "there is no unknown"),
    "an input called like the time": (("x' = t",), 't = "1"', "it is the name of the time"),
    "an input called like a function": (("x' = step",), 'step = "1"', "the name of a function"),
    "an input called pi": (("x' = pi",), 'pi = "1"', "'pi' cannot be used as a name"),
    "an input called e": (("x' = e",), 'e = "1"', "'e' cannot be used as a name"),
    "an input that is nowhere": (("x' = x",), 'F = "1"', "the input 'F' is used nowhere"),
}


@pytest.mark.parametrize("name", SYSTEMS)
def test_equations_that_do_not_go_together_are_told(tmp_path: Path, name: str) -> None:
    equations, inputs, words = SYSTEMS[name]
    found = _found(tmp_path, _stated(*equations, inputs=inputs))
    assert words in found
    assert "line " in found


def test_impulses_that_cancel_are_no_impulse(tmp_path: Path) -> None:
    path = tmp_path / "bench.toml"
    inputs = 'd = "delta(t - 1)"\ng = "2*delta(t - 1) + t"'
    path.write_text(_stated("x' = -x + d", "y = 2*x + 2*d - g", inputs=inputs))
    assert load(path).name == "bench"


@pytest.mark.parametrize(
    ("start", "use", "begins"),
    [("1/2", "F", "0"), ("2", "F", "0"), ("0", "F(t + 1)", "-1"), ("3", "F(t - 1)", "1")],
)
def test_periods_from_before_the_start_are_told(
    tmp_path: Path, start: str, use: str, begins: str
) -> None:
    inputs = 'F = { is = "t", period = "2" }'
    found = _found(tmp_path, _stated(f"x' = -x + {use}", inputs=inputs, more=f'start = "{start}"'))
    assert f"repeats from {begins} on, which is before the start of time, {start}" in found
    assert "inputs.F, line 6" in found


def test_periods_from_the_start_or_later_are_read(tmp_path: Path) -> None:
    path = tmp_path / "bench.toml"
    for start, begins in (("1/2", "1/2"), ("-1", "0"), ("0", "3")):
        inputs = f'F = {{ is = "t", period = "2", start = "{begins}" }}'
        path.write_text(_stated("x' = -x + F", inputs=inputs, more=f'start = "{start}"'))
        assert load(path).name == "bench"


OUTPUTS = {
    "3": "the constant '3'",
    "x + 3": "the constant '3'",
    "t*x": "the term 't*x'",
    "F*x": "the term 'F*x'",
    "x(t - 1)": "the term 'x(t - 1)'",
    "q": "the name 'q' is not declared",
    "x + d": "'y' follows at each instant from the states and from 'd', which strikes at 1",
    "x'": "which strikes at 1: it would be an impulse itself",
}


@pytest.mark.parametrize("formula", OUTPUTS)
def test_an_output_that_is_no_combination_is_told(tmp_path: Path, formula: str) -> None:
    text = _stated(
        "x' = -x + d + F",
        inputs='d = "delta(t - 1)"\nF = "sin(t)"',
        after=f'[outputs]\ny = "{formula}"',
    )
    found = _found(tmp_path, text)
    assert OUTPUTS[formula] in found
    assert "outputs.y, line " in found


INPUTS = {
    "true": "here stands the truth value true",
    "nan": "'nan' is no value",
    "inf": "'inf' is no value",
    "[]": "here stands an empty array",
    "{}": "the key 'is' is missing",
    '""': "the formula is empty",
    "[{}]": "the key 'is' is missing",
    "[1]": "here stands a number, and a piece",
    "1979-05-27": "a value of type date",
    '{ is = "" }': "the formula is empty",
    '{ is = "t", unit = 3 }': "inputs.F.unit",
    '{ is = "t", foo = "1" }': "there is no key 'foo'",
    '{ unit = "N" }': "the key 'is' is missing",
    '"x"': "the name 'x' is not declared",
    '"F"': "'F' is an input",
    '"t,1"': "a character does not belong to a formula",
    '"1/(1 + exp(t))"': "divides by a function of the time",
    '"exp(t^2)"': "is not of the form a*t + b",
    '"abs(t)"': "it is no function",
    '"exp(1)"': "which exact arithmetic cannot express",
    '"delta(t - 1)*sin(t)"': "holds the constant 'sin(1)'",
    '"exp(-t)*sin(t + 1)"': "is exp(-a*t)*(C*sin(w*t) + S*cos(w*t)) with C for cos(phi)",
    '"delta(t)*step(t)"': "has no meaning",
    '{ is = "t", period = "0" }': "the period '0' is not positive",
    '{ is = "t", period = "-2" }': "the period '-2' is not positive",
    '{ is = "t", period = "t" }': "'t' is the time",
    '{ is = "t", period = nan }': "'nan' is no value",
    '{ is = "t", count = 3 }': "there is no 'period'",
    '{ is = "t", period = "2", count = 0 }': "'count' is 0",
    '{ is = "t", period = "2", count = -1 }': "'count' is -1",
    '{ is = "t", period = "2", count = 1.5 }': "'count' is 3/2",
    '{ is = "t", period = "2", count = true }': "here stands the truth value true",
    '{ is = "delta(t - 3)", period = "2" }': "an impulse that strikes outside of it",
    '{ pieces = [], period = "2" }': "here stands an empty array",
    '{ pieces = 3, period = "2" }': "here stands a number, and an array of pieces",
    '{ pieces = [{ from = "0", to = "1", is = "1" }], is = "1" }': "both 'is' and 'pieces'",
    '{ pieces = [{ from = "0", to = "3", is = "1" }], period = "2" }': (
        "the piece '1' from 0 to 3 has to lie within the first period"
    ),
    '{ pieces = [{ from = "-1", to = "1", is = "1" }], period = "2" }': "within the first period",
    '[{ from = "0", to = "2", is = "1" }, { from = "1", to = "3", is = "2" }]': "overlap",
    '[{ from = "0", is = "1" }, { from = "1", is = "2" }]': "overlap",
    '[{ from = "1", to = "1", is = "1" }]': "does not begin before it ends",
    '[{ from = "2", to = "1", is = "1" }]': "does not begin before it ends",
    '[{ from = "0", to = "1" }]': "the key 'is' is missing",
    '[{ from = "0", to = "t", is = "1" }]': "'t' is the time",
    '[{ from = "0", to = "sqrt(-1)", is = "1" }]': "the square root of a negative number",
    '[{ from = "0", to = "1", is = "delta(t - 1)" }]': "strikes outside of it",
    '[{ from = "0", to = "1", is = "delta(t - 2)" }]': "strikes outside of it",
}


@pytest.mark.parametrize("value", INPUTS)
def test_an_input_that_is_none_is_told(tmp_path: Path, value: str) -> None:
    found = _found(tmp_path, _stated("x' = -x + F", inputs=f"F = {value}"))
    assert INPUTS[value] in found
    assert "inputs.F" in found


INITIAL = {
    "3": "here stands a number, and a table",
    "[1]": "here stands an array, and a table",
    "{}": "'initial' gives no value to 'x', 'x''",
    ONE: "'initial' gives no value to 'x''",
    """{ x = "1", "x'" = "0", "x''" = "2" }""": "'x''' follows from the equations",
    """{ x = "1", "x'" = "0", y = "2" }""": "there is no state 'y'",
    """{ x = "1", x_dot = "0" }""": "there is no state 'x_dot'",
    """{ x = nan, "x'" = "0" }""": "'nan' is no value",
    """{ x = "F", "x'" = "0" }""": "the name 'F' is not declared",
    """{ x = "1/0", "x'" = "0" }""": "divides by zero",
    """{ x = "sin(1)", "x'" = "0" }""": "is not read as a number",
}


@pytest.mark.parametrize("value", INITIAL)
def test_values_at_the_start_that_are_none_are_told(tmp_path: Path, value: str) -> None:
    found = _found(tmp_path, _stated("x'' = -x + F", inputs='F = "t"', initial=value))
    assert INITIAL[value] in found
    assert "initial" in found


START = {
    '"t"': "the name 't' is not declared",
    '"x"': "the name 'x' is not declared",
    "nan": "'nan' is no value",
    "true": "here stands the truth value true",
    '"0/0"': "divides by zero",
    "[]": "here stands an array",
}


@pytest.mark.parametrize("value", START)
def test_a_start_that_is_none_is_told(tmp_path: Path, value: str) -> None:
    found = _found(tmp_path, _stated("x' = -x", more=f"start = {value}"))
    assert START[value] in found
    assert "start, line 3" in found


POINTS = {
    "3": "here stands a number, and an array of conditions",
    "[]": "'at_points' has 0 conditions, but there is 1 state",
    "[3]": "here stands a number, and a condition",
    '["x(0)"]': "an equation has a sign =",
    '["x = 1"]': "'x' stands without the instant",
    '["x(t) = 1"]': "stands without the instant",
    '["x(0) = x(1)"]': "speaks of the instants 0 and 1",
    '["x(0) = 1", "x(1) = 1"]': "'at_points' has 2 conditions",
    '["x(0)^2 = 1"]': "the term 'x^2'",
    '["x(-1) = 1"]': "an instant before the start of time",
    '["0*x(0) = 1"]': "no unknown is left",
    '["x(nan) = 1"]': "'nan' is no value",
    """["x'(0) = 1"]""": "in which F stands itself",
}


@pytest.mark.parametrize("value", POINTS)
def test_conditions_that_are_none_are_told(tmp_path: Path, value: str) -> None:
    text = _stated("x' = -x + F", inputs='F = "t"', initial="", more=f"at_points = {value}")
    found = _found(tmp_path, text)
    assert POINTS[value] in found
    assert "at_points" in found


def _masses(**changed: str) -> str:
    """The text of a model by its matrices, some of its lines changed."""
    lines = {
        "title": '"Bench"',
        "mass": "[[1]]",
        "stiffness": "[[4]]",
        "states": '["x"]',
        "input_matrix": "[[1]]",
        "initial": TWO,
    }
    text = "\n".join(f"{key} = {value}" for key, value in (lines | changed).items() if value)
    return text + '\n[inputs]\nF = "sin(t)"\n'


MASSES: dict[str, tuple[dict[str, str], str]] = {
    "no stiffness": ({"stiffness": ""}, "the key 'stiffness' is missing"),
    "no states": ({"states": ""}, "the key 'states' is missing"),
    "no input matrix": ({"input_matrix": ""}, "the key 'input_matrix' is missing"),
    "no mass": ({"mass": "[[0]]"}, "'x'' follows from the equations"),
    "an empty matrix": ({"mass": "[]"}, "the matrix has 0 rows"),
    "a larger matrix": ({"mass": "[[1, 0], [0, 1]]"}, "the matrix has 2 rows"),
    "not a number": ({"mass": "[[nan]]"}, "'nan' is no value"),
    "a text": ({"damping": '"1"'}, "here stands text, and an array of rows"),
    "a function": ({"mass": '[["t"]]'}, "the name 't' is not declared"),
    "a state": ({"mass": '[["x"]]'}, "the name 'x' is not declared"),
    "more inputs": ({"input_matrix": "[[1, 2]]"}, "row 1 of the input matrix has 2 entries"),
    "no load": ({"input_matrix": "[[0]]"}, "the input 'F' is used nowhere"),
    "a state with primes": ({"states": '["x\'"]'}, "cannot be used as a name"),
    "two forms": ({"equations": '["x\' = 0"]'}, "state a model in two different ways"),
    "too few values": ({"initial": ONE}, "'initial' gives no value to 'x''"),
}


@pytest.mark.parametrize("name", MASSES)
def test_matrices_that_do_not_go_together_are_told(tmp_path: Path, name: str) -> None:
    changed, words = MASSES[name]
    assert words in _found(tmp_path, _masses(**changed))


def test_a_singular_mass_matrix_is_told_by_its_equations(tmp_path: Path) -> None:
    text = _masses(
        mass="[[1, 1], [1, 1]]",
        stiffness="[[1, 0], [0, 2]]",
        states='["x", "y"]',
        input_matrix="[[1], [0]]",
        initial="""{ x = "1", "x'" = "0", y = "0", "y'" = "0" }""",
    )
    found = _found(tmp_path, text)
    assert "equation 1, 'x'' + y'' + x = F', and equation 2" in found


OPEN = {
    "step(t - m)": "it is not known which of the instants 'm' and '0' comes first",
    "step(m*t - 1)": "m",
    "exp(m*t)/m^2/step(t)": "divides by a function of the time",
}


@pytest.mark.parametrize("load_", OPEN)
def test_instants_whose_order_parameters_leave_open_are_told(tmp_path: Path, load_: str) -> None:
    text = _stated("x' = -x + F", inputs=f'F = "{load_}"', after='[parameters]\nm = "real"')
    assert OPEN[load_] in _found(tmp_path, text)


def test_too_much_is_refused_before_it_takes_long(tmp_path: Path) -> None:
    many = [f"x{k}' = -x{k}" for k in range(10_000)]
    assert "at most 400" in _found(tmp_path, _stated(*many))
    sines = " + ".join(f"sin({k}*t)" for k in range(1, 300))
    assert "at most 400" in _found(tmp_path, _stated(f"x' = -x + {sines}"))


def test_ends_of_lines_and_odd_signs_do_not_matter(tmp_path: Path) -> None:
    path = tmp_path / "bench.toml"
    prime, minus = "\N{PRIME}", "\N{MINUS SIGN}"
    text = _stated(f"x{prime}{prime} = {minus}x", f"0*y{prime} = y + x(t)", initial=TWO)
    path.write_bytes(("\N{ZERO WIDTH NO-BREAK SPACE}" + text).replace("\n", "\r\n").encode())
    assert load(path).name == "bench"


def test_dead_time_in_a_loop_is_no_forgotten_input(tmp_path: Path) -> None:
    loop = _stated("5*y' + y = 2*u(t - 2)", "u = 3*(1 - y)", initial="{ y = 0 }")
    assert "is an unknown at another time" in _found(tmp_path, loop)
    forgotten = _stated("5*y' + y = 2*u(t - 2)", initial="{ y = 0 }")
    assert "declare it in [inputs]" in _found(tmp_path, forgotten)
