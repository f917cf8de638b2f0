"""What is proved by structure holds for the roots at points of the domain."""

from __future__ import annotations

from collections.abc import Mapping, Sequence
from fractions import Fraction
from itertools import pairwise

import pytest
from flint import acb, fmpq, fmpq_mat
from hypothesis import given
from hypothesis import strategies as st

from closedform.algebra.domain import Comparison, ParameterDomain
from closedform.algebra.factor_structure import FactorStructure, structure_of_factor
from closedform.algebra.field import FieldMatrix
from closedform.algebra.graph import cycles_beside, edges_of, sides_of, spanning_tree
from closedform.algebra.sample import value_at
from closedform.algebra.structure import real_spectrum, simple_spectrum, stable_spectrum
from tests.sign_checks import positive

Weights = Mapping[tuple[int, int], str]


def compartments(rates: Weights, losses: Mapping[int, str], domain: ParameterDomain) -> FieldMatrix:
    """Return the matrix of compartments; rates[i, j] flows from i to j, losses[i] away."""
    field = domain.field
    n = 1 + max(max(pair) for pair in rates)
    rows = [[field.domain.zero] * n for _ in range(n)]
    for (i, j), name in rates.items():
        rows[j][i] = rows[j][i] + field.symbol(name)
        rows[i][i] = rows[i][i] - field.symbol(name)
    for i, name in losses.items():
        rows[i][i] = rows[i][i] - field.symbol(name)
    return field.matrix(rows)


def chain_of_masses(count: int, walls: int) -> tuple[ParameterDomain, FieldMatrix]:
    """Return masses in a row, springs between them and to one wall or two."""
    names = [f"m{i}" for i in range(count)] + [f"k{i}" for i in range(count + walls - 1)]
    domain = positive(" ".join(names))
    field = domain.field
    zero, one = field.domain.zero, field.domain.one
    springs = [field.symbol(f"k{i}") for i in range(count + walls - 1)]
    springs += [zero] * (count + 1 - len(springs))
    rows = [[one if j == i + count else zero for j in range(2 * count)] for i in range(count)]
    for i in range(count):
        m, left, right = field.symbol(f"m{i}"), springs[i], springs[i + 1]
        row = [zero] * (2 * count)
        row[i] = -(left + right) / m
        if i:
            row[i - 1] = left / m
        if i + 1 < count:
            row[i + 1] = right / m
        rows.append(row)
    return domain, field.matrix(rows)


def factors_of(domain: ParameterDomain, matrix: FieldMatrix) -> list[FactorStructure | None]:
    """Return what is proved of each factor of degree 2 or more."""
    field = domain.field
    _, factors = field.polynomial(matrix.charpoly()).factor_list()
    return [
        structure_of_factor(field, matrix, p.monic(), domain) for p, _ in factors if p.degree() > 1
    ]


def roots_at(matrix: FieldMatrix, point: Mapping[str, Fraction]) -> list[tuple[acb, int]]:
    """Return the eigenvalues at a point as balls, with their multiplicities."""
    rows = [[value_at(e, point) for e in row] for row in matrix.to_list()]
    values = fmpq_mat([[fmpq(v.numerator, v.denominator) for v in row] for row in rows])
    return values.charpoly().numer().complex_roots()


MAMMILLARY = (
    {(0, 1): "k12", (1, 0): "k21", (0, 2): "k13", (2, 0): "k31", (0, 3): "k14", (3, 0): "k41"},
    {0: "k10"},
)
CATENARY = (
    {(0, 1): "k12", (1, 0): "k21", (1, 2): "k23", (2, 1): "k32", (2, 3): "k34", (3, 2): "k43"},
    {0: "k10"},
)


def system(rates: Weights, losses: Mapping[int, str]) -> tuple[ParameterDomain, FieldMatrix]:
    domain = positive(" ".join(dict.fromkeys([*rates.values(), *losses.values()])))
    return domain, compartments(rates, losses, domain)


@pytest.mark.parametrize("order", [2, 3, 4])
def test_catenary_compartments_have_negative_simple_rates(order: int) -> None:
    rates = {pair: name for pair, name in CATENARY[0].items() if max(pair) < order}
    domain, matrix = system(rates, CATENARY[1])
    (found,) = factors_of(domain, matrix)
    assert found is not None
    assert found.negative
    assert found.polynomial == domain.field.polynomial(matrix.charpoly())
    assert (found.simple.graph, found.simple.exceptions) == ("path", ())


def test_mammillary_compartments_are_simple_unless_three_leaves_are_equal() -> None:
    domain, matrix = system(*MAMMILLARY)
    (found,) = factors_of(domain, matrix)
    k21, k31, k41 = (domain.field.symbol(n) for n in ("k21", "k31", "k41"))
    assert found is not None
    assert found.negative
    assert (found.simple.graph, found.simple.centre) == ("star", 0)
    assert found.simple.exceptions == ((k31 - k21, k41 - k21),)
    apart = domain.narrowed(Comparison(k31 - k41, "!="))
    assert factors_of(apart, matrix)[0].simple.exceptions == ()


