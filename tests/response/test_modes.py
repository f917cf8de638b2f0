"""Modes are real functions that follow from the roots, slowest first."""

from __future__ import annotations

import itertools
from fractions import Fraction
from typing import Any

import pytest
from flint import acb, arb, ctx
from hypothesis import given, settings
from hypothesis import strategies as st

import closedform
from closedform.algebra.enclosure import ball_of
from closedform.algebra.field import BaseField
from closedform.algebra.roots import root_set
from closedform.algebra.spectrum import Factor
from closedform.algebra.surds import SurdSum
from closedform.response.modes import Mode, modes_of
from closedform.response.names import NameBook, constant_values
from tests.exact import value_of
from tests.strategies import irreducibles, shifted

Q = BaseField()


def modes(*p: Any, name_surds: bool = False) -> tuple[tuple[Mode, ...], NameBook]:
    polynomial = Q.polynomial([Q.scalar(c) for c in p])
    book = NameBook(frozenset())
    factor = Factor(polynomial, (1,), root_set(Q, polynomial))
    return modes_of(factor, book, first=1, name_surds=name_surds), book


def surd(d: int, c: Fraction | int = 1) -> SurdSum:
    return SurdSum.of({d: Fraction(c)})


@pytest.mark.parametrize(
    ("p", "kind", "rate", "frequency"),
    [
        ((1, 3), "real", surd(1, -3), None),
        ((1, 2, 5), "circular", surd(1, -1), surd(1, 2)),
        ((1, 2, 4), "circular", surd(1, -1), surd(3)),
        ((1, 0, 2), "circular", SurdSum(()), surd(2)),
        ((1, 1, 5), "circular", surd(1, Fraction(-1, 2)), surd(19, Fraction(1, 2))),
        ((1, -1, -1), "hyperbolic", surd(1, Fraction(1, 2)), surd(5, Fraction(1, 2))),
        ((1, 4, 2), "hyperbolic", surd(1, -2), surd(2)),
    ],
)
def test_modes_of_degree_one_and_two(
    p: tuple[int, ...], kind: str, rate: SurdSum, frequency: SurdSum | None
) -> None:
    (mode,), book = modes(*p)
    assert (mode.kind, mode.rate, mode.frequency) == (kind, rate, frequency)
    assert book.constants() == ()


def test_surd_frequencies_are_named_where_asked() -> None:
    (mode,), book = modes(1, 2, 4, name_surds=True)
    assert mode.frequency == "omega_1"
    (constant,) = book.constants()
    with ctx.workprec(100):
        assert constant.definition.enclosure().overlaps(arb(3).sqrt())
    (mode,), _ = modes(1, 4, 2, name_surds=True)
    assert mode.frequency == "kappa_1"
    (mode,), _ = modes(1, 2, 5, name_surds=True)
    assert mode.frequency == surd(1, 2)


def value(number: SurdSum | str | None, book: NameBook) -> arb:
    if number is None:
        return arb(0)
    if isinstance(number, SurdSum):
        return ball_of(number)
    return constant_values(book.constants())[number]


def roots_of(mode: Mode, book: NameBook) -> list[acb]:
    """The one or two roots that a mode stands for."""
    rate, frequency = value(mode.rate, book), value(mode.frequency, book)
    if mode.kind == "real":
        return [acb(rate)]
    if mode.kind == "circular":
        return [acb(rate, frequency), acb(rate, -frequency)]
    return [acb(rate + frequency), acb(rate - frequency)]


@given(st.integers(1, 5).flatmap(irreducibles), st.booleans())
@settings(max_examples=60)
def test_modes_stand_for_each_root_once(p: tuple[Fraction, ...], name_surds: bool) -> None:  # noqa: FBT001
    found, book = modes(*p, name_surds=name_surds)
    with ctx.workprec(300):
        roots = [z for mode in found for z in roots_of(mode, book)]
        assert len(roots) == len(p) - 1
        for z in roots:
            total = acb(0)
            for c in p:
                total = total * z + arb(c.numerator) / c.denominator
            assert total.contains(0)
            assert sum(z.overlaps(w) for w in roots) == 1
        for mode in found:
            own = mode.factor.roots.enclosures()[mode.which - 1]
            assert own.overlaps(roots_of(mode, book)[0])
            assert not own.imag < 0


