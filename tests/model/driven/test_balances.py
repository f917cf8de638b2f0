"""An equation's linear form is the one it was written from, however it was written."""

from __future__ import annotations

import pickle
from fractions import Fraction

import pytest
from hypothesis import given
from hypothesis import strategies as st

from closedform.algebra.parameter_field import ParameterField
from closedform.algebra.surds import SurdSum
from closedform.errors import InputError, Place
from closedform.model.driven import balance_errors as module
from closedform.model.driven.balance_errors import (
    BalanceError,
    DelayedUnknownError,
    InputInstantError,
    InputTimesUnknownError,
    NonlinearBalanceError,
    NonlinearInputError,
    NoUnknownError,
    NoUnknownsError,
    TimeVaryingError,
    UnknownAtInstantError,
    UnusedUnknownError,
)
from closedform.model.driven.balances import LinearBalance, Shifted, linear_balance, unknowns_of
from closedform.model.driven.model import Jet
from closedform.model.driven.roles import Roles
from closedform.model.errors import ModelError
from closedform.model.source import Source
from closedform.notation.equation import read_equation
from closedform.notation.errors import DivisionByZeroError
from closedform.notation.exact import NUMBERS
from closedform.notation.plain import plain
from closedform.notation.rational import field_arithmetic

UNKNOWNS = ("x", "y")
ROLES = Roles(UNKNOWNS, frozenset({"u", "F"}), "t")
FIELD = ParameterField(parameters=("m", "c", "k", "tau"))
HERE = Place("bench.toml", "equations[1]")


def in_numbers(text: str) -> LinearBalance[SurdSum]:
    """Return the balance of an equation without parameters."""
    sides = read_equation(
        text, time="t", constants=frozenset(), functions=frozenset({*UNKNOWNS, *ROLES.inputs})
    )
    return linear_balance(*sides, ROLES, NUMBERS, HERE, text)


def in_parameters(text: str) -> tuple[dict[str, str], dict[str, str], str]:
    """Return the parts of the balance of an equation in parameters, as text."""
    sides = read_equation(
        text,
        time="t",
        constants=frozenset(FIELD.parameters),
        functions=frozenset({*UNKNOWNS, *ROLES.inputs}),
    )
    balance = linear_balance(*sides, ROLES, field_arithmetic(FIELD), HERE, text)
    inputs = {f"{i.name}{i.order}({i.delay})": str(weight) for i, weight in balance.of_inputs}
    literal = plain(balance.literal) if balance.literal else ""
    return {jet.text: str(weight) for jet, weight in balance.of_unknowns}, inputs, literal


FORMS = [
    ("m*x'' + c*x' + k*x = F", {"x''": "m", "x'": "c", "x": "k"}, {"F0(0)": "-1"}, ""),
    ("k*(x - y)/2 = -(m*y'')", {"x": "k/2", "y''": "m", "y": "-k/2"}, {}, ""),
    ("x' = u(t - tau) + 2*u'(t)", {"x'": "1"}, {"u0(tau)": "-1", "u1(0)": "-2"}, ""),
    ("x' - u(t + 2) = 0", {"x'": "1"}, {"u0(-2)": "-1"}, ""),
    ("x = k*(u - cos(t))", {"x": "1"}, {"u0(0)": "-k"}, "k*cos(t)"),
    ("k*x + 3*cos(2*t) = m + exp(-t)", {"x": "k"}, {}, "3*cos(2*t) - m - exp(-t)"),
    ("x''(t) = step(t - tau)", {"x''": "1"}, {}, "-step(t - tau)"),
    ("(x - t)/m = 0", {"x": "1/m"}, {}, "-t/m"),
    ("x + x'' - x = 0*y", {"x''": "1"}, {}, ""),
    ("2*k*m*3*x = (1/2)*(k + m)*(y)", {"x": "6*m*k", "y": "(-m - k)/2"}, {}, ""),
    ("x((t)) = x(t + 0)*2 - F(t - tau + tau)", {"x": "-1"}, {"F0(0)": "1"}, ""),
    ("x = 5", {"x": "1"}, {}, "-5"),
    ("t - 5 = x", {"x": "-1"}, {}, "t - 5"),
]


