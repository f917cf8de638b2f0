"""Truths of models with parameters: cases, signs, points, values put in."""

from __future__ import annotations

from fractions import Fraction
from itertools import product

import pytest
from flint import arb, ctx

from closedform.checking.truth import Truth
from closedform.checking.truths.errors import NoValueError
from closedform.checking.truths.put_in import substituted
from closedform.checking.truths.solved import truths_of
from closedform.model.building import system
from closedform.notation.written.plain_form import plain_written
from tests.checking.truths.series import BITS, check, constant, names_at, same, series


def oscillator(**values: object) -> tuple[Truth, ...]:
    positive = {"m": "positive", "c": "positive", "k": "positive"}
    parameters = {
        name: {"assume": assume, **({"value": values[name]} if values else {})}
        for name, assume in positive.items()
    }
    return truths_of(
        system([[0, 1], ["-k/m", "-c/m"]], initial=[1, 0], states=["x", "v"], parameters=parameters)
    )


def chain(rate: str = "lamda") -> Truth:
    rates = {name: {"assume": "positive"} for name in (rate, "mu")}
    (truth,) = truths_of(
        system(
            [[f"-{rate}", "mu"], [rate, "-mu"]],
            initial=[1, 0],
            states=["up", "down"],
            parameters=rates,
        )
    )
    return truth


def test_the_oscillator_has_three_cases_the_double_root_last() -> None:
    truths = oscillator()
    assert [t.condition for t in truths] == ["4*m*k > c^2", "4*m*k < c^2", "4*m*k == c^2"]
    assert [len(t.equations) for t in truths] == [0, 0, 1]
    for truth in truths:
        assert len(truth.samples) >= 3
        assert len({tuple(map(plain_written, s.values())) for s in truth.samples}) >= 3
        assert truth.values is None
        check(truth)


def test_a_double_root_has_one_chain() -> None:
    last = oscillator()[-1]
    (eigenvalue,) = last.eigenvalues
    assert (eigenvalue.algebraic, eigenvalue.geometric, eigenvalue.index) == (2, 1, 2)


def test_signs_are_those_at_the_samples() -> None:
    """All polynomials in m, c, k with few terms; those of the discriminant are told."""
    wanted = [1, -1, 0]
    for truth, expected in zip(oscillator(), wanted, strict=True):
        found = truth.sign({(1, 0, 1): 4, (0, 2, 0): -1})
        assert found == expected
        told = 0
        for a, b, c in product((-2, 0, 1), repeat=3):
            polynomial = {(1, 0, 1): a, (0, 2, 0): Fraction(b, 3), (1, 0, 0): c}
            sign = truth.sign(polynomial)
            told += sign is not None
            for sample in truth.samples:
                values = [Fraction(plain_written(sample[n])) for n in truth.parameters]
                total = sum(
                    (
                        weight * values[0] ** e[0] * values[1] ** e[1] * values[2] ** e[2]
                        for e, weight in polynomial.items()
                    ),
                    Fraction(0),
                )
                assert sign is None or sign == (total > 0) - (total < 0)
        assert told > 5


def test_values_belong_to_one_case() -> None:
    truths = oscillator(m=2, c=8, k=200)
    assert [t.values is not None for t in truths] == [True, False, False]
    truths = oscillator(m=1, c=2, k=1)
    assert [t.values is not None for t in truths] == [False, False, True]


@pytest.mark.parametrize("names", [{"k"}, {"m", "c"}, {"m", "c", "k"}, {"m", "other"}])
@pytest.mark.parametrize(("m", "c", "k"), [(2, 8, 200), (1, 2, 1), (1, "5/2", 1)])
def test_values_put_in_leave_the_same_functions(names: set[str], m: int, c: object, k: int) -> None:
    (truth,) = [t for t in oscillator(m=m, c=c, k=k) if t.values is not None]
    part = substituted(truth, frozenset(names))
    assert part.parameters == tuple(n for n in truth.parameters if n not in names)
    assert not {n for s in part.samples for n in s} & names
    check(part)
    assert truth.values is not None
    assert part.values is not None
    with ctx.workprec(BITS):
        before = names_at(truth, truth.values, arb("0.3"))
        after = names_at(part, part.values, arb("0.3"))
        for name, pieces in truth.solution.items():
            put = part.solution[name][0].formula
            assert same(series(pieces[0].formula, before)[0], series(put, after)[0])


