"""The state form follows from the balances: put in, it makes every one of them 0 = 0."""

from __future__ import annotations

from collections.abc import Mapping
from fractions import Fraction
from typing import Any

import pytest
from hypothesis import given
from hypothesis import strategies as st
from sympy.polys.matrices import DomainMatrix

from closedform.algebra.field import BaseField
from closedform.algebra.parameter_field import ParameterField
from closedform.model.driven.model import Jet
from closedform.model.driven.reduction import reduced
from closedform.model.driven.reduction_errors import (
    AbsentUnknownError,
    ContradictoryEquationsError,
    FewEquationsError,
    HiddenConstraintError,
    ManyEquationsError,
    NoStateLeftError,
    RedundantEquationError,
    SingularEquationsError,
)
from tests.model.driven.balancing import balance_system, residuals

Q = BaseField()
NOTHING: list[dict[tuple[str, int], Any]] = []


def entries(matrix: Any) -> list[list[str]]:
    return [[str(entry) for entry in row] for row in matrix.to_list()]


def test_an_oscillator_is_solved_for_its_acceleration() -> None:
    system = balance_system(Q, [{"x''": 2, "x'": 3, "x": 4, "F": -1}], ["F"])
    form = reduced(system).reduction
    assert form.jets == (Jet("x"), Jet("x", 1))
    assert entries(form.matrix) == [["0", "1"], ["-2", "-3/2"]]
    assert entries(form.input_matrix) == [["0"], ["1/2"]]
    assert form.eliminated == ()
    assert form.eliminated_from_states is None


def test_an_algebraic_unknown_is_eliminated() -> None:
    system = balance_system(Q, [{"v'": 3, "i": -1}, {"i": 2, "v": 1, "u": -1}], ["u"])
    form = reduced(system).reduction
    assert form.jets == (Jet("v"),)
    assert entries(form.matrix) == [["-1/6"]]
    assert form.eliminated == ("i",)
    assert entries(form.eliminated_from_states) == [["-1/2"]]
    assert entries(form.eliminated_from_inputs) == [["1/2"]]


def test_states_stand_by_unknown_or_by_order() -> None:
    equations = [{"x''": 1, "y'": 1, "x": 1}, {"y''": 1, "x": 1}]
    jets = [j.text for j in reduced(balance_system(Q, equations)).reduction.jets]
    assert jets == ["x", "x'", "y", "y'"]
    jets = [j.text for j in reduced(balance_system(Q, equations, by_order=True)).reduction.jets]
    assert jets == ["x", "y", "x'", "y'"]


TIED = [{"v1'": 1, "v2'": -2, "v1": 1}, {"v1": 1, "v2": 1, "u": -1}]


@pytest.mark.parametrize("wanted", ["v1", "v2"])
def test_of_tied_variables_the_one_with_a_value_is_the_state(wanted: str) -> None:
    system = balance_system(Q, TIED, ["u"], preferred=frozenset({Jet(wanted)}))
    found = reduced(system)
    assert found.reduction.jets == (Jet(wanted),)
    assert found.reduction.eliminated == (({"v1", "v2"} - {wanted}).pop(),)
    assert found.derived == (0,)
    assert residuals(system, found) == [{}, {}]


def test_of_tied_variables_the_first_is_the_state() -> None:
    assert reduced(balance_system(Q, TIED, ["u"])).reduction.jets == (Jet("v1"),)


def test_a_derivative_that_is_an_input_already_is_used() -> None:
    system = balance_system(Q, [{**TIED[0], "u'": 1}, TIED[1]], ["u", "u'"])
    found = reduced(system)
    assert found.derived == ()
    assert found.reduction.input_matrix.shape == (1, 2)
    assert residuals(system, found) == [{}, {}]


def test_a_determinant_that_may_vanish_is_told() -> None:
    field = ParameterField(parameters=("m", "k"))
    m, k = field.domain.gens
    system = balance_system(field, [{"x''": m, "y''": 1, "x": k}, {"x''": 1, "y''": m, "y": k}])
    found = reduced(system)
    assert [field.factored(d).factors for d in found.divisors] == [field.factored(m**2 - 1).factors]
    assert residuals(system, found) == [{}, {}]


def test_pivots_that_never_vanish_add_no_condition() -> None:
    field = ParameterField(parameters=("a", "c"))
    a, c = field.domain.gens
    equations = [{"v1'": a, "v2'": -c, "v1": 1}, {"v1": a, "v2": c, "u": -1}]
    system = balance_system(field, equations, ["u"], never_zero=lambda e: e in (c, c**2))
    assert reduced(system).reduction.jets == (Jet("v1"),)
    system = balance_system(field, equations, ["u"], never_zero=lambda e: e in (a, a**2))
    assert reduced(system).reduction.jets == (Jet("v2"),)