@pytest.mark.parametrize(("text", "unknowns", "inputs", "literal"), FORMS)
def test_the_linear_form_has_everything_on_the_left(
    text: str, unknowns: dict[str, str], inputs: dict[str, str], literal: str
) -> None:
    found = in_parameters(text)
    assert list(found[0].items()) == list(unknowns.items())
    assert found[1:] == (inputs, literal)


def test_roots_are_weights_in_numbers() -> None:
    balance = in_numbers("sqrt(2)*x' = x/sqrt(2)")
    root = SurdSum.rational(Fraction(2)).sqrt()
    assert balance.of_unknowns == (
        (Jet("x", 1), root),
        (Jet("x"), -root * SurdSum.rational(Fraction(1, 2))),
    )


WRONG: list[tuple[str, type[BalanceError], str, str]] = [
    ("x' = x*y", NonlinearBalanceError, "x*y", "is a product of unknowns"),
    ("x' = x*x*cos(t)", NonlinearBalanceError, "x*x*cos(t)", "is a product of unknowns"),
    ("x' + 3 = u/y", NonlinearBalanceError, "u/y", "has an unknown in its denominator"),
    ("x' = x/y", NonlinearBalanceError, "x/y", "has an unknown in its denominator"),
    ("x' = 2*y^2", NonlinearBalanceError, "y^2", "has an unknown in a power"),
    ("y'' = -sin(y)", NonlinearBalanceError, "sin(y)", "has an unknown inside of sin"),
    ("x' = step(x - 1)", NonlinearBalanceError, "step(x - 1)", "inside of step"),
    ("x' = t*x", TimeVaryingError, "t*x", "by what depends on the time"),
    ("x'' + (1 + cos(t))*x = 0", TimeVaryingError, "(1 + cos(t))*x", "hold the coefficient"),
    ("x' = x/t", TimeVaryingError, "x/t", "state a model for each interval"),
    ("x' = step(t - 1)*x", TimeVaryingError, "step(t - 1)*x", "constant"),
    ("x' = cos(t)*(x + u)", TimeVaryingError, "cos(t)*(x + u)", "constant"),
    ("x' = u*x", InputTimesUnknownError, "u*x", "make the input a parameter"),
    ("x' = x/u", InputTimesUnknownError, "x/u", "its coefficient is not constant"),
    ("x' = u*(x + u)", InputTimesUnknownError, "u*(x + u)", "linearise"),
    ("x' = u^2", NonlinearInputError, "u^2", "has an input in a power"),
    ("x' = cos(u)", NonlinearInputError, "cos(u)", "has an input inside of cos"),
    ("x' = u*F", NonlinearInputError, "u*F", "is a product of inputs"),
    ("x' = cos(t)*u", NonlinearInputError, "cos(t)*u", "an input times a function of time"),
    ("x' = u/t", NonlinearInputError, "u/t", "an input times a function of time"),
    ("x' = t/u", NonlinearInputError, "t/u", "has an input in its denominator"),
    ("x' = -x(t - 1)", DelayedUnknownError, "x(t - 1)", "a delay equation"),
    ("x' = x'(2*t)", DelayedUnknownError, "x'(2*t)", "no finite closed form of this kind"),
    ("x' = x(0)", UnknownAtInstantError, "x(0)", "the value of an unknown at one instant"),
    ("x' = u(2*t)", InputInstantError, "u(2*t)", "something else than the time less a constant"),
    ("x' = u(3)", InputInstantError, "u(3)", "declare an input of its own"),
    ("x' = u(t^2)", InputInstantError, "u(t^2)", "declare an input of its own"),
    ("x' = u(t - x)", InputInstantError, "u(t - x)", "declare an input of its own"),
]


@pytest.mark.parametrize(("text", "kind", "term", "words"), WRONG)
def test_what_is_not_linear_is_told_with_term_and_equation(
    text: str, kind: type[BalanceError], term: str, words: str
) -> None:
    with pytest.raises(BalanceError) as caught:
        in_numbers(text)
    error = caught.value
    assert type(error) is kind
    assert (error.equation, error.term) == (text, term)
    assert error.place == Place(HERE.file, HERE.key, 1, text.index(term) + 1, text)
    assert f"the term '{term}' of the equation '{text}'" in str(error)
    assert words in str(error)


