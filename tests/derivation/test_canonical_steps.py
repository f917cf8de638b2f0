"""Every matrix that is displayed on the way by eigenvectors is truly what it is called."""

from __future__ import annotations

from fractions import Fraction
from typing import Any

import pytest
from flint import acb, acb_mat, ctx

from closedform.derivation.step import Derivation, Matrix
from closedform.response.response import Response
from tests.derivation.values import (
    BITS,
    assert_meet,
    at,
    derivation_of,
    matrix_at,
    matrix_of,
    names_at,
    responded,
    small_systems,
    statements_of,
    steps_of,
    unit,
)
from tests.response.systems import KINDS, response_to

TIMES = (Fraction(3, 7), Fraction(-5, 4))
SHORT = [kind for kind in KINDS if not kind.startswith(("named", "even"))]
SURDS: dict[str, list[list[object]]] = {
    "two surds": [["sqrt(2)", 1], [0, "sqrt(3)"]],
    "a chain over surds": [["sqrt(2)", 1], [0, "sqrt(2)"]],
    "a pair over surds": [["-sqrt(2)", 3], [-1, "-sqrt(2)"]],
    "a nested frequency": [[0, 1], ["-2 - sqrt(2)", 0]],
    "a nested real pair": [[0, 1], ["2 + sqrt(2)", 1]],
    "fractions": [["-1/2", "1/3"], ["1/5", "-3/4"]],
    "a slow surd pair": [["-1/3", "2/7"], ["-5/2", "-1/6"]],
}
CASES = [
    *[pytest.param(responded, rows, id=name) for name, rows in small_systems()],
    *[pytest.param(response_to, kind, id=kind) for kind in SHORT],
    *[pytest.param(responded, rows, id=name) for name, rows in SURDS.items()],
]
each_case = pytest.mark.parametrize(("make", "argument"), CASES)


def displayed(derivation: Derivation, kind: str, says: str) -> Matrix | None:
    found = statements_of(derivation, kind, says)
    assert len(found) <= 1
    if not found:
        return None
    matrix = found[0].sides[-1]
    assert isinstance(matrix, Matrix)
    return matrix


@each_case
def test_p_and_j_and_the_inverse_are_what_they_are_called(make: Any, argument: Any) -> None:
    response = make(argument)
    derivation = derivation_of(response)
    n = len(response.model.states)
    with ctx.workprec(BITS):
        names, a = names_at(response, Fraction(0)), matrix_of(response)
        p, j = (matrix_at(displayed(derivation, "jordan_form", s), names) for s in ("P", "J"))
        assert_meet(a * p, p * j)
        assert not p.det().contains(0)
        assert_is_jordan(j)
        inverse = displayed(derivation, "jordan_form", "P inverse")
        is_complex = bool(steps_of(derivation, "real_form"))
        assert (inverse is None) == is_complex
        if inverse is not None:
            assert_meet(p * matrix_at(inverse, names), unit(n))
        for t in TIMES:
            time = acb(t.numerator) / t.denominator
            assert_meet(p * (j * time).exp() * p.inv(), (a * time).exp())


def assert_is_jordan(j: acb_mat) -> None:
    """Eigenvalues on the diagonal, 0 or 1 above it with equal eigenvalues left and below."""
    n = j.nrows()
    for i in range(n):
        for k in range(n):
            if k == i + 1:
                assert j[i, k] in (0, 1)
                assert j[i, k] == 0 or j[i, i].overlaps(j[k, k])
            elif k != i:
                assert j[i, k] == 0


@each_case
def test_the_real_form_is_similar_by_what_is_displayed(make: Any, argument: Any) -> None:
    response = make(argument)
    derivation = derivation_of(response)
    if not steps_of(derivation, "real_form"):
        assert all(m.kind != "circular" for ms in response.closed_forms.modes for m in ms)
        return
    n = len(response.model.states)
    with ctx.workprec(BITS):
        names, a = names_at(response, Fraction(0)), matrix_of(response)
        p, j, inverse = (
            matrix_at(displayed(derivation, "real_form", says), names)
            for says in ("P", "real form", "P inverse")
        )
        assert all(e.imag == 0 for m in (p, j, inverse) for e in m.entries())
        assert_meet(a * p, p * j)
        assert_meet(p * inverse, unit(n))


