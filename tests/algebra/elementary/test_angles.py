"""Angles and logarithms: exact where they meet roots, and compared where they depend."""

from __future__ import annotations

from fractions import Fraction

import pytest

from closedform.algebra.elementary import ElementaryField, NotElementaryError


@pytest.fixture
def field() -> ElementaryField:
    return ElementaryField(("a", "b"), lambda p: 1 if all(c > 0 for c in p.values()) else None)


@pytest.mark.parametrize("below", [1, 2, 3, 4, 5, 6, 8, 10, 12, 15, 20, 24, 30, 60])
def test_turns_close(field: ElementaryField, below: int) -> None:
    turn = field.exp(field.i * field.pi * Fraction(1, below))
    assert turn**below == -1
    assert turn ** (2 * below - 1) * turn == 1
    assert turn != 1


def test_known_cosines(field: ElementaryField) -> None:
    assert field.cos(field.pi / 12) == (field.sqrt(6) + field.sqrt(2)) / 4
    assert field.cos(field.pi / 5) == (1 + field.sqrt(5)) / 4
    assert field.sin(7 * field.pi / 6) == Fraction(-1, 2)
    with pytest.raises(NotElementaryError, match="pi/7"):
        field.cos(field.pi / 7)


def test_arctangents_of_numbers_add_up(field: ElementaryField) -> None:
    assert field.atan(Fraction(1, 2)) + field.atan(Fraction(1, 3)) == field.pi / 4
    assert 4 * field.atan(Fraction(1, 5)) - field.atan(Fraction(1, 239)) == field.pi / 4
    assert field.atan(2) == field.pi / 2 - field.atan(Fraction(1, 2))
    assert field.atan(field.sqrt(3)) == field.pi / 3
    assert field.atan(-field.sqrt(2)) == field.atan(1 / field.sqrt(2)) - field.pi / 2
    assert field.atan(2 * field.sqrt(2)) == 2 * field.atan(1 / field.sqrt(2))
    assert field.atan(2) != field.atan(3)


def test_angles_know_their_quadrant(field: ElementaryField) -> None:
    assert field.atan2(-1, -1) == -3 * field.pi / 4
    assert field.atan2(0, -2) == field.pi
    assert field.atan2(4, -3) == field.pi - field.atan(Fraction(4, 3))
    assert field.arg(field.i - 1) == 3 * field.pi / 4
    with pytest.raises(ZeroDivisionError):
        field.atan2(0, 0)


def test_amplitude_and_phase_with_names(field: ElementaryField) -> None:
    a, b, t = field.name("a"), field.name("b"), field.t
    length = field.sqrt(a * a + b * b)
    expected = a * field.cos(3 * t) + b * field.sin(3 * t)
    assert length * field.cos(3 * t - field.atan2(b, a)) == expected
    assert length * field.sin(3 * t + field.atan2(a, b)) == expected
    assert length * field.sin(3 * t + field.atan2(b, a)) != expected
    assert field.atan(a / b) + field.atan(b / a) == field.pi / 2


def test_half_angles(field: ElementaryField) -> None:
    assert field.cos(field.atan(Fraction(4, 3)) / 2) == 2 / field.sqrt(5)
    assert field.asin(Fraction(3, 5)) + field.acos(Fraction(3, 5)) == field.pi / 2
    assert field.tan(field.asin(Fraction(5, 13))) == Fraction(5, 12)


def test_logarithms_come_apart(field: ElementaryField) -> None:
    a, t = field.name("a"), field.t
    assert field.ln(12) == 2 * field.ln(2) + field.ln(3)
    assert field.ln(a / 4) == field.ln(a) - 2 * field.ln(2)
    assert field.exp(field.ln(2) * t).at(3) == 8
    assert field.exp(-field.ln(2) * t / 5).at(5) == Fraction(1, 2)
    assert field.exp(field.ln(a) / 2) == field.sqrt(a)
    assert field.ln(-1) == field.i * field.pi
    assert field.ln(field.exp(-3 * t)) == -3 * t
    assert field.ln(field.sqrt(2)) == field.ln(2) / 2
    with pytest.raises(ZeroDivisionError):
        field.ln(0)


def test_logarithms_of_units_are_compared(field: ElementaryField) -> None:
    golden = (1 + field.sqrt(5)) / 2
    assert field.ln(golden + 1) == 2 * field.ln(golden)
    assert field.asinh(Fraction(1, 2)) == field.ln(golden)
    assert field.acosh(Fraction(3, 2)) == 2 * field.ln(golden)
    assert field.atanh(Fraction(1, 3)) == field.ln(2) / 2


def test_powers_with_odd_roots_come_together(field: ElementaryField) -> None:
    third = field.exp(field.ln(2) / 3)
    assert third**3 == 2
    assert third * field.exp(field.ln(2) / 6) == field.sqrt(2)


def test_numbers_that_no_theorem_parts_are_parted_by_balls(field: ElementaryField) -> None:
    assert field.exp(field.pi) - field.pi != 20
    assert field.ln(2) * field.ln(3) != field.pi / 4
    assert (field.exp(field.pi) - field.pi - 20).sign() == -1


def test_signs_of_constants(field: ElementaryField) -> None:
    assert (field.sqrt(2) - Fraction(7, 5)).sign() == 1
    assert (field.exp(-1) - Fraction(1, 2)).sign() == -1
    assert (field.name("a") + field.sqrt(2)).sign() == 1
    assert (field.name("a") - 1).sign() is None
    assert field.zero.sign() == 0