def test_a_term_is_found_however_it_is_typed() -> None:
    with pytest.raises(NonlinearBalanceError) as caught:
        in_numbers("x' = 2 · x’(t) y ")
    assert caught.value.term == "2*x'*y"
    assert caught.value.place.column == 6


def test_a_term_that_is_not_found_in_the_text_has_the_place_of_the_equation() -> None:
    sides = read_equation("x' = x*y", time="t", constants=frozenset(), functions=None)
    with pytest.raises(NonlinearBalanceError) as caught:
        linear_balance(*sides, ROLES, NUMBERS, HERE)
    assert caught.value.place == HERE
    assert caught.value.equation == "x' = x*y"


def test_a_place_in_a_file_is_carried_on() -> None:
    source = Source(Place("bench.toml"), """title = "a"\nequations = ["x' = y", "y' = x*y"]\n""")
    text = "y' = x*y"

    def work(place: Place) -> LinearBalance[SurdSum]:
        sides = read_equation(
            text, time="t", constants=frozenset(), functions=frozenset(UNKNOWNS), place=place
        )
        return linear_balance(*sides, ROLES, NUMBERS, place, text)

    with pytest.raises(NonlinearBalanceError) as caught:
        source.read(text, "equations[2]", work)
    place = caught.value.place
    assert (place.file, place.key, place.line) == ("bench.toml", "equations[2]", 2)
    assert place.excerpt is not None
    assert place.column == place.excerpt.index("x*y") + 1


@pytest.mark.parametrize("text", ["u = cos(t)", "x - x = 1", "0 = 0", "2*(x - x/2) = x"])
def test_an_equation_needs_an_unknown(text: str) -> None:
    with pytest.raises(NoUnknownError, match="no unknown is left in the equation"):
        in_numbers(text)


def test_a_division_by_zero_is_told() -> None:
    with pytest.raises(DivisionByZeroError, match="'x/0' divides by zero"):
        in_numbers("x/0 = 1")


def equations(*texts: str) -> list[tuple[object, object]]:
    return [
        read_equation(text, time="t", constants=frozenset("mk"), functions=None) for text in texts
    ]


KNOWN = frozenset({"m", "k", "F"})


def test_unknowns_come_in_the_order_in_which_they_occur() -> None:
    sides = equations("m*z'' = k*(y(t) - F) + t", "i_R + y' = step(t)", "a*b = y")
    assert unknowns_of(sides, KNOWN, "t", None, Source(HERE)) == ("z", "y", "i_R", "a", "b")


def test_given_unknowns_keep_their_order_and_have_to_occur() -> None:
    sides = equations("m*z'' = k*(y - F)")
    source = Source(Place("bench.toml"), 'states = ["y", "z", "w"]')
    assert unknowns_of(sides, KNOWN, "t", ["y", "z"], source) == ("y", "z")
    with pytest.raises(
        UnusedUnknownError, match=r"states\[3\], line 1, column 21: the unknown 'w'"
    ):
        unknowns_of(sides, KNOWN, "t", ["y", "z", "w"], source)


def test_equations_without_unknowns_are_refused() -> None:
    with pytest.raises(NoUnknownsError):
        unknowns_of(equations("m = k", "F = step(t)"), KNOWN, "t", None, Source(HERE))


ERRORS: list[tuple[ModelError, str]] = [
    (DelayedUnknownError(HERE, "x' = x(t - 1)", "x(t - 1)"), "makes it a delay equation"),
    (InputInstantError(HERE, "x = u(2*t)", "u(2*t)"), "less a constant, as in u(t - 2)"),
    (InputTimesUnknownError(HERE, "x' = u*x", "u*x"), "multiplies an unknown by an input"),
    (NoUnknownError(HERE, "u = 1"), "no unknown is left in the equation 'u = 1'"),
    (NoUnknownsError(HERE), "there is no unknown in the equations"),
    (NonlinearBalanceError(HERE, "x' = x*y", "x*y", "is a product"), "'x*y' of the equation"),
    (NonlinearInputError(HERE, "x' = u^2", "u^2", "has a power"), "'x' = u^2' has a power, and"),
    (TimeVaryingError(HERE, "x' = t*x", "t*x"), "coefficients of unknowns are constant here"),
    (UnknownAtInstantError(HERE, "x' = x(0)", "x(0)"), "under 'initial' or 'at_points'"),
    (UnusedUnknownError(HERE, "w"), "the unknown 'w' stands in no equation"),
]