def test_leaves_that_are_always_equal_count_once_for_the_other_roots() -> None:
    rates = {pair: "k" if pair[1] == 0 else name for pair, name in MAMMILLARY[0].items()}
    domain, matrix = system(rates, MAMMILLARY[1])
    (found,) = factors_of(domain, matrix)
    assert found is not None
    assert found.polynomial.degree() == 2
    assert found.negative
    assert found.simple.exceptions == ()
    assert simple_spectrum(matrix, domain) is None


def test_flow_in_one_direction_around_a_ring_proves_no_real_rates() -> None:
    domain, matrix = system({(0, 1): "a", (1, 2): "b", (2, 0): "c"}, {0: "d"})
    (found,) = factors_of(domain, matrix)
    assert found is not None
    assert (found.real, found.simple, found.decays, found.negative) == (None, None, True, False)
    assert found.stable.along == "columns"


def test_a_factor_is_proved_by_its_own_block() -> None:
    """A ring in one direction feeds a chain that exchanges; only the chain is symmetric."""
    ring = {(0, 1): "a", (1, 2): "b", (2, 0): "c"}
    chain = {(3, 4): "f", (4, 3): "g", (4, 5): "h", (5, 4): "i"}
    domain, matrix = system({**ring, (2, 3): "e", **chain}, {5: "j"})
    found = {f.places: f.negative for f in factors_of(domain, matrix) if f is not None}
    assert found == {(0, 1, 2): False, (3, 4, 5): True}


def test_a_tree_that_is_neither_path_nor_star_is_not_said_to_be_simple() -> None:
    rates = {(0, 1): "a", (1, 2): "b", (2, 3): "c", (1, 4): "d"}
    domain, matrix = system({**rates, **{pair[::-1]: n for pair, n in rates.items()}}, {0: "e"})
    assert real_spectrum(matrix, domain) is not None
    assert simple_spectrum(matrix, domain) is None


def test_a_closed_system_keeps_a_rate_of_zero() -> None:
    domain, matrix = system({(0, 1): "a", (1, 0): "b", (1, 2): "c", (2, 1): "d"}, {})
    (found,) = factors_of(domain, matrix)
    assert found is not None
    assert found.negative
    assert stable_spectrum(matrix, domain) is not None


def test_a_ring_is_symmetrisable_where_its_products_agree_both_ways() -> None:
    ring = {(0, 1): "a", (1, 0): "a", (1, 2): "b", (2, 1): "b", (2, 0): "c", (0, 2): "c"}
    domain, matrix = system(ring, {0: "d"})
    real = real_spectrum(matrix, domain)
    assert real is not None
    assert len(real.cycles) == 1
    assert real_spectrum(*reversed(system({**ring, (0, 2): "e"}, {0: "d"}))) is None


@pytest.mark.parametrize("count", [2, 3])
@pytest.mark.parametrize("walls", [1, 2])
def test_masses_and_springs_have_real_different_frequencies(count: int, walls: int) -> None:
    domain, matrix = chain_of_masses(count, walls)
    (found,) = factors_of(domain, matrix)
    assert found is not None
    assert found.squared
    assert found.negative
    assert found.places == tuple(range(count))
    assert found.simple.graph == "path"
    whole = domain.field.polynomial(matrix.charpoly()).to_list()
    assert whole[::2] == found.polynomial.to_list()
    assert not any(whole[1::2])
    for point in domain.sample(3, 5):
        squares = roots_of([value_at(c, point) for c in found.polynomial.to_list()])
        assert all(x.imag == 0 and x.real < 0 and times == 1 for x, times in squares)


def test_damping_leaves_nothing_proved() -> None:
    domain = positive("m c k")
    m, c, k = (domain.field.symbol(n) for n in domain.field.parameters)
    one = domain.field.domain.one
    matrix = domain.field.matrix([[one - one, one], [-k / m, -c / m]])
    assert factors_of(domain, matrix) == [None]


def test_a_flow_that_may_be_zero_leaves_the_rates_real() -> None:
    field = positive("a b c").field
    a, b, c = (field.symbol(n) for n in field.parameters)
    domain = ParameterDomain(field, tuple(Comparison(x, ">=") for x in (a, b, c)))
    matrix = field.matrix([[-a - b, c], [b, -c]])
    real = real_spectrum(matrix, domain)
    assert real is not None
    assert real.weights is None
    assert simple_spectrum(matrix, domain) is None


LIST_OF_EDGES = st.sampled_from(
    (
        ((0, 1), (1, 2)),
        ((0, 1), (0, 2), (0, 3)),
        ((0, 1), (1, 2), (2, 3)),
        ((0, 1), (1, 2), (2, 0)),
        ((0, 1), (1, 2), (2, 3), (3, 0)),
        ((0, 1), (1, 2), (2, 3), (1, 4)),
    )
)


