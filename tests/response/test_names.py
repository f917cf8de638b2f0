"""Names for constants: one for each number, never one that the model uses."""

from __future__ import annotations

from fractions import Fraction

import pytest
from flint import arb, ctx

import closedform
from closedform.algebra.field import BaseField
from closedform.notation.expression import Call, Number, Sum
from closedform.notation.latex.names import name_box
from closedform.notation.plain import plain
from closedform.response.names import (
    NameBook,
    NamedConstant,
    Radical,
    ResiduePart,
    RootPart,
    constant_values,
)
from closedform.verification import verify

Q = BaseField()
CUBIC = Q.polynomial([Q.scalar(c) for c in (1, 0, -1, -1)])
ROOT2, ROOT3 = (Radical(Call("sqrt", Number(Fraction(n)))) for n in (2, 3))
COMPANION = [[0, 1, 0], [0, 0, 1], [1, 1, 0]]


def test_equal_definitions_share_a_name_and_others_count_on() -> None:
    book = NameBook(frozenset())
    names = [book.name_of("omega", d) for d in (ROOT2, ROOT3, Radical(ROOT2.formula))]
    assert names == ["omega_1", "omega_2", "omega_1"]
    assert book.name_of("C", RootPart(Q, CUBIC, 1, "real")) == "C1"
    assert book.name_of("C", RootPart(Q, CUBIC, 1, "imaginary")) == "C2"
    assert [c.name for c in book.constants()] == ["omega_1", "omega_2", "C1", "C2"]


def test_a_number_may_be_prescribed() -> None:
    book = NameBook(frozenset())
    assert book.name_of("lambda", ROOT2, number=4) == "lambda_4"
    assert book.name_of("lambda", ROOT2, number=7) == "lambda_4"


def test_names_of_the_model_are_left_to_it() -> None:
    book = NameBook(frozenset({"omega_1", "omega_r_1", "C1", "omega_3"}))
    assert book.name_of("omega", ROOT2) == "omega_rr_1"
    assert book.name_of("omega", ROOT3) == "omega_2"
    assert book.name_of("omega", RootPart(Q, CUBIC, 1, "real")) == "omega_r_3"
    assert book.name_of("C", RootPart(Q, CUBIC, 1, "imaginary")) == "C_r_1"


def test_no_name_is_given_that_prints_like_one_of_the_model() -> None:
    book = NameBook(frozenset({"omega1", "C_1", "lamda_1"}))
    assert book.name_of("omega", ROOT2) == "omega_r_1"
    assert book.name_of("C", ROOT3) == "C_r_1"
    assert book.name_of("lambda", RootPart(Q, CUBIC, 1, "real")) == "lambda_r_1"


@pytest.mark.parametrize(
    ("states", "time"),
    [
        (["omega_1", "C1", "lambda_1"], "t"),
        (["alpha_1", "C_1", "C2"], "t"),
        (["omega1", "C_1", "lamda1"], "alpha1"),
        (["x", "y", "z"], "omega_1"),
        (["x", "y", "z"], "C1"),
        (["alpha_1", "alpha_r_1", "lambda_r_1"], "lambda_1"),
    ],
)
def test_a_response_uses_no_name_of_its_model(states: list[str], time: str) -> None:
    model = closedform.system(
        COMPANION, initial=[1, 2, 3], states=states, time=time, outputs={"omega_2": states[0]}
    )
    response = closedform.respond(model)
    names = [c.name for c in response.closed_forms.constants]
    assert len(set(names)) == len(names)
    printed = [name_box(name).latex for name in (*states, time, "omega_2", *names)]
    assert len(set(printed)) == len(printed)
    record = verify(response)
    assert record.holds


def test_the_numbers_of_named_eigenvalues_follow_the_printed_order() -> None:
    """diag(-1, a cubic of real roots): lambda_1 is -1, the others are 2, 3, 4 or so."""
    model = closedform.system(
        [[-9, 0, 0, 0], [0, 0, 1, 0], [0, 0, 0, 1], [0, -1, 3, 0]], initial=[1, 1, 1, 1]
    )
    forms = closedform.respond(model).closed_forms
    roots = [c.name for c in forms.constants if isinstance(c.definition, RootPart)]
    assert roots == ["lambda_1", "lambda_2", "lambda_3"]
    values = constant_values(forms.constants)
    assert values["lambda_1"] > values["lambda_2"] > values["lambda_3"] > -9


@pytest.mark.parametrize("bits", [64, 300])
def test_values_of_definitions(bits: int) -> None:
    """s^3 - s - 1: the plastic number, and 1/p' at it by hand."""
    constants = (
        NamedConstant("root", RootPart(Q, CUBIC, 3, "real")),
        NamedConstant("turn", RootPart(Q, CUBIC, 2, "imaginary")),
        NamedConstant(
            "amount", ResiduePart(Q, CUBIC, 3, CUBIC.one(0, Q.domain), Fraction(2, 3), "real")
        ),
        NamedConstant("root2", ROOT2),
    )
    with ctx.workprec(bits):
        values = constant_values(constants)
        r = values["root"]
        assert (r**3 - r - 1).contains(0)
        assert r > 1
        assert values["amount"].overlaps(arb(2) / 3 / (3 * r**2 - 1))
        # The three roots: r, -r/2 ± i turn with product 1.
        assert (r * (r**2 / 4 + values["turn"] ** 2) - 1).contains(0)
        assert values["turn"] > 0
        assert values["root2"].overlaps(arb(2).sqrt())
        assert all(v.rad() < arb(2) ** (8 - bits) for v in values.values())


def test_a_radical_is_defined_by_its_formula() -> None:
    model = closedform.system(
        [[0, 0, 1, 0], [0, 0, 0, 1], [-3, 1, 0, 0], [1, -1, 0, 0]], initial=[1, 0, 0, 0]
    )
    constants = closedform.respond(model).closed_forms.constants
    assert {c.name: plain(c.definition.formula) for c in constants} == {
        "omega_1": "sqrt(2 - sqrt(2))",
        "omega_2": "sqrt(2 + sqrt(2))",
    }


def test_a_definition_of_several_roots_is_a_formula_that_reads() -> None:
    nested = Radical(Call("sqrt", Sum((Number(Fraction(2)), ROOT2.formula))))
    assert plain(nested.formula) == "sqrt(2 + sqrt(2))"
    with ctx.workprec(100):
        assert nested.enclosure().overlaps((2 + arb(2).sqrt()).sqrt())


@pytest.mark.parametrize(
    ("rows", "why"),
    [
        (
            [
                [0, 1, 0, 0, 0, 0],
                [0, 0, 1, 0, 0, 0],
                [0, 0, 0, 1, 0, 0],
                [0, 0, 0, 0, 1, 0],
                [0, 0, 0, 0, 0, 1],
                [-2, 0, 0, 0, 0, 0],
            ],
            "s^6 + 2 has the roots ± i 2^(1/6)",
        ),
        (
            [[0, 1, 0, 0], [0, 0, 1, 0], [0, 0, 0, 1], ["sqrt(2)", 0, 0, 0]],
            "s^4 - sqrt(2) has the roots ± i 2^(1/8)",
        ),
    ],
)
def test_zero_gets_no_name(rows: list[list[object]], why: str) -> None:
    """The rate of an imaginary root is 0, whatever the form of its factor."""
    response = closedform.respond(closedform.system(rows, initial=[1] * len(rows)))
    with ctx.workprec(300):
        values = constant_values(response.closed_forms.constants)
    assert not [name for name, value in values.items() if value.contains(0)], why