@each_case
def test_the_exponential_of_the_form_gives_that_of_a(make: Any, argument: Any) -> None:
    """P e^(Jt) P^(-1) = e^(At), and e^(Jt) is the exponential of J t."""
    response = make(argument)
    derivation = derivation_of(response)
    kind = "real_form" if steps_of(derivation, "real_form") else "jordan_form"
    form = "real form" if kind == "real_form" else "J"
    for t in TIMES:
        with ctx.workprec(BITS):
            names, a = names_at(response, t), matrix_of(response)
            time = names[response.model.time]
            p, j, inverse = (
                matrix_at(displayed(derivation, kind, says), names)
                for says in ("P", form, "P inverse")
            )
            exponential = matrix_at(displayed(derivation, "exponential_of_form", "exp J"), names)
            assert_meet(exponential, (j * time).exp())
            assert_meet(p * exponential * inverse, (a * time).exp())
            shown = displayed(derivation, "transition", "exp A")
            assert_meet(matrix_at(shown, names), (a * time).exp())


@each_case
def test_eigenvectors_satisfy_the_equations_beside_them(make: Any, argument: Any) -> None:
    response = make(argument)
    derivation = derivation_of(response)
    n = len(response.model.states)
    with ctx.workprec(BITS):
        names, a = names_at(response, Fraction(0)), matrix_of(response)
        p = matrix_at(displayed(derivation, "jordan_form", "P"), names)
        vectors = vectors_of(derivation, names)
        for number, vector in vectors.items():
            column = acb_mat([[p[i, number - 1]] for i in range(n)])
            assert_meet(vector, column)
        equations = [
            s
            for says in ("eigenvector equation", "generalized eigenvector equation")
            for s in statements_of(derivation, "eigenvectors", says)
        ]
        assert equations
        for equation in equations:
            (shifted, vector), below = equation.sides
            value = at(shifted.argument, names)
            left = (a - unit(n) * acb(value)) * vectors[int(vector.indices[0])]
            if below.kind == "zero":
                assert equation.says == "eigenvector equation"
                assert_meet(left, left - left)
            else:
                assert equation.says == "generalized eigenvector equation"
                assert_meet(left, vectors[int(below.indices[0])])


def vectors_of(derivation: Derivation, names: Any) -> dict[int, acb_mat]:
    found = {}
    for says in ("eigenvector", "generalized eigenvector"):
        for statement in statements_of(derivation, "eigenvectors", says):
            vector, column = statement.sides
            found[int(vector.indices[0])] = matrix_at(column, names)
    return found


@each_case
def test_every_eigenvalue_has_its_vectors(make: Any, argument: Any) -> None:
    """One vector for each column of P, but for those conjugate to one that is printed."""
    response = make(argument)
    derivation = derivation_of(response)
    with ctx.workprec(BITS):
        count = len(vectors_of(derivation, names_at(response, Fraction(0))))
    conjugate = sum(
        size
        for factor, modes in zip(
            response.spectrum.factors, response.closed_forms.modes, strict=True
        )
        for mode in modes
        if mode.kind == "circular"
        for size in factor.blocks
    )
    assert count == len(response.model.states) - conjugate


def test_facts_of_the_steps() -> None:
    derivation = derivation_of(response_to("mixed"))
    pair, chain = steps_of(derivation, "eigenvectors")
    assert (pair.facts["conjugate"], pair.facts["numbers"]) == (True, (1, 2))
    assert (chain.facts["multiplicity"], chain.facts["geometric multiplicity"]) == (2, 1)
    (form,) = steps_of(derivation, "jordan_form")
    assert (form.facts["complex"], form.facts["diagonal"], form.facts["n"]) == (True, False, 4)
    (exponential,) = steps_of(derivation, "exponential_of_form")
    assert exponential.facts["real"]
    assert exponential.facts["chained"]


def test_a_chain_of_a_pair_is_displayed_in_cells() -> None:
    response: Response = response_to("defective circular pair")
    derivation = derivation_of(response)
    with ctx.workprec(BITS):
        j = matrix_at(displayed(derivation, "real_form", "real form"), names_at(response, TIMES[0]))
    expected = [[0, 1, 1, 0], [-1, 0, 0, 1], [0, 0, 0, 1], [0, 0, -1, 0]]
    assert j == acb_mat(expected)