@pytest.mark.parametrize(("error", "words"), ERRORS)
def test_errors_tell_their_facts_and_survive_pickling(error: ModelError, words: str) -> None:
    text = str(error)
    assert text.startswith("bench.toml, equations[1]: ")
    assert words in text
    assert text.endswith(".")
    again = pickle.loads(pickle.dumps(error))  # noqa: S301 - made here
    assert type(again) is type(error)
    assert again.__dict__ == error.__dict__
    assert str(again) == text


def test_all_errors_are_tested() -> None:
    classes = {getattr(module, name) for name in module.__all__} - {BalanceError}
    assert {type(error) for error, _ in ERRORS} == classes
    assert all(issubclass(kind, InputError) for kind in classes)


# --- equations written in random ways ------------------------------------------------------

JETS = [Jet("x"), Jet("x", 1), Jet("y", 2), Jet("y", 1)]
SHIFTS = [("u", 0, 0), ("u", 0, 2), ("F", 1, 0), ("F", 0, 3)]
WEIGHTS = st.fractions(-6, 6, max_denominator=6).filter(bool)


def typed(name: str, order: int, delay: int) -> str:
    argument = f"(t - {delay})" if delay else ""
    return name + "'" * order + argument


@st.composite
def written(draw: st.DrawFn, terms: list[tuple[Fraction, str]]) -> str:
    """Return a sum of weighted names, written in some way."""
    if len(terms) == 1:
        weight, name = terms[0]
        ways = [f"({weight})*{name}", f"{name}*({weight})", f"{name}/({1 / weight})"]
        ways += [f"-({-weight})*{name}", f"({name})*2*({weight / 2})", f"-({name})/({-1 / weight})"]
        return draw(st.sampled_from(ways))
    cut = draw(st.integers(1, len(terms) - 1))
    first, second = draw(written(terms[:cut])), draw(written(terms[cut:]))
    if draw(st.booleans()):
        return f"{first} + {second}"
    scale = draw(WEIGHTS)
    inside = draw(written([(weight / scale, name) for weight, name in terms[cut:]]))
    return draw(
        st.sampled_from([f"{first} + ({scale})*({inside})", f"{first} - ({inside})/({-1 / scale})"])
    )


@st.composite
def balances(
    draw: st.DrawFn,
) -> tuple[dict[Jet, Fraction], dict[tuple[str, int, int], Fraction], str]:
    """Return the weights of an equation and the equation, written in some way."""
    unknowns = draw(st.dictionaries(st.sampled_from(JETS), WEIGHTS, min_size=1))
    inputs = draw(st.dictionaries(st.sampled_from(SHIFTS), WEIGHTS))
    terms = [(weight, jet.text) for jet, weight in unknowns.items()]
    terms += [(weight, typed(*shift)) for shift, weight in inputs.items()]
    terms = draw(st.permutations(terms))
    cut = draw(st.integers(0, len(terms)))
    left = draw(written(terms[:cut])) if cut else "0"
    right = draw(written([(-w, name) for w, name in terms[cut:]])) if cut < len(terms) else "0"
    return unknowns, inputs, f"{left} = {right}"


@given(balances())
def test_the_linear_form_is_that_of_which_the_equation_was_written(
    case: tuple[dict[Jet, Fraction], dict[tuple[str, int, int], Fraction], str],
) -> None:
    unknowns, inputs, text = case
    found = in_numbers(text)
    assert {jet: weight.as_fraction() for jet, weight in found.of_unknowns} == unknowns
    assert {
        Shifted(name, order, SurdSum.rational(Fraction(delay))): SurdSum.rational(weight)
        for (name, order, delay), weight in inputs.items()
    } == dict(found.of_inputs)
    assert found.literal is None
    places = [(UNKNOWNS.index(jet.name), -jet.order) for jet, _ in found.of_unknowns]
    assert places == sorted(places)
