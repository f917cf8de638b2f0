"""A response with one fault in it is refuted, and the record says which identity and where."""

from __future__ import annotations

import pickle
import re
from collections.abc import Callable
from dataclasses import replace
from fractions import Fraction
from pathlib import Path
from typing import Any

import pytest
from flint import arb, ctx
from hypothesis import assume, given, settings
from hypothesis import strategies as st

import closedform
from closedform.algebra.exponential import ExponentialMatrix, ModalTerm
from closedform.algebra.root_matrix import RootMatrix
from closedform.algebra.roots import root_set
from closedform.algebra.spectrum import Factor, Spectrum
from closedform.errors import RefutedError
from closedform.notation.expression import Call, Expression, Name, Negation, Number, Product, Sum
from closedform.response.names import Radical, constant_values
from closedform.response.response import Response
from closedform.verification import Check, ResponseRefutedError, UnprovedError, verify
from closedform.verification.verify import prove
from tests.exact import value_of
from tests.known_systems import KnownSystem
from tests.response.systems import KINDS, fresh, response_to
from tests.strategies import known_systems
from tests.verification.tampering import (
    Place,
    every_residue,
    followed_through,
    numbers_of,
    rewritten,
    same_function,
    slips,
    with_coefficient,
    with_formula,
    with_number,
    with_residue,
    with_term,
    with_transition_entry,
)

ODE, START = "d/dt e^(At) - A e^(At) = 0", "e^(A0) = I"
STATE_ODE, STATE_START, STATE = "x' - A x = 0", "x(0) = x0", "x = e^(At) x0"
ROUTES, CHAINS, OUTPUTS = "P e^(Jt) P^(-1) = e^(At)", "A P = P J", "y = C x"
CHARACTERISTIC, DETERMINANT = "p(A) = 0", "det e^(At) = e^(tr(A) t)"
INVERSE = "P P^(-1) = I"
NUMBERS, SECOND, FORMULAS = "e^(At), numbers", "e^(At), second opinion", "formulas as written"

each_kind = pytest.mark.parametrize("kind", KINDS)
CHAINED = ["defective", "defective circular pair", "defective hyperbolic pair", "nilpotent"]
LARGER = [kind for kind in KINDS if len(KINDS[kind]) > 1]


def refuted(response: Response) -> dict[str, str]:
    """Return what the checks of a response refute: how, by item."""
    record = verify(response)
    assert not record.holds
    assert record.refuted == tuple(c for c in record.checks if c.outcome == "refuted")
    return {check.item: check.how for check in record.refuted}


def disproved(response: Response) -> dict[str, str]:
    """Return what exact arithmetic alone refutes: how, by item."""
    found = {check.item: check.how for check in prove(response) if check.outcome == "refuted"}
    assert found
    return found


def column_in(how: str) -> int:
    """The column of the entry that a refutation names."""
    found = re.search(r"entry \((\d+), (\d+)\)", how)
    assert found, how
    return int(found[2])


@each_kind
def test_the_untouched_response_of_each_kind_is_proved(kind: str) -> None:
    record = verify(fresh(kind))
    assert record.holds
    assert {check.outcome for check in record.checks} <= {"proved", "enclosed"}


# --- e^(At) --------------------------------------------------------------------------------


@each_kind
def test_a_sign_flipped_in_any_number_of_the_exponential_is_refuted(kind: str) -> None:
    response = response_to(kind)
    for place, element in numbers_of(response.exponential):
        if not element:
            continue
        *_, row, column = place
        exponential = with_number(response.exponential, place, -element)
        found = disproved(replace(response, exponential=exponential))
        assert column_in(found.get(ODE, found.get(START, ""))) == column + 1
        # x was not touched, so it is no longer e^(At) x0; x0 has no zero.
        assert found[STATE] == f"state {row + 1} differs"
        assert ROUTES in found