@st.composite
def matrices(draw: st.DrawFn) -> tuple[ParameterDomain, FieldMatrix]:
    """A matrix on a graph, mostly symmetric up to a diagonal or outweighed by its own."""
    domain = positive("a b c")
    field = domain.field
    a, b, c = (field.symbol(n) for n in field.parameters)
    zero, one = field.domain.zero, field.domain.one
    edges = draw(LIST_OF_EDGES)
    n = 1 + max(map(max, edges))
    rows = [[zero] * n for _ in range(n)]
    values = st.sampled_from([a, b, 2 * a + c, b / c, a, b, -b, a - b])
    scales = [draw(st.sampled_from([one, a, one / c])) for _ in range(n)]
    defects = st.sampled_from([one] * 9 + [2 * one, -one, b])
    for i, j in edges:
        value = draw(values)
        rows[i][j] = value * scales[i]
        rows[j][i] = value * scales[j] * draw(defects)
    kept = draw(st.sampled_from(["rows", "columns", "nothing"]))
    for i in range(n):
        beside = rows[i] if kept == "rows" else [row[i] for row in rows]
        outweighed = zero if kept == "nothing" else sum(beside, zero)
        rows[i][i] = draw(st.sampled_from([zero, zero, -b, -a, a])) - outweighed
    return domain, field.matrix(rows)


@given(matrices())
def test_what_is_proved_of_a_matrix_holds_at_points(
    given_system: tuple[ParameterDomain, FieldMatrix],
) -> None:
    domain, matrix = given_system
    real, stable = real_spectrum(matrix, domain), stable_spectrum(matrix, domain)
    simple = simple_spectrum(matrix, domain)
    for point in domain.sample(3, 2):
        roots = roots_at(matrix, point)
        if real is not None:
            assert all(root.imag == 0 for root, _ in roots)
        if stable is not None:
            assert all(root == 0 or root.real < 0 for root, _ in roots)
        if simple is not None and not exceptional(simple.exceptions, point):
            assert all(multiplicity == 1 for _, multiplicity in roots)
    if real is not None and real.weights is not None:
        rows, w = matrix.to_list(), real.weights
        assert all(domain.sign_of(x).sign == "positive" for x in w)
        for i, j in edges_of(rows):
            assert rows[i][j] * w[j] == rows[j][i] * w[i]


@given(matrices())
def test_what_is_proved_of_a_factor_holds_at_points(
    given_system: tuple[ParameterDomain, FieldMatrix],
) -> None:
    domain, matrix = given_system
    for found in factors_of(domain, matrix):
        if found is None:
            continue
        for point in domain.sample(2, 3):
            values = [value_at(c, point) for c in found.polynomial.to_list()]
            roots = roots_of(values)
            if found.real is not None:
                assert all(root.imag == 0 for root, _ in roots)
            if found.decays:
                assert all(root.real < 0 for root, _ in roots)
            if found.simple is not None and not exceptional(found.simple.exceptions, point):
                assert all(multiplicity == 1 for _, multiplicity in roots)


def roots_of(coefficients: Sequence[Fraction]) -> list[tuple[acb, int]]:
    """Return the roots of a monic polynomial, highest coefficient first, by its companion."""
    n = len(coefficients) - 1
    rows = [[fmpq(0)] * n for _ in range(n)]
    for i in range(n - 1):
        rows[i][i + 1] = fmpq(1)
    for j, c in enumerate(reversed(coefficients[1:])):
        rows[n - 1][j] = -fmpq(c.numerator, c.denominator)
    return fmpq_mat(rows).charpoly().numer().complex_roots()


def exceptional(exceptions: Sequence[Sequence[object]], point: Mapping[str, Fraction]) -> bool:
    return any(all(value_at(d, point) == 0 for d in differences) for differences in exceptions)


def test_three_equal_leaves_do_make_a_repeated_rate() -> None:
    domain, matrix = system(*MAMMILLARY)
    (point,) = domain.sample(1, 4)
    point |= dict.fromkeys(("k21", "k31", "k41"), Fraction(2))
    simple = simple_spectrum(matrix, domain)
    assert exceptional(simple.exceptions, point)
    assert sorted(multiplicity for _, multiplicity in roots_at(matrix, point)) == [1, 1, 2]


@given(st.integers(1, 7), st.data())
def test_a_forest_and_its_cycles_make_up_a_graph(n: int, data: st.DataObject) -> None:
    pairs = [(i, j) for i in range(n) for j in range(i + 1, n)]
    edges = [pair for pair in pairs if data.draw(st.booleans())]
    tree, cycles = spanning_tree(n, edges), cycles_beside(n, edges)
    assert len(tree) + len(cycles) == len(edges)
    known = {frozenset(e) for e in edges}
    assert {frozenset(e) for e in tree} <= known
    for cycle in cycles:
        assert len(set(cycle)) == len(cycle) >= 3
        assert all(frozenset(e) in known for e in [*pairwise(cycle), (cycle[-1], cycle[0])])
    sides = sides_of(n, edges)
    assert (sides is None) == any(len(cycle) % 2 for cycle in cycles)
    if sides is not None:
        assert sorted([*sides[0], *sides[1]]) == list(range(n))
        assert all((i in sides[0]) != (j in sides[0]) for i, j in edges)
