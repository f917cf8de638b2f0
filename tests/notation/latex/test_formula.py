from __future__ import annotations

from fractions import Fraction

import pytest

from closedform.derivation.step import IMAGINARY_UNIT
from closedform.notation.expression import (
    Call,
    Expression,
    Name,
    Negation,
    Number,
    Power,
    Quotient,
    Sum,
    number,
)
from closedform.notation.latex.box import Style
from closedform.notation.latex.formula import factors_of, formula, signed, terms_of
from tests.document.making import T, add, exp, neg, prod, q, root

DISPLAYED = [
    (q(3), "3"),
    (q("-3/2"), r"-\frac{3}{2}"),
    (exp(-1), r"\mathrm{e}^{-t}"),
    (exp(-2), r"\mathrm{e}^{-2t}"),
    (Call("exp", neg(prod("1/2", T))), r"\mathrm{e}^{-t/2}"),
    (Call("exp", prod("3/2", "omega", T)), r"\mathrm{e}^{3\omega t/2}"),
    (Call("exp", Quotient(neg(T), q("tau"))), r"\mathrm{e}^{-t/\tau}"),
    (Call("exp", neg(Quotient(T, add("a", "b")))), r"\mathrm{e}^{-t/(a + b)}"),
    (Call("exp", Quotient(add("a", "b"), q(2))), r"\mathrm{e}^{(a + b)/2}"),
    (add("a", neg("b")), "a - b"),
    (add(neg("a"), "b"), "-a + b"),
    (add("a", neg(add("b", neg("c")))), "a - (b - c)"),
    (add("a", add("b", "c")), "a + b + c"),
    (add("a", neg(neg("b"))), "a + b"),
    (add("a", prod(neg("b"), "c")), "a - b c"),
    (neg(add("a", "b")), "-(a + b)"),
    (prod(1, "x"), "x"),
    (prod(1, 1), "1"),
    (neg(prod(1, "x")), "-x"),
    (prod(2, "x"), "2x"),
    (prod(2, 3), r"2 \cdot 3"),
    (prod("x", 2), r"x \cdot 2"),
    (prod(2, "1/3"), r"2 \cdot \tfrac{1}{3}"),
    (prod(2, Power(q(2), T)), r"2 \cdot 2^{t}"),
    (prod(2, root(3)), r"2\sqrt{3}"),
    (prod("1/2", root(3)), r"\tfrac{1}{2}\sqrt{3}"),
    (prod("omega", "x"), r"\omega x"),
    (prod("k", add("a", "b")), r"k\,(a + b)"),
    (prod(2, add("a", "b")), "2(a + b)"),
    (prod("mass", "x"), r"\mathrm{mass}\,x"),
    (prod(2, "mass"), r"2\,\mathrm{mass}"),
    (prod(T, exp(-1)), r"t\,\mathrm{e}^{-t}"),
    (prod(3, exp(-1)), r"3\mathrm{e}^{-t}"),
    (prod(exp(-1), Call("cos", T)), r"\mathrm{e}^{-t}\cos t"),
    (prod(Call("cos", T), "x"), r"\cos(t)\,x"),
    (prod(Call("cos", T), Call("sin", T)), r"\cos t\sin t"),
    (Call("cos", prod(2, T)), r"\cos(2t)"),
    (Call("sinh", neg(T)), r"\sinh(-t)"),
    (Power(Call("sin", T), q(2)), r"\sin^{2}(t)"),
    (Power(Call("sin", T), neg(1)), r"(\sin(t))^{-1}"),
    (Power(q("x1"), q(2)), "x_{1}^{2}"),
    (Power(neg("x"), q(2)), "(-x)^{2}"),
    (Power(q("1/2"), q(2)), r"\left(\tfrac{1}{2}\right)^{2}"),
    (Power(Power(q("x"), q(2)), q(3)), "(x^{2})^{3}"),
    (Power(exp(-1), q(2)), r"(\mathrm{e}^{-t})^{2}"),
    (Power(add(Name("lambda"), 1), q(2)), r"(\lambda + 1)^{2}"),
    (Power(q("x"), q("1/2")), "x^{1/2}"),
    (Quotient(add("a", "b"), q("c")), r"\frac{a + b}{c}"),
    (Quotient(root(5), q(2)), r"\frac{\sqrt{5}}{2}"),
    (add("3/2", Quotient(neg("a"), q("b"))), r"\tfrac{3}{2} - \frac{a}{b}"),
    (prod("x", add(1, "1/2")), r"x\left(1 + \tfrac{1}{2}\right)"),
    (prod(IMAGINARY_UNIT, "omega"), r"\mathrm{i}\omega"),
    (root(add(1, root(2))), r"\sqrt{1 + \sqrt{2}}"),
    (prod("m", Name("x''")), r"m\ddot{x}"),
    (prod(2, Name("x1'")), r"2\dot{x}_{1}"),
    (prod("omega", Name("x'")), r"\omega\dot{x}"),
    (Power(Name("x'"), q(2)), r"\dot{x}^{2}"),
    (Power(Name("x_dot4"), q(2)), "(x^{(4)})^{2}"),
    (Call("step", T), r"\varepsilon(t)"),
    (Call("step", add(T, neg(2))), r"\varepsilon(t - 2)"),
    (Call("delta", add(T, neg("tau"))), r"\delta(t - \tau)"),
    (Call("u", add(T, neg(2))), "u(t - 2)"),
    (Call("u_1'", add(T, neg(2))), r"\dot{u}_{1}(t - 2)"),
    (Call("force", add(T, neg(2))), r"\mathrm{force}(t - 2)"),
    (prod(2, Call("step", T)), r"2\varepsilon(t)"),
    (prod(2, Call("force", neg(T))), r"2\,\mathrm{force}(-t)"),
    (prod("F0", Call("step", T)), r"F_{0}\,\varepsilon(t)"),
    (prod(Call("sin", T), Call("step", T)), r"\sin(t)\,\varepsilon(t)"),
    (prod(exp(-1), Call("step", T)), r"\mathrm{e}^{-t}\,\varepsilon(t)"),
    (prod(Call("u", neg(T)), "x"), r"u(-t)\,x"),
    (Power(Call("step", T), q(2)), r"(\varepsilon(t))^{2}"),
    (Call("step", Quotient(T, q(2))), r"\varepsilon\left(\frac{t}{2}\right)"),
]