ERRORS: list[tuple[list[dict[str, object]], list[str], dict[str, Any], type[Exception], str]] = [
    (
        [{"x'": 1, "x": 1}],
        [],
        {"unknowns": ("x", "y")},
        AbsentUnknownError,
        "'y' is among the states, but it stands in no equation",
    ),
    (
        [{"x'": 1, "x": 1, "k": 2}],
        [],
        {},
        FewEquationsError,
        (
            "there is 1 equation for 2 unknowns, 'x' and 'k'; 1 equation is missing; 'k' stands "
            "there without primes: declare in [parameters] or [inputs] what is given"
        ),
    ),
    (
        [{"x'": 1, "x": 1}, {"y'": 1, "z'": 1}],
        [],
        {},
        FewEquationsError,
        (
            "2 equations for 3 unknowns, 'x', 'y' and 'z'; 1 equation is missing: nothing "
            "determines 'y' and 'z'."
        ),
    ),
    (
        [{"x'": 1, "x": 1}, {"y'": 1, "x": 1}, {"x": 1, "y": 1}],
        [],
        {},
        ManyEquationsError,
        "there are 3 equations for 2 unknowns, 'x' and 'y'; take 1 equation away",
    ),
    (
        [{"x'": 1, "x": 1}, {"x'": 2, "x": 2}],
        [],
        {},
        RedundantEquationError,
        (
            "equations[2]: equation 2, '2*x' + 2*x = 0', says nothing new: it is a combination of "
            "equation 1, '1*x' + 1*x = 0'"
        ),
    ),
    (
        [{"x'": 1, "y": 1}, {"x": 0}],
        [],
        {},
        RedundantEquationError,
        "equations[2]: equation 2, '0*x = 0', says 0 = 0",
    ),
    (
        [{"x'": 1, "x": 1, "y": 1}, {"x'": 2, "x": 2, "y": 2, "F": 3}],
        ["F"],
        {},
        ContradictoryEquationsError,
        (
            "equations[2]: equation 1, '1*x' + 1*x + 1*y = 0', and equation 2, '2*x' + 2*x + 2*y + "
            "3*F = 0' contradict each other: their unknowns cancel, and 0 = F is left"
        ),
    ),
    (
        [{"x'": 1, "y": 1}, {"F": 1}],
        ["F"],
        {},
        ContradictoryEquationsError,
        "equation 2, '1*F = 0', has no unknown in it and says 0 = F",
    ),
    (
        [{"x'": 1, "F": 1, "G": 1}, {"x'": 1, "y": 0}],
        ["F", "G"],
        {},
        ContradictoryEquationsError,
        "and a relation of F, G is left",
    ),
    (
        [{"v": 1, "x'": -1}, {"v'": 1, "x''": -1}, {"y'": 1, "y": 1}],
        [],
        {},
        SingularEquationsError,
        (
            "equations[2]: equation 1, '1*v + -1*x' = 0', and equation 2, '1*v' + -1*x'' = 0' "
            "do not determine the unknowns: with their derivatives, one of them follows from the "
            "others, or contradicts them, so that nothing determines 'v' and 'x'"
        ),
    ),
    (
        [{"x1''": 1, "L": 1}, {"x2''": 2, "L": -1}, {"x1": 1, "x2": -1}],
        [],
        {},
        HiddenConstraintError,
        "equations[3]: equation 3, '1*x1 + -1*x2 = 0', ties x1, x2 to each other, and the other",
    ),
    (
        [{"x'": 1, "L": 1}, {"x": 2, "F": 1}],
        ["F"],
        {},
        HiddenConstraintError,
        "equation 2, '2*x + 1*F = 0', fixes x, and the other equations",
    ),
    ([{"x": 1, "F": 1}], ["F"], {}, NoStateLeftError, "the equations leave no state"),
    (
        [{"x'": 1, "y'": 1, "y": 1}, {"x": 1, "y": 1}],
        [],
        {},
        HiddenConstraintError,
        "equation 2, '1*x + 1*y = 0', ties x, y to each other",
    ),
]


@pytest.mark.parametrize(("equations", "inputs", "settings", "kind", "words"), ERRORS)
def test_equations_that_determine_no_state_form_are_refused(
    equations: list[dict[str, object]],
    inputs: list[str],
    settings: Mapping[str, Any],
    kind: type[Exception],
    words: str,
) -> None:
    system = balance_system(Q, equations, inputs, **settings)
    with pytest.raises(kind) as caught:
        reduced(system)
    assert type(caught.value) is kind
    assert words in str(caught.value)


def numbers() -> st.SearchStrategy[Fraction]:
    return st.integers(-3, 3).map(Fraction) | st.fractions(-2, 2, max_denominator=3)