@pytest.mark.parametrize(
    "p",
    [
        (1, 0, -3, 1),
        (1, 0, 0, -1, -1),
        (1, 0, 0, 0, -1, -1),
        (1, 0, 6, 0, 9, 0, 3),
        shifted((1, 0, 4, 0, 2), -1),
        (1, 0, -10, 0, 1),
    ],
    ids=str,
)
def test_modes_come_slowest_first_then_by_frequency(p: tuple[Any, ...]) -> None:
    found, book = modes(*p)
    with ctx.workprec(200):
        leading = [roots_of(mode, book)[0] for mode in found]
        for one, two in itertools.pairwise(leading):
            if found[0].factor.roots.form == "even":
                centre = Q.enclose(found[0].factor.roots.centre)
                assert abs(one - centre) < abs(two - centre)
            else:
                assert one.real > two.real or (one.real.overlaps(two.real) and one.imag < two.imag)


@pytest.mark.parametrize(
    ("p", "kinds"),
    [
        ((1, 0, 4, 0, 2), ["circular", "circular"]),
        ((1, 0, -10, 0, 1), ["hyperbolic", "hyperbolic"]),
        ((1, 0, -2, 0, -1), ["circular", "hyperbolic"]),
        ((1, 0, 6, 0, 9, 0, 3), ["circular"] * 3),
        ((1, 0, -1, -1), ["real", "circular"]),
        ((1, 0, -3, 1), ["real"] * 3),
    ],
    ids=str,
)
def test_kinds_of_modes(p: tuple[int, ...], kinds: list[str]) -> None:
    found, _ = modes(*p)
    assert [mode.kind for mode in found] == kinds


def even(power: int) -> tuple[Any, ...]:
    """Three undamped modes with omega^2 of the size 10^power."""
    w = Fraction(10) ** power
    return (1, 0, 6 * w, 0, 9 * w * w, 0, 3 * w**3)


@pytest.mark.parametrize(
    "p",
    [
        even(60),
        even(120),
        even(-80),
        (1, 0, 5 * Fraction(10) ** 60, 0, 5 * Fraction(10) ** 120),
        (1, 0, 2, 0, 1 - Fraction(2, 10**120)),  # mu = -1 ± 1e-60 sqrt(2)
        (1, 0, -2, 0, 1 - Fraction(2, 10**120)),
        (1, 0, 2 * 10**31, 0, 10**62 - (10**30 + 57) * (10**31 + 33)),
        (1, 0, -2 * 10**31, 0, 10**62 - (10**30 + 57) * (10**31 + 33)),
    ],
    ids=["huge", "larger", "tiny", "quartic", "close", "close real", "unknown", "unknown real"],
)
def test_modes_of_any_size_and_closeness_stand_for_each_root_once(p: tuple[Any, ...]) -> None:
    found, book = modes(*p)
    with ctx.workprec(1500):
        own = found[0].factor.roots.enclosures()
        roots = [z for mode in found for z in roots_of(mode, book)]
        assert [sum(z.overlaps(w) for w in own) for z in roots] == [1] * len(roots)
        assert [sum(z.overlaps(w) for z in roots) for w in own] == [1] * len(own)
        for mode in found:
            assert own[mode.which - 1].overlaps(roots_of(mode, book)[0])


@pytest.mark.parametrize(
    "rows",
    [
        [[0, 1], ["-39.478417604", "-0.0123456789"]],
        [[0, 1], [-(10**30 + 57), 0]],
        [[0, 1], [-(10**30 + 57) * (10**31 + 33), 0]],
        [[0, 1, 0, 0], ["-123.456789", 0, "61.7283945", 0], [0, 0, 0, 1], [7, 0, "-98.7654321", 0]],
        [["-1e-6", "1e3", 0], ["1e-6", "-1e3-1e-9", "1e2"], [0, "1e-9", "-1e2"]],
        [[10**100 + 267, 3], [7, -(10**99) + 1]],
        [["sqrt(1000000007)", "sqrt(1000000009)"], [0, 1]],
    ],
    ids=["oscillator", "prime", "unknown", "masses", "rates", "100 digits", "two roots"],
)
def test_models_of_many_digits_are_written_out(rows: list[list[object]]) -> None:
    response = closedform.respond(closedform.system(rows, initial=[1] * len(rows)))
    for t in (Fraction(1, 10**99), Fraction(1, 10**3)):
        with ctx.workprec(1200):
            names = {"t": ball_of(t), **constant_values(response.closed_forms.constants)}
            known = response.state.enclosure(ball_of(t))
            for formula, row in zip(response.solution, range(len(rows)), strict=True):
                assert value_of(formula, names).overlaps(known[row, 0])