@each_kind
def test_numbers_name_the_entry_that_a_flipped_sign_spoils(kind: str) -> None:
    response = response_to(kind)
    places = [place for place, element in numbers_of(response.exponential) if element]
    for place in places[:: max(1, len(places) // 4)]:
        *_, row, column = place
        element = dict(numbers_of(response.exponential))[place]
        exponential = with_number(response.exponential, place, -element)
        found = refuted(replace(response, exponential=exponential))
        entry = f"entry {(row + 1, column + 1)}"
        assert found[NUMBERS].startswith(f"{entry} differs at time ")
        assert found[SECOND].startswith(f"{entry} differs at time ")
        assert found[FORMULAS].startswith(f"{entry} of e^(At) differs")


@each_kind
def test_a_wrong_exponential_that_all_else_follows_from_is_refuted(kind: str) -> None:
    response = response_to(kind)
    one = response.field.domain.one
    for place, element in numbers_of(response.exponential):
        wrong = with_number(response.exponential, place, element + one)
        found = disproved(followed_through(response, wrong))
        assert column_in(found.get(ODE, found.get(START, ""))) == place[-1] + 1
        assert STATE not in found
        assert OUTPUTS not in found
    found = refuted(followed_through(response, wrong))
    assert {NUMBERS, SECOND, FORMULAS} <= set(found)


@pytest.mark.parametrize("kind", CHAINED)
def test_a_coefficient_of_a_power_of_t_set_to_zero_is_refuted(kind: str) -> None:
    response = response_to(kind)
    for i, term in enumerate(response.exponential.terms):
        for j, residue in enumerate(term.residues):
            nothing = residue - residue
            wrong = with_residue(response.exponential, i, j, nothing)
            found = disproved(followed_through(response, wrong))
            power = f"t^{j - 1} e^" if j > 1 else "coefficient of e^"
            assert power in found[ODE]
            assert ROUTES in found


@pytest.mark.parametrize("kind", CHAINED)
def test_a_dropped_power_of_t_is_refuted(kind: str) -> None:
    """The last residue is gone from e^(At) and from all that was made of it."""
    response = response_to(kind)
    for i, term in enumerate(response.exponential.terms):
        shorter = replace(term, residues=term.residues[:-1])
        found = refuted(followed_through(response, with_term(response.exponential, i, shorter)))
        assert ODE in found
        assert STATE_ODE in found
        assert NUMBERS in found
        assert FORMULAS in found


@pytest.mark.parametrize("kind", CHAINED)
@pytest.mark.parametrize("part", ["exponential", "state", "output"])
def test_a_power_of_t_dropped_from_one_function_alone_is_refuted(kind: str, part: str) -> None:
    """The three functions then have residues of different number."""
    response = response_to(kind)
    function = getattr(response, part)
    term = function.terms[0]
    shorter = with_term(function, 0, replace(term, residues=term.residues[:-1]))
    found = refuted(replace(response, **{part: shorter}))
    assert {"exponential": ODE, "state": STATE_ODE, "output": OUTPUTS}[part] in found


@each_kind
def test_a_factor_left_out_of_one_function_alone_is_refuted(kind: str) -> None:
    response = response_to(kind)
    nothing = every_residue(response.exponential, lambda r: r - r).terms[0]
    found = refuted(replace(response, exponential=with_term(response.exponential, 0, nothing)))
    assert START in found or ODE in found
    assert DETERMINANT in found


@pytest.mark.parametrize("kind", LARGER)
def test_the_transposed_exponential_is_refuted(kind: str) -> None:
    response = response_to(kind)
    wrong = every_residue(
        response.exponential,
        lambda r: replace(r, coefficients=tuple(c.transpose() for c in r.coefficients)),
    )
    if same_function(wrong, response.exponential):
        assert response.matrix == response.matrix.transpose()
        assert verify(followed_through(response, wrong)).holds
    else:
        found = refuted(followed_through(response, wrong))
        assert ODE in found
        assert START not in found
        assert NUMBERS in found


@pytest.mark.parametrize("kind", LARGER)
def test_two_swapped_entries_are_refuted(kind: str) -> None:
    response = response_to(kind)

    def swapped(matrix: Any) -> Any:
        rows = [list(row) for row in matrix.to_list()]
        rows[0][0], rows[0][1] = rows[0][1], rows[0][0]
        return response.field.matrix(rows)

    wrong = every_residue(
        response.exponential,
        lambda r: replace(r, coefficients=tuple(map(swapped, r.coefficients))),
    )
    found = refuted(replace(response, exponential=wrong))
    assert found[START] == "entry (1, 1) differs at time zero"
    assert found[NUMBERS].startswith("entry (1, 1) differs")
    assert ODE in found


@each_kind
def test_a_scaled_residue_is_refuted_by_the_trace_of_its_projector(kind: str) -> None:
    """2 F satisfies F' = A F; the projectors' traces and F(0) tell."""
    response = response_to(kind)
    for i, term in enumerate(response.exponential.terms):
        double = replace(term, residues=tuple(r + r for r in term.residues))
        found = refuted(followed_through(response, with_term(response.exponential, i, double)))
        assert found[DETERMINANT] == "a spectral projector has the wrong trace"
        assert START in found
        assert ROUTES in found
        assert ODE not in found


# --- the spectrum --------------------------------------------------------------------------


def perturbed(factor: Factor, power: int) -> Factor:
    """The factor with the coefficient of lambda^power larger, its roots still distinct."""
    field = factor.roots.field
    coefficients = list(factor.p.to_list())
    while True:
        coefficients[-1 - power] += field.domain.one
        p = field.polynomial(coefficients)
        if p.gcd(p.diff()).degree() == 0:
            return Factor(p, factor.blocks, root_set(field, p))


def with_other_roots(function: ExponentialMatrix, factor: Factor) -> ExponentialMatrix:
    """The same coefficients at the roots of another first factor."""
    term = function.terms[0]
    residues = tuple(RootMatrix(r.field, factor.p, r.coefficients) for r in term.residues)
    return with_term(function, 0, ModalTerm(factor, residues))


@each_kind
def test_a_wrong_root_in_every_function_is_refuted(kind: str) -> None:
    response = response_to(kind)
    for power in range(response.spectrum.factors[0].degree):
        factor = perturbed(response.spectrum.factors[0], power)
        wrong = with_other_roots(response.exponential, factor)
        found = refuted(followed_through(response, wrong))
        assert ODE in found
        assert STATE_ODE in found
        assert NUMBERS in found
        assert ROUTES in found


@each_kind
def test_coefficients_that_belong_to_other_roots_are_refuted(kind: str) -> None:
    response = response_to(kind)
    term = response.exponential.terms[0]
    factor = perturbed(term.factor, 0)
    wrong = with_term(response.exponential, 0, replace(term, factor=factor))
    found = refuted(replace(response, exponential=wrong))
    assert found[ODE] == "a coefficient belongs to other eigenvalues"


@each_kind
def test_a_wrong_factor_of_the_characteristic_polynomial_is_refuted(kind: str) -> None:
    response = response_to(kind)
    spectrum = response.spectrum
    for power in range(spectrum.factors[0].degree):
        factors = (perturbed(spectrum.factors[0], power), *spectrum.factors[1:])
        found = disproved(replace(response, spectrum=replace(spectrum, factors=factors)))
        assert found[CHARACTERISTIC] == "the factors do not multiply to the polynomial"


@each_kind
def test_a_wrong_characteristic_polynomial_that_factors_rightly_is_refuted(kind: str) -> None:
    response = response_to(kind)
    spectrum = response.spectrum
    for power in range(spectrum.factors[0].degree):
        factors = (perturbed(spectrum.factors[0], power), *spectrum.factors[1:])
        product = response.field.polynomial([response.field.domain.one])
        for factor in factors:
            product = product * factor.p**factor.multiplicity
        wrong = Spectrum(spectrum.field, product, factors)
        how = disproved(replace(response, spectrum=wrong))[CHARACTERISTIC]
        n = response.matrix.shape[0]
        if power == factors[0].degree - 1:
            assert how == f"the coefficient of lambda^{n - 1} is not -tr A"
        else:
            assert re.fullmatch(r"entry \(\d, \d\) of [cp]\(A\) is not zero", how)


# --- x and y -------------------------------------------------------------------------------


@each_kind
def test_another_initial_value_is_refuted(kind: str) -> None:
    response = response_to(kind)
    for row in range(response.matrix.shape[0]):
        rows = [list(entries) for entries in response.initial.to_list()]
        rows[row][0] += response.field.domain.one
        other = response.field.matrix(rows)
        found = disproved(replace(response, initial=other))
        assert found[STATE_START] == f"entry {(row + 1, 1)} differs at time zero"
        assert STATE in found
        assert ODE not in found


@each_kind
def test_the_solution_of_another_initial_value_is_refuted(kind: str) -> None:
    response = response_to(kind)
    for row in range(response.matrix.shape[0]):
        rows = [list(entries) for entries in response.initial.to_list()]
        rows[row][0] += response.field.domain.one
        other = response.exponential.times(response.field.matrix(rows))
        found = refuted(replace(response, state=other))
        assert found[STATE_START] == f"entry {(row + 1, 1)} differs at time zero"
        assert STATE in found
        assert FORMULAS in found
        assert STATE_ODE not in found


@each_kind
def test_a_wrong_number_in_the_solution_is_refuted(kind: str) -> None:
    response = response_to(kind)
    one = response.field.domain.one
    for place, element in numbers_of(response.state):
        wrong = with_number(response.state, place, element + one)
        row = place[-2]
        found = disproved(replace(response, state=wrong))
        assert found[STATE] == f"state {row + 1} differs"
        assert STATE_ODE in found or STATE_START in found
        assert not {ODE, START, ROUTES} & set(found)
    found = refuted(replace(response, state=wrong))
    assert found[FORMULAS].startswith(f"state x{row + 1} differs at time ")
    assert NUMBERS not in found


@each_kind
def test_an_output_with_another_weight_is_refuted(kind: str) -> None:
    response = response_to(kind)
    field = response.field
    for number, output in enumerate(response.model.outputs):
        for k in range(len(output.weights)):
            weights = [[field.scalar(w) for w in o.weights] for o in response.model.outputs]
            weights[number][k] += field.domain.one
            found = refuted(replace(response, output=response.state.after(field.matrix(weights))))
            assert found[OUTPUTS] == f"output {number + 1} is another combination"
            assert found[FORMULAS].startswith(f"output {output.name} differs at time ")
            assert set(found) == {OUTPUTS, FORMULAS}


@each_kind
def test_a_missing_output_is_refuted(kind: str) -> None:
    """The model asks for outputs, the response has none."""
    assert refuted(replace(response_to(kind), output=None))


# --- the model that the response answers ---------------------------------------------------


@each_kind
def test_the_response_of_another_matrix_is_refuted(kind: str) -> None:
    """All identities hold among its parts, but they are not the model's."""
    response = response_to(kind)
    rows = [list(row) for row in response.model.matrix]
    rows[0][0] = -rows[0][0] + rows[0][0].rational(7)
    model = replace(response.model, matrix=tuple(map(tuple, rows)))
    assert refuted(replace(response, model=model))


@each_kind
def test_the_response_to_another_initial_value_is_refuted(kind: str) -> None:
    response = response_to(kind)
    first, *rest = response.model.initial
    model = replace(response.model, initial=(first + first, *rest))
    assert refuted(replace(response, model=model))


# --- the canonical form --------------------------------------------------------------------


def with_vector(response: Response, chain: int, place: int, vector: RootMatrix) -> Response:
    chains = list(response.jordan.chains)
    vectors = list(chains[chain].vectors)
    vectors[place] = vector
    chains[chain] = replace(chains[chain], vectors=tuple(vectors))
    return replace(response, jordan=replace(response.jordan, chains=tuple(chains)))


@each_kind
def test_a_wrong_entry_in_an_eigenvector_or_chain_vector_is_refuted(kind: str) -> None:
    response = response_to(kind)
    n = response.matrix.shape[0]
    for c, chain in enumerate(response.jordan.chains):
        for place, vector in enumerate(chain.vectors):
            for row in range(n):
                unit = response.field.identity(n)[:, row].to_dense()
                wrong = vector + RootMatrix.constant(response.field, chain.factor.p, unit)
                found = disproved(with_vector(response, c, place, wrong))
                assert ROUTES in found
                # A multiple of a unit vector that is an eigenvector stays one: n = 1, say.
                stays = wrong.shifted(response.matrix) - vector.shifted(response.matrix)
                if not stays.is_zero:
                    assert re.fullmatch(
                        rf"row \d of vector {place + 1} of chain {c + 1}", found[CHAINS]
                    )


@each_kind
def test_a_zero_vector_in_a_chain_is_refuted(kind: str) -> None:
    """(A - lambda) 0 = 0, so the chain equations alone would not notice."""
    response = response_to(kind)
    for c, chain in enumerate(response.jordan.chains):
        vectors = tuple(v - v for v in chain.vectors)
        chains = list(response.jordan.chains)
        chains[c] = replace(chain, vectors=vectors)
        wrong = replace(response, jordan=replace(response.jordan, chains=tuple(chains)))
        assert ROUTES in disproved(wrong)


@pytest.mark.parametrize("kind", CHAINED)
def test_chain_vectors_in_the_wrong_order_are_refuted(kind: str) -> None:
    response = response_to(kind)
    chain = response.jordan.chains[0]
    turned = replace(chain, vectors=tuple(reversed(chain.vectors)))
    chains = (turned, *response.jordan.chains[1:])
    found = disproved(replace(response, jordan=replace(response.jordan, chains=chains)))
    assert re.fullmatch(r"row \d of vector 1 of chain 1", found[CHAINS])
    assert ROUTES in found


@each_kind
def test_a_replaced_generator_is_refuted(kind: str) -> None:
    """The first column of the basis is the generator of the first chain."""
    response = response_to(kind)
    columns = [list(row) for row in response.jordan.basis.to_list()]
    for row in columns:
        row[0] += row[0] + row[-1]
    wrong = replace(response.jordan, basis=response.field.matrix(columns))
    found = disproved(replace(response, jordan=wrong))
    assert re.match(r"row \d of the image of basis vector 1\b", found[ROUTES])


@pytest.mark.parametrize("kind", LARGER)
def test_chains_that_do_not_span_the_space_are_refuted(kind: str) -> None:
    response = response_to(kind)
    columns = [list(row) for row in response.jordan.basis.to_list()]
    for row in columns:
        row[0] = row[-1]
    wrong = replace(response.jordan, basis=response.field.matrix(columns))
    found = disproved(replace(response, jordan=wrong))
    assert found[CHAINS] == "the chains do not span the space: P is singular"


@pytest.mark.parametrize("kind", [kind for kind in KINDS if not kind.startswith(("named", "even"))])
def test_a_wrong_row_of_the_inverse_of_p_is_refuted(kind: str) -> None:
    """P^(-1) is printed, so that its rows have to be proved as well."""
    response = response_to(kind)
    for c, rows in enumerate(response.jordan.left_chains):
        for place, row in enumerate(rows):
            jordan = replace(response.jordan)
            wrong = (*rows[:place], row + row, *rows[place + 1 :])
            left = response.jordan.left_chains
            jordan.__dict__["left_chains"] = (*left[:c], wrong, *left[c + 1 :])
            found = disproved(replace(response, jordan=jordan))
            assert re.match(r"entry \(\d, \d\) of the product", found[INVERSE])


# --- formulas as written -------------------------------------------------------------------

OTHER_TIMES = (Fraction(2, 7), Fraction(13, 11))


def values_at(response: Response, t: Fraction) -> dict[str, arb]:
    names = constant_values(response.closed_forms.constants)
    return {**names, response.model.time: arb(t.numerator) / t.denominator}


def provably_differ(response: Response, left: Expression, right: Expression) -> bool:
    """Whether two formulas have different values, told by balls at two instants."""
    with ctx.workprec(300):
        return any(
            not value_of(left, values).overlaps(value_of(right, values))
            for values in (values_at(response, t) for t in OTHER_TIMES)
        )


def formulas_in(response: Response) -> list[tuple[str, Expression, Callable[..., Response]]]:
    """Every formula, the words by which it is named, and how to put another in its place."""
    forms, n = response.closed_forms, len(response.model.states)
    found: list[tuple[str, Expression, Callable[..., Response]]] = []
    for i in range(n):
        for k in range(n):

            def put(other: Expression, i: int = i, k: int = k) -> Response:
                return with_transition_entry(response, i, k, other)

            found.append((f"entry ({i + 1}, {k + 1}) of e^(At)", forms.transition[i][k], put))
    for part, names in (
        ("solution", [f"state {name}" for name in response.model.states]),
        ("outputs", [f"output {output.name}" for output in response.model.outputs]),
    ):
        for place, (name, formula) in enumerate(zip(names, getattr(forms, part), strict=True)):

            def put_one(other: Expression, part: str = part, place: int = place) -> Response:
                return with_formula(response, part, place, other)

            found.append((name, formula, put_one))
    return found


@each_kind
def test_every_slip_of_the_pen_in_one_entry_of_each_kind_is_refuted(kind: str) -> None:
    response = response_to(kind)
    seen: set[tuple[str, str]] = set()
    for name, formula, put in formulas_in(response):
        for slip, other in slips(formula, response.model.time):
            # One of each kind of slip in each of e^(At), x and y.
            if (slip, name.split()[0]) in seen or not provably_differ(response, formula, other):
                continue
            seen.add((slip, name.split()[0]))
            found = refuted(put(other))
            assert found[FORMULAS].startswith(f"{name} differs at time ")
    assert len(seen) >= 6


@pytest.mark.parametrize("kind", CHAINED)
def test_a_t_dropped_from_a_formula_is_refuted(kind: str) -> None:
    response = response_to(kind)
    tried = 0
    for name, formula, put in formulas_in(response):
        for slip, other in slips(formula, response.model.time):
            if slip == "a t is dropped" and provably_differ(response, formula, other):
                assert refuted(put(other))[FORMULAS].startswith(f"{name} ")
                tried += 1
    assert tried > 5


@pytest.mark.parametrize("kind", ["circular", "even quartic", "named cubic", "mixed"])
def test_a_sine_written_for_a_cosine_is_refuted(kind: str) -> None:
    response = response_to(kind)
    tried = 0
    for name, formula, put in formulas_in(response):
        for slip, other in slips(formula, response.model.time):
            if slip == "another function is written":
                assert provably_differ(response, formula, other)
                assert refuted(put(other))[FORMULAS].startswith(f"{name} ")
                tried += 1
    assert tried > 5


@pytest.mark.parametrize("kind", ["even quartic", "named cubic", "named quartic"])
def test_a_named_constant_that_stands_for_another_number_is_refuted(kind: str) -> None:
    response = response_to(kind)
    constants = response.closed_forms.constants
    assert constants
    for i, constant in list(enumerate(constants))[::3]:
        other = constants[(i + 1) % len(constants)].definition
        changed = (*constants[:i], replace(constant, definition=other), *constants[i + 1 :])
        found = refuted(rewritten(response, constants=changed))
        assert FORMULAS in found


@pytest.mark.parametrize("kind", ["named cubic", "named quartic"])
def test_a_constant_with_a_definition_that_is_slightly_off_is_refuted(kind: str) -> None:
    response = response_to(kind)
    constants = response.closed_forms.constants
    for i, constant in list(enumerate(constants))[::4]:
        for field, other in (
            ("which", lambda w: w % 3 + 1),
            ("part", lambda p: "imaginary" if p == "real" else "real"),
            ("weight", lambda w: w * 2),
            ("numerator", lambda f: -f),
            ("polynomial", lambda f: f.add_ground(f.dom.one)),
        ):
            if not hasattr(constant.definition, field):
                continue
            value = other(getattr(constant.definition, field))
            wrong = replace(constant.definition, **{field: value})
            with ctx.workprec(200):
                if wrong.enclosure().overlaps(constant.definition.enclosure()):
                    continue  # the conjugate root has the same real part
            changed = (*constants[:i], replace(constant, definition=wrong), *constants[i + 1 :])
            assert FORMULAS in refuted(rewritten(response, constants=changed))


@pytest.mark.parametrize("kind", LARGER)
def test_two_swapped_formulas_are_refuted(kind: str) -> None:
    response = response_to(kind)
    first, *rest = response.closed_forms.transition
    assert first[0] != first[1]
    swapped = ((first[1], first[0], *first[2:]), *rest)
    found = refuted(rewritten(response, transition=swapped))
    assert found[FORMULAS].startswith("entry (1, 1) of e^(At) differs")
    solution = response.closed_forms.solution
    turned = (solution[1], solution[0], *solution[2:])
    found = refuted(rewritten(response, solution=turned))
    assert found[FORMULAS].startswith("state x1 differs")


@each_kind
def test_the_transposed_formulas_are_refuted(kind: str) -> None:
    response = response_to(kind)
    rows = response.closed_forms.transition
    turned = tuple(zip(*rows, strict=True))
    if turned == rows:
        assert response.matrix == response.matrix.transpose()
    else:
        assert set(refuted(rewritten(response, transition=turned))) == {FORMULAS}


@each_kind
def test_a_wrong_factor_in_front_of_the_printed_exponential_is_refuted(kind: str) -> None:
    """What a write-up prints is `fronted_transition`."""
    response = response_to(kind)
    front, rows = response.closed_forms.fronted_transition
    wrong = Number(Fraction(2)) if front is None else Product((Number(Fraction(2)), front))
    assert refuted(rewritten(response, fronted_transition=(wrong, rows)))


@each_kind
def test_a_wrong_entry_behind_the_factor_in_front_is_refuted(kind: str) -> None:
    response = response_to(kind)
    front, rows = response.closed_forms.fronted_transition
    (entry, *others), *rest = rows
    wrong = Sum((entry, Number(Fraction(1))))
    changed = ((wrong, *others), *rest)
    found = refuted(rewritten(response, fronted_transition=(front, changed)))
    assert found[FORMULAS].startswith("entry (1, 1) of e^(At)")


@pytest.mark.parametrize("kind", ["named cubic", "named quartic"])
def test_a_wrong_impulse_response_is_refuted(kind: str) -> None:
    """The functions g of the resolvent are printed, too."""
    response = response_to(kind)
    impulse, *rest = response.closed_forms.impulses
    assert impulse is not None
    assert refuted(rewritten(response, impulses=(Negation(impulse), *rest)))


@pytest.mark.parametrize("kind", ["circular", "even quartic", "surd entries"])
def test_a_wrong_frequency_of_a_mode_is_refuted(kind: str) -> None:
    """Eigenvalues are printed from the modes."""
    response = response_to(kind)
    (mode, *modes), *rest = response.closed_forms.modes
    wrong = replace(mode, rate=response.model.initial[0])
    assert refuted(rewritten(response, modes=((wrong, *modes), *rest)))


@pytest.mark.parametrize("kind", ["even quartic", "named quartic"])
def test_a_mode_said_twice_is_refuted(kind: str) -> None:
    """All are roots and their number is right, but one is missing."""
    response = response_to(kind)
    (modes, *rest) = response.closed_forms.modes
    pair = next(mode for mode in modes if mode.kind != "real")
    doubled = tuple(pair if mode.kind == pair.kind else mode for mode in modes)
    if doubled == modes:  # one pair and two real roots: double a real one
        real = next(mode for mode in modes if mode.kind == "real")
        doubled = tuple(real if mode.kind == "real" else mode for mode in modes)
    assert doubled != modes
    assert refuted(rewritten(response, modes=(doubled, *rest)))


@pytest.mark.parametrize("kind", ["even quartic", "named cubic"])
def test_an_impulse_response_without_a_value_is_refuted(kind: str) -> None:
    """A ball that is not finite meets every other."""
    response = response_to(kind)
    _, *rest = response.closed_forms.impulses
    bad = Call("sqrt", Negation(Number(Fraction(1))))
    assert refuted(rewritten(response, impulses=(bad, *rest)))


def test_a_definition_without_a_value_is_refuted() -> None:
    """Even where no formula but the eigenvalues uses the name."""
    response = response_to("even quartic")
    constants = tuple(
        replace(c, definition=Radical(Call("sqrt", Negation(Number(Fraction(1))))))
        for c in response.closed_forms.constants
    )
    found = refuted(rewritten(response, constants=constants))
    assert "eigenvalues as written" in found


def test_a_formula_that_has_no_value_is_refuted() -> None:
    response = response_to("one state")
    zero = Sum((Name("t"), Negation(Name("t"))))
    bad = Call("sqrt", Sum((zero, Negation(Number(Fraction(1))))))
    found = refuted(with_formula(response, "solution", 0, bad))
    assert found[FORMULAS].startswith("state x1 has no value at time ")


def with_cancellation(response: Response, height: int, error: Fraction) -> Response:
    """State x1 + error written as x1 + e^(e^height) - e^(e^height) + error."""
    large = Call("exp", Call("exp", Number(Fraction(height))))
    wide = Sum((response.solution[0], large, Negation(large), Number(error)))
    return with_formula(response, "solution", 0, wide)


def formulas_of(response: Response) -> Check:
    return next(check for check in verify(response).checks if check.item == FORMULAS)


def test_a_formula_that_loses_thousands_of_digits_is_told_right_from_wrong() -> None:
    response = response_to("one state")
    assert formulas_of(with_cancellation(response, 9, Fraction(0))).outcome == "enclosed"
    check = formulas_of(with_cancellation(response, 9, Fraction(1, 10**25)))
    assert check.outcome == "refuted"
    assert check.how.startswith("state x1 differs at time ")


def test_a_formula_too_wide_to_tell_at_the_limit_does_not_hold() -> None:
    record = verify(with_cancellation(response_to("one state"), 11, Fraction(0)))
    (check,) = record.left_open
    assert (check.item, check.outcome) == (FORMULAS, "not attempted")
    assert check.how.startswith("state x1 is not settled at time 1/12 by 32768 bits")
    assert record.refuted == ()
    assert not record.holds


# --- random faults in random systems -------------------------------------------------------


def response_to_known(system: KnownSystem) -> Response:
    return closedform.respond(
        closedform.system(
            system.matrix,
            initial=[Fraction(i + 1, 2) for i in range(system.order)],
            outputs={"y": " - ".join(f"x{i + 1}" for i in range(system.order))},
        )
    )


@given(known_systems(largest=4), st.data())
@settings(max_examples=40)
def test_a_random_change_of_a_number_is_refuted_unless_it_changes_nothing(
    system: KnownSystem, data: st.DataObject
) -> None:
    response = response_to_known(system)
    part = data.draw(st.sampled_from(["exponential", "state", "output"]))
    function: ExponentialMatrix = getattr(response, part)
    places: list[Place] = [place for place, _ in numbers_of(function)]
    place = data.draw(st.sampled_from(places))
    element = dict(numbers_of(function))[place]
    one = response.field.domain.one
    value = data.draw(
        st.sampled_from([-element, element + element, element + one, element - one, element * 0])
    )
    wrong = with_number(function, place, value)
    record = verify(replace(response, **{part: wrong}))
    # The numbers of such a function are unique, so that this decides it exactly.
    assert record.holds == (value == element) == same_function(wrong, function)


@given(known_systems(largest=4), st.data())
@settings(max_examples=25)
def test_a_random_rearrangement_is_refuted_unless_it_changes_nothing(
    system: KnownSystem, data: st.DataObject
) -> None:
    response = response_to_known(system)
    n = system.order
    rows = data.draw(st.permutations(range(n)))
    columns = data.draw(st.permutations(range(n)))

    def moved(matrix: Any) -> Any:
        entries = matrix.to_list()
        return response.field.matrix([[entries[i][k] for k in columns] for i in rows])

    i = data.draw(st.integers(0, len(response.exponential.terms) - 1))
    function = response.exponential
    for j, residue in enumerate(function.terms[i].residues):
        for k in range(len(residue.coefficients)):
            function = with_coefficient(function, (i, j, k), moved)
    record = verify(followed_through(response, function))
    assert record.holds == same_function(function, response.exponential)


@given(known_systems(largest=4), st.data())
@settings(max_examples=25)
def test_a_random_slip_of_the_pen_is_refuted(system: KnownSystem, data: st.DataObject) -> None:
    response = response_to_known(system)
    name, formula, put = data.draw(st.sampled_from(formulas_in(response)))
    _, other = data.draw(st.sampled_from(list(slips(formula, "t"))))
    assume(provably_differ(response, formula, other))
    assert refuted(put(other))[FORMULAS].startswith(f"{name} ")


@given(known_systems(largest=4), st.data())
@settings(max_examples=25)
def test_a_random_change_of_a_chain_is_refuted(system: KnownSystem, data: st.DataObject) -> None:
    response = response_to_known(system)
    c = data.draw(st.integers(0, len(response.jordan.chains) - 1))
    chain = response.jordan.chains[c]
    place = data.draw(st.integers(0, chain.size - 1))
    numbers = data.draw(st.lists(st.integers(-1, 1), min_size=system.order, max_size=system.order))
    assume(any(numbers))
    column = response.field.matrix([[response.field.scalar(x)] for x in numbers])
    change = RootMatrix.constant(response.field, chain.factor.p, column)
    wrong = with_vector(response, c, place, chain.vectors[place] + change)
    assert ROUTES in refuted(wrong)


# --- what comes of it ----------------------------------------------------------------------


def faulty() -> Response:
    response = response_to("circular")
    wrong = every_residue(response.exponential, lambda r: r + r)
    return replace(response, exponential=wrong)


def test_the_error_names_the_model_the_identity_and_the_entry() -> None:
    error = ResponseRefutedError("bench", verify(faulty()).refuted)
    assert isinstance(error, RefutedError)
    text = str(error)
    assert text.startswith("bench: ")
    assert f"{START}: entry (1, 1) differs at time zero" in text
    assert f"{DETERMINANT}: a spectral projector has the wrong trace" in text
    assert "\n" not in text


def test_the_error_survives_pickling() -> None:
    error = ResponseRefutedError("bench", (Check(START, "refuted", "entry (1, 2) differs"),))
    copy = pickle.loads(pickle.dumps(error))  # noqa: S301  our own bytes
    assert type(copy) is ResponseRefutedError
    assert str(copy) == str(error)
    assert (copy.model, copy.refuted) == (error.model, error.refuted)


def test_no_file_is_written_for_a_refuted_response(
    tmp_path: Path, monkeypatch: pytest.MonkeyPatch
) -> None:
    response = faulty()
    monkeypatch.setattr("closedform.document.writeup.respond", lambda _: response)
    with pytest.raises(ResponseRefutedError, match="entry \\(1, 1\\)"):
        closedform.write_up(response.model, into=tmp_path / "new")
    assert list(tmp_path.iterdir()) == []


def test_no_file_is_written_for_a_response_that_is_not_proved(
    tmp_path: Path, monkeypatch: pytest.MonkeyPatch
) -> None:
    response = with_cancellation(response_to("one state"), 11, Fraction(0))
    monkeypatch.setattr("closedform.document.writeup.respond", lambda _: response)
    with pytest.raises(UnprovedError, match="state x1 is not settled at time 1/12") as caught:
        closedform.write_up(response.model, into=tmp_path / "new")
    assert caught.value.model == response.model.name
    assert caught.value.left_open == verify(response).left_open
    assert list(tmp_path.iterdir()) == []


def test_a_refutation_counts_more_than_what_is_left_open(
    tmp_path: Path, monkeypatch: pytest.MonkeyPatch
) -> None:
    response = with_cancellation(faulty(), 11, Fraction(0))
    monkeypatch.setattr("closedform.document.writeup.respond", lambda _: response)
    with pytest.raises(ResponseRefutedError, match="entry \\(1, 1\\)"):
        closedform.write_up(response.model, into=tmp_path / "new")
    assert list(tmp_path.iterdir()) == []


@pytest.mark.parametrize("is_refuted", [True, False])
def test_nothing_is_derived_from_a_response_that_is_not_proved(*, is_refuted: bool) -> None:
    from closedform.derivation.build import derive

    wide = with_cancellation(response_to("one state"), 11, Fraction(0))
    response = faulty() if is_refuted else wide
    with pytest.raises(ValueError, match="proved"):
        derive(response, verify(response))
