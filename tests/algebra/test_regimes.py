"""Regimes say how the roots of a factor lie: at every point that their conditions let in."""

from __future__ import annotations

from fractions import Fraction

import pytest
from flint import acb, fmpq, fmpq_poly
from hypothesis import given
from hypothesis import strategies as st

from closedform.algebra.domain import Comparison, ParameterDomain
from closedform.algebra.factor_structure import structure_of_factor
from closedform.algebra.parametric_spectrum import parametric_spectrum
from closedform.algebra.regimes import (
    Regime,
    RootsUnknownError,
    regimes_of,
    require_known_roots,
)
from closedform.algebra.sample import holds_at, value_at
from closedform.algebra.spectrum import Factor
from tests.rational_elements import element
from tests.sign_checks import field_of, positive

Point = dict[str, Fraction]
VALUES = st.fractions(min_value=-3, max_value=3, max_denominator=2)


def companion(domain: ParameterDomain, *coefficients: str) -> Factor:
    """The factor with these coefficients, highest first without the 1."""
    field, n = domain.field, len(coefficients)
    rows = [["1" if k == i + 1 else "0" for k in range(n)] for i in range(n - 1)]
    rows.append([f"-({c})" for c in reversed(coefficients)])
    matrix = field.matrix([[element(field, e) for e in row] for row in rows])
    (factor,) = parametric_spectrum(field, matrix).factors
    return factor


def regimes(domain: ParameterDomain, *coefficients: str) -> tuple[Regime, ...]:
    return regimes_of(domain.field, companion(domain, *coefficients), None, domain)


def roots_at(factor: Factor, point: Point) -> list[acb]:
    """The roots at a point, by real and then imaginary part, without multiplicities."""
    values = [value_at(c, point) for c in reversed(factor.polynomial)]
    numbers = [fmpq(v.numerator, v.denominator) for v in values]
    found = [root for root, _ in fmpq_poly(numbers).numer().complex_roots()]
    return sorted(found, key=lambda z: (float(z.real.mid()), float(z.imag.mid())))


def kind_at(factor: Factor, point: Point) -> str:
    """How the roots lie at a point, from the roots alone."""
    roots = roots_at(factor, point)
    real = [z for z in roots if z.imag == 0]
    match factor.degree, len(roots), len(real):
        case 2, 1, _:
            return "double"
        case 2, 2, count:
            return "hyperbolic" if count else "circular"
        case 3, 3, 3:
            return "real roots"
        case 3, 3, 1:
            below = sum(bool(z.real < real[0].real) for z in roots)
            above = sum(bool(z.real > real[0].real) for z in roots)
            return f"root and pair, {(2 + below - above) // 2 + 1}"
        case 4, 4, 2:
            return "squares, circular hyperbolic"
        case 4, 4, 4:
            return "squares, hyperbolic hyperbolic"
        case 4, 4, 0:
            imaginary = all(z.real.contains(0) for z in roots)
            return "squares, circular circular" if imaginary else "quartet"
    return "on an exceptional set"


def told(regime: Regime) -> str:
    match regime.kind:
        case "root and pair":
            return f"root and pair, {regime.which}"
        case "squares":
            return f"squares, {' '.join(regime.signs)}"
        case "decaying":
            return "hyperbolic"
        case kind:
            return kind


@pytest.mark.parametrize(
    "coefficients", [("b", "c"), ("a", "b", "c"), ("0", "b", "0", "c")], ids=len
)
@given(st.fixed_dictionaries(dict.fromkeys("abc", VALUES)))
def test_the_one_regime_that_applies_says_how_the_roots_lie(
    coefficients: tuple[str, ...], point: Point
) -> None:
    domain = ParameterDomain(field_of("a b c"), ())
    factor = companion(domain, *coefficients)
    expected = kind_at(factor, point)
    applying = [
        told(regime)
        for regime in regimes(domain, *coefficients)
        if all(holds_at(c, point) for c in regime.conditions)
    ]
    if expected != "on an exceptional set":
        assert applying == [expected]


def test_a_pair_has_three_regimes_light_damping_first() -> None:
    domain = positive("m c k")
    found = regimes(domain, "c/m", "k/m")
    assert [r.kind for r in found] == ["circular", "double", "hyperbolic"]
    assert [len(r.conditions) for r in found] == [1, 1, 1]
    assert [r.conditions[0].relation for r in found] == [">", "=", ">"]


def test_a_condition_of_the_domain_leaves_one_regime() -> None:
    domain = positive("m c k")
    gap = element(domain.field, "4*m*k - c^2")
    light = domain.narrowed(Comparison(gap, ">"))
    assert regimes(light, "c/m", "k/m") == (Regime("circular"),)
    critical = domain.narrowed(Comparison(gap, "="))
    assert regimes(critical, "c/m", "k/m") == (Regime("double"),)


def test_heavy_damping_with_positive_coefficients_is_decay() -> None:
    domain = positive("m c k")
    heavy = domain.narrowed(Comparison(element(domain.field, "c^2 - 4*m*k"), ">"))
    assert regimes(heavy, "c/m", "k/m") == (Regime("decaying"),)
    assert regimes(heavy, "-c/m", "k/m") == (Regime("hyperbolic"),)


def test_an_exchange_always_decays() -> None:
    domain = positive("k10 k12 k21")
    assert regimes(domain, "k10 + k12 + k21", "k10*k21") == (Regime("decaying"),)


def test_a_single_root_is_its_own_regime() -> None:
    domain = positive("a")
    assert regimes(domain, "a") == (Regime("single"),)


def test_structure_settles_three_compartments() -> None:
    domain = positive("a b c d e")
    field = domain.field
    rows = [["-(a + b + c)", "d", "e"], ["b", "-d", "0"], ["c", "0", "-e"]]
    matrix = field.matrix([[element(field, x) for x in row] for row in rows])
    (factor,) = parametric_spectrum(field, matrix).factors
    structure = structure_of_factor(field, matrix, factor.p, domain)
    assert regimes_of(field, factor, structure, domain) == (Regime("decaying"),)


@pytest.mark.parametrize(
    "coefficients", [("0", "0", "a", "b"), ("a", "b", "c", "a"), ("a", "0", "0", "b", "c")]
)
def test_a_factor_without_structure_is_refused_early_and_late(
    coefficients: tuple[str, ...],
) -> None:
    domain = positive("a b c")
    factor = companion(domain, *coefficients)
    for refuse in (
        lambda: regimes_of(domain.field, factor, None, domain),
        lambda: require_known_roots(domain.field, factor, None),
    ):
        with pytest.raises(RootsUnknownError) as caught:
            refuse()
        assert caught.value.degree == len(coefficients)


@pytest.mark.parametrize(
    "coefficients", [("a",), ("b", "c"), ("a", "b", "c"), ("0", "b", "0", "c")]
)
def test_what_is_required_to_be_known_is_what_has_regimes(coefficients: tuple[str, ...]) -> None:
    domain = positive("a b c")
    require_known_roots(domain.field, companion(domain, *coefficients), None)
    assert regimes(domain, *coefficients)
