from __future__ import annotations

import pytest

from closedform.derivation.step import IMAGINARY_UNIT, Side, Symbol
from closedform.document.symbols import KINDS, side_box
from closedform.notation.expression import Name, Quotient
from tests.document.making import T, add, matrix, neg, prod, q, root

S = Symbol
OTHERWISE = S("interval", ("otherwise",))
RESIDUES = (
    r"\sum_{p(\lambda) = 0} "
    r"\frac{\boldsymbol{N}(\lambda)}{p'(\lambda)}\,\mathrm{e}^{\lambda s}"
)

SIDES: list[tuple[Side, str]] = [
    (S("matrix"), r"\boldsymbol{A}"),
    (S("matrix", ("0",), letter="R"), r"\boldsymbol{R}_{0}"),
    (S("vector", argument=T), r"\boldsymbol{x}(t)"),
    (S("vector", ("1",), letter="v"), r"\boldsymbol{v}_{1}"),
    (S("scalar", ("1", "2"), letter="lambda"), r"\lambda_{1,2}"),
    (S("scalar", argument=T, letter="v_left"), r"v_{\mathrm{left}}(t)"),
    (S("scalar", argument=T, letter="g", order=2), "g''(t)"),
    (S("scalar", argument=T, letter="g", order=5), "g^{(5)}(t)"),
    (S("identity"), r"\boldsymbol{I}"),
    (S("zero"), r"\boldsymbol{0}"),
    (S("inverse"), r"\boldsymbol{P}^{-1}"),
    (S("derivative"), r"\boldsymbol{x}'"),
    (S("derivative", argument=T), r"\boldsymbol{x}'(t)"),
    (S("transition"), r"\mathrm{e}^{\boldsymbol{A}t}"),
    (S("transition", argument=Name("tau")), r"\mathrm{e}^{\boldsymbol{A}\tau}"),
    (S("transition", argument=add("t", neg("s"))), r"\mathrm{e}^{\boldsymbol{A}(t - s)}"),
    (S("transition", argument=q(0)), r"\mathrm{e}^{\boldsymbol{A}(0)}"),
    (S("transition", argument=q(2)), r"\mathrm{e}^{2\boldsymbol{A}}"),
    (S("exponential", ("R",)), r"\mathrm{e}^{\boldsymbol{J}_{\mathrm{R}}t}"),
    (S("characteristic polynomial"), r"p(\lambda)"),
    (S("determinant"), r"\det(\lambda\boldsymbol{I} - \boldsymbol{A})"),
    (S("resolvent"), r"(s\boldsymbol{I} - \boldsymbol{A})^{-1}"),
    (S("shifted", argument=Name("lambda")), r"\boldsymbol{A} - \lambda\boldsymbol{I}"),
    (S("shifted", argument=q(-2)), r"\boldsymbol{A} + 2\boldsymbol{I}"),
    (S("shifted", argument=q(1)), r"\boldsymbol{A} - \boldsymbol{I}"),
    (S("shifted", argument=q(0)), r"\boldsymbol{A}"),
    (S("shifted", argument=q(0), order=2), r"\boldsymbol{A}^{2}"),
    (S("shifted", argument=q(3), order=2), r"(\boldsymbol{A} - 3\boldsymbol{I})^{2}"),
    (
        S("shifted", argument=add(1, root(2))),
        r"\boldsymbol{A} - (1 + \sqrt{2})\,\boldsymbol{I}",
    ),
    (S("entry", ("1", "2"), parts=(S("identity"),)), r"\bigl(\boldsymbol{I}\bigr)_{12}"),
    (S("entry", ("1", "12"), parts=(S("matrix"),)), r"\bigl(\boldsymbol{A}\bigr)_{1,12}"),
    (S("pair", parts=(q(-1), q(2))), r"-1 \pm 2\mathrm{i}"),
    (S("pair", parts=(q(0), q(1))), r"\pm \mathrm{i}"),
    (S("pair", parts=(q("a"), q("omega"))), r"a \pm \mathrm{i}\omega"),
    (S("pair", parts=(q(0), Quotient(root(3), q(2)))), r"\pm \mathrm{i}\frac{\sqrt{3}}{2}"),
    (S("real pair", parts=(q(-1), root(2))), r"-1 \pm \sqrt{2}"),
    (S("real pair", parts=(q(-1), add("a", "b"))), r"-1 \pm (a + b)"),
    (S("sum", parts=(S("matrix"), (q("c"), S("identity")))), r"\boldsymbol{A} + c\,\boldsymbol{I}"),
    (S("dotted"), r"\dot{\boldsymbol{x}}"),
    (S("dotted", argument=T, letter="q", order=2), r"\ddot{\boldsymbol{q}}(t)"),
    (S("dotted", letter="x_hat"), r"\dot{\widehat{\boldsymbol{x}}}"),
    (S("matrix", letter="A_hat"), r"\widehat{\boldsymbol{A}}"),
    (S("one-sided", ("-",), T, "x_1"), r"x_{1}(t^{-})"),
    (S("step", argument=add("t", neg("T"))), r"\varepsilon(t - T)"),
    (
        S("blocks", ("2",), parts=(S("matrix"), S("zero"), q(0), q(1))),
        r"\begin{bmatrix} \boldsymbol{A} & \boldsymbol{0} \\ 0 & 1 \end{bmatrix}",
    ),
    (S("interval", ("both",), T, parts=(q(0), q("T"))), r"0 \leq t < T"),
    (S("interval", ("from",), T, parts=(q("T"),)), r"t \geq T"),
    (S("interval", ("until",), T, parts=(q(4),)), "t < 4"),
    (S("interval", ("otherwise",)), r"\text{otherwise}"),
    (
        S("cases", parts=(q(1), S("interval", ("until",), T, parts=(q(4),)), T, OTHERWISE)),
        r"\begin{cases} 1, & t < 4 \\ t, & \text{otherwise} \end{cases}",
    ),
    (
        S("sinusoid", parts=(q("a"), prod("omega", T), S("scalar", letter="phi"))),
        r"a\,\cos(\omega t - \phi)",
    ),
    (S("sinusoid", parts=(q(1), T, S("scalar", letter="phi"))), r"\cos(t - \phi)"),
    (S("sinusoid", ("sin",), parts=(q(2), T, S("scalar", letter="phi"))), r"2\,\sin(t - \phi)"),
    (S("turn", ("1", "1")), r"\uppi"),
    (S("turn", ("-3", "4")), r"-\frac{3\uppi}{4}"),
    (S("turn", ("0", "1")), "0"),
    (S("arc", ("+",), parts=(q("r"),)), r"\arctan(r)"),
    (S("arc", ("-",), parts=(q("r"),)), r"-\arctan(r)"),
    (S("arc", ("-",), parts=(S("turn", ("1", "1")), q(2))), r"\uppi - \arctan(2)"),
    (S("angle of", parts=(q("y"), q("x"))), r"\operatorname{atan2}(y,\, x)"),
    (S("time derivative"), r"\frac{\mathrm{d}}{\mathrm{d}t}"),
    (S("characteristic polynomial", parts=(S("matrix"),)), r"p(\boldsymbol{A})"),
    (S("quotient", parts=(q(1), S("scalar", letter="p", order=1))), r"\frac{1}{p'}"),
    (S("shifted", argument=prod("omega", IMAGINARY_UNIT)),
     r"\boldsymbol{A} - \omega\mathrm{i}\,\boldsymbol{I}"),
    ((S("matrix"), S("vector")), r"\boldsymbol{A}\boldsymbol{x}"),
    (
        (S("matrix", letter="P"), S("exponential"), S("inverse")),
        r"\boldsymbol{P}\,\mathrm{e}^{\boldsymbol{J}t}\,\boldsymbol{P}^{-1}",
    ),
    (
        (S("shifted", argument=q(-2)), S("vector", letter="v")),
        r"(\boldsymbol{A} + 2\boldsymbol{I})\,\boldsymbol{v}",
    ),
    (S("adjugate", argument=q("s")), r"\operatorname{adj}(s\boldsymbol{I} - \boldsymbol{A})"),
    (S("residue sum", argument=q("s")), RESIDUES),
    (matrix((1, 2), (3, "x")), r"\begin{bmatrix} 1 & 2 \\ 3 & x \end{bmatrix}"),
    (prod(2, "x"), "2x"),
]  # fmt: skip