def test_signs_and_equations_follow_what_is_put_in() -> None:
    (truth,) = [t for t in oscillator(m=1, c=2, k=1) if t.values is not None]
    part = substituted(truth, frozenset({"k"}))
    assert part.sign({(1, 0): 4, (0, 2): -1}) == 0
    assert [(n, plain_written(f)) for n, f in part.equations] == [("m", "c^2/4")]


def test_a_square_root_is_put_in_without_signs() -> None:
    (truth,) = [t for t in oscillator(m="sqrt(2)", c=1, k=3) if t.values is not None]
    part = substituted(truth, frozenset({"m"}))
    assert part.sign({(0, 1): 1}) is None
    assert [{n: plain_written(v) for n, v in s.items()} for s in part.samples] == [
        {"c": "1", "k": "3"}
    ]
    check(part)


def test_no_values_are_put_in_where_there_are_none() -> None:
    truth = oscillator()[0]
    assert substituted(truth, frozenset()) is truth
    with pytest.raises(NoValueError, match="no value for m in the case"):
        substituted(truth, frozenset({"m"}))


def test_a_rate_lambda_is_not_the_unknown_of_the_polynomial() -> None:
    truth = chain("lambda")
    check(truth)
    assert plain_written(truth.characteristic) == "s^2 + (lambda + mu)*s"


def test_the_chain_tends_to_its_stationary_state() -> None:
    truth = chain()
    check(truth)
    told = {name: plain_written(tree) for name, tree in truth.steady.items()}
    assert told == {"up": "mu/(lamda + mu)", "down": "lamda/(lamda + mu)"}
    assert {plain_written(e.value) for e in truth.eigenvalues if e.value is not None} == {
        "0",
        "-lamda - mu",
    }


def test_restated_parameters_and_abbreviations_are_quantities() -> None:
    """What the model has names for is told in its parameters, in the order of the file."""
    positive = {n: {"assume": "positive"} for n in ("m", "c", "k", "omega_n", "zeta")}
    (truth,) = truths_of(
        system(
            [[0, 1], ["-k/m", "-c/m"]],
            initial=[1, 0],
            parameters=positive,
            substitute={"k": "m*omega_n^2", "c": "2*zeta*m*omega_n"},
            abbreviations={"delta": "zeta*omega_n"},
            conditions=["zeta < 1"],
        )
    )
    check(truth)
    told = {name: f if f is None else plain_written(f) for name, f in truth.quantities}
    assert list(told)[:3] == ["k", "c", "delta"]
    assert told["k"] == "m*omega_n^2"
    assert truth.parameters == ("m", "omega_n", "zeta")


def test_named_roots_have_balls_at_any_values() -> None:
    """A chain of three tanks that exchange: its cubic has real roots, told as names."""
    rates = {n: {"assume": "positive", "value": v} for n, v in (("a", 1), ("b", 2), ("c", 3))}
    (truth,) = truths_of(
        system(
            [["-a - c", "b", 0], ["a", "-b - a", "c"], [0, "a", "-c - b"]],
            initial=[1, 0, 0],
            parameters=rates,
        )
    )
    check(truth)
    names = [name for name, formula in truth.quantities if formula is None]
    assert names
    assert len([e for e in truth.eigenvalues if e.value is None and e.named]) == 3
    assert truth.values is not None
    with ctx.workprec(BITS):
        assert set(truth.enclosures()) == set(truth.enclosures_at(truth.values)) == set(names)
        names_there = names_at(truth, truth.values, arb(0))
        for z in (arb(1), arb(-2)):
            product = arb(1)
            for e in truth.eigenvalues:
                assert e.ball is not None
                real, imaginary = e.ball()
                assert imaginary == 0
                product = product * (z - real)
            whole = series(truth.characteristic, {**names_there, "lambda": constant(z)})[0]
            assert same(product, whole)