def matrices(rows: int, columns: int) -> st.SearchStrategy[list[list[Fraction]]]:
    row = st.lists(numbers(), min_size=columns, max_size=columns)
    return st.lists(row, min_size=rows, max_size=rows)


def matrix(rows: list[list[Fraction]]) -> Any:
    return Q.matrix([[Q.scalar(entry) for entry in row] for row in rows])


def invertible(size: int) -> st.SearchStrategy[list[list[Fraction]]]:
    return matrices(size, size).filter(lambda rows: bool(matrix(rows).det()))


@given(st.data(), st.integers(1, 3))
def test_masses_springs_and_dampers_are_solved(data: st.DataObject, n: int) -> None:
    mass = data.draw(invertible(n))
    others = [data.draw(matrices(n, n)) for _ in range(2)]
    driven = data.draw(matrices(n, 2))
    equations = [
        {
            **{f"q{j}''": mass[i][j] for j in range(n)},
            **{f"q{j}'": others[0][i][j] for j in range(n)},
            **{f"q{j}": others[1][i][j] for j in range(n)},
            **{f"u{j}": -driven[i][j] for j in range(2)},
        }
        for i in range(n)
    ]
    unknowns = tuple(f"q{j}" for j in range(n))
    system = balance_system(Q, equations, ["u0", "u1"], unknowns=unknowns, by_order=True)
    found = reduced(system)
    assert residuals(system, found) == [{}] * n
    inverse = matrix(mass).inv()
    zero, one = Q.zeros(n, n), Q.identity(n)
    below = DomainMatrix.hstack(-(inverse * matrix(others[1])), -(inverse * matrix(others[0])))
    expected = DomainMatrix.vstack(DomainMatrix.hstack(zero, one), below).to_dense()
    assert found.reduction.matrix == expected
    lower = (inverse * matrix(driven)).to_dense()
    assert found.reduction.input_matrix == DomainMatrix.vstack(Q.zeros(n, 2), lower).to_dense()


@given(st.data(), st.integers(1, 3), st.integers(0, 2), st.integers(0, 2))
def test_a_state_form_is_found_again_in_mixed_equations(
    data: st.DataObject, n: int, tied: int, algebraic: int
) -> None:
    """Rows M x' + E w' = G x + H u, w = W x + V u, z = C x + D u, mixed by a matrix."""
    count = n + tied + algebraic
    draw = data.draw
    upper = draw(invertible(n))
    with_rates = draw(matrices(n, tied)) if tied else []
    w, v = draw(matrices(tied, n)), draw(matrices(tied, 1))
    total = matrix(upper) + (matrix(with_rates) * matrix(w) if tied else Q.zeros(n, n))
    if not total.det():
        return
    g, h = draw(matrices(n, n)), draw(matrices(n, 1))
    c, d = draw(matrices(algebraic, n)), draw(matrices(algebraic, 1))
    rows: list[dict[str, Fraction]] = [
        {
            **{f"x{j}'": upper[i][j] for j in range(n)},
            **{f"w{j}'": with_rates[i][j] for j in range(tied)},
            **{f"x{j}": -g[i][j] for j in range(n)},
            "u": -h[i][0],
        }
        for i in range(n)
    ]
    rows += [
        {f"w{i}": Fraction(1), **{f"x{j}": -w[i][j] for j in range(n)}, "u": -v[i][0]}
        for i in range(tied)
    ]
    rows += [
        {f"z{i}": Fraction(1), **{f"x{j}": -c[i][j] for j in range(n)}, "u": -d[i][0]}
        for i in range(algebraic)
    ]
    mixing = draw(invertible(count))
    mixed = []
    for weights in mixing:
        row: dict[str, Fraction] = {}
        for weight, part in zip(weights, rows, strict=True):
            for key, entry in part.items():
                row[key] = row.get(key, Fraction(0)) + weight * entry
        mixed.append({key: entry for key, entry in row.items() if entry})
    names = [*(f"x{j}" for j in range(n)), *(f"w{j}" for j in range(tied))]
    names += [f"z{j}" for j in range(algebraic)]
    system = balance_system(
        Q,
        mixed,
        ["u"],
        unknowns=tuple(names),
        preferred=frozenset(Jet(f"x{j}") for j in range(n)),
    )
    found = reduced(system)
    assert residuals(system, found) == [{}] * count
    assert found.reduction.jets == tuple(Jet(f"x{j}") for j in range(n))
    assert found.reduction.matrix == (total.inv() * matrix(g)).to_dense()
    if algebraic:
        places = [found.reduction.eliminated.index(f"z{j}") for j in range(algebraic)]
        rows_found = found.reduction.eliminated_from_states.to_list()
        assert [rows_found[place] for place in places] == matrix(c).to_list()