@pytest.mark.parametrize(("side", "latex"), SIDES)
def test_a_side_is_set_as_its_kind_demands(side: Side, latex: str) -> None:
    assert side_box(side).latex == latex


def test_every_kind_is_tested() -> None:
    assert {side.kind for side, _ in SIDES if isinstance(side, Symbol)} == set(KINDS)


def test_every_kind_is_in_the_table_of_the_documentation() -> None:
    from closedform.document import symbols

    table = (symbols.__doc__ or "").split("---\n", 1)[1]
    assert all(f"    {kind}  " in table for kind in KINDS)


def test_an_unknown_kind_is_refused() -> None:
    with pytest.raises(ValueError, match="no kind of symbol is called 'tensor'"):
        side_box(Symbol("tensor"))


def test_a_shifted_matrix_needs_its_eigenvalue() -> None:
    with pytest.raises(ValueError, match="eigenvalue"):
        side_box(Symbol("shifted"))


def test_what_is_no_side_is_refused() -> None:
    with pytest.raises(TypeError, match="is no side"):
        side_box("x")  # type: ignore[arg-type]


def test_a_matrix_shifted_by_zero_stands_without_brackets() -> None:
    shifted = S("shifted", argument=q(0))
    assert side_box((shifted, S("vector", letter="v"))).latex == (r"\boldsymbol{A}\,\boldsymbol{v}")


def test_an_unknown_interval_is_refused() -> None:
    with pytest.raises(ValueError, match="no kind of interval is called 'never'"):
        side_box(Symbol("interval", ("never",), T))