@pytest.mark.parametrize(("expression", "latex"), DISPLAYED)
def test_a_formula_is_set_as_papers_do(expression: Expression, latex: str) -> None:
    assert formula(expression).latex == latex


def test_fractions_in_text_size_are_ordinary_ones() -> None:
    assert formula(prod("3/2", "x"), Style.TEXT).latex == r"\frac{3}{2}x"


def test_no_sign_follows_a_sign() -> None:
    assert formula(add("a", neg(neg(neg("b"))))).latex == "a - b"
    assert formula(prod("a", neg("b"))).latex == "a\\,(-b)"


def test_parts_are_opened_in_order() -> None:
    assert terms_of(add("a", add("b", neg("c")))) == (q("a"), q("b"), Negation(Name("c")))
    assert factors_of(prod(1, prod("a", 1), "b")) == (q("a"), q("b"))


def test_the_sign_of_a_term_is_found_wherever_it_stands() -> None:
    assert signed(number(Fraction(-1, 2))) == (True, Number(Fraction(1, 2)))
    assert signed(Quotient(neg("a"), q("b"))) == (True, Quotient(q("a"), q("b")))
    assert signed(neg(prod(neg("a"), "b"))) == (False, prod("a", "b"))


def test_longer_formulas_are_wider() -> None:
    long = Sum(tuple(prod(k + 2, f"x{k}") for k in range(9)))
    assert formula(long).width > 2 * formula(Sum(long.terms[:4])).width
