from __future__ import annotations

import pytest

from closedform.derivation.step import Statement, Symbol
from closedform.document.display import displayed, displayed_together, fits
from closedform.notation.expression import Call, Quotient
from tests.document.making import (
    TRANSITION,
    A,
    P,
    T,
    V,
    X,
    add,
    column,
    exp,
    matrix,
    neg,
    prod,
    q,
    root,
    says,
)
from tests.document.wide_samples import wide_terms

SYSTEM = says("system", Symbol("derivative"), (A, X))


def test_a_short_chain_stands_on_one_line() -> None:
    shown = displayed(says("", q("a"), q("b"), q("c")))
    assert shown.latex == "\\begin{equation*}\n  a = b = c\n\\end{equation*}"
    assert (shown.form, shown.zeros) == ("whole", False)


def test_a_label_numbers_it() -> None:
    assert r"\begin{equation}\label{eq:s}" in displayed(SYSTEM, label="eq:s").latex


def test_a_long_sum_is_broken_at_its_signs() -> None:
    latex = displayed(says("", q("y"), wide_terms(1, 14)), label="eq:y").latex
    rows = latex.splitlines()[1:-1]
    assert len(rows) > 2
    assert all(row.lstrip().startswith((r"&\qquad {} + ", r"&\qquad {} - ")) for row in rows[1:])
    assert latex.count(r"\label") == 1
    assert rows[-1].endswith(r"\label{eq:y}")
    assert all(r" \notag" in row for row in rows[:-1])
    assert r"\left" not in latex


def test_a_long_product_is_broken_inside_its_bracket() -> None:
    latex = displayed(says("", q("y"), prod(exp(-9), wide_terms(1, 14)))).latex
    assert (latex.count(r"\Bigl("), latex.count(r"\Bigr)")) == (1, 1) or (
        latex.count(r"\bigl(") == latex.count(r"\bigr)") == 1
    )


def test_a_long_numerator_is_set_behind_its_denominator() -> None:
    latex = displayed(says("", q("y"), Quotient(wide_terms(1, 14), q(7)))).latex
    assert r"\frac{1}{7}" in latex


def test_a_subtracted_long_bracket_keeps_its_signs() -> None:
    latex = displayed(says("", q("y"), neg(wide_terms(1, 14)))).latex
    assert r"= -\Bigl(" in latex


def test_a_long_root_is_a_power() -> None:
    assert r"^{1/2}" in displayed(says("", q("y"), root(wide_terms(1, 14)))).latex


def test_a_number_too_long_for_a_line_is_cut() -> None:
    latex = displayed(says("", q("y"), q(10**200 + 7))).latex
    digits = "".join(c for c in latex if c.isdigit())
    assert digits == str(10**200 + 7)
    assert len(latex.splitlines()) > 4


def test_a_wide_left_side_has_a_line_of_its_own() -> None:
    latex = displayed(says("", wide_terms(1, 14), wide_terms(2, 14))).latex
    assert "& " in latex.splitlines()[1]
    assert any(line.lstrip().startswith(r"&\quad =") for line in latex.splitlines())


def test_a_matrix_that_fits_stays_whole() -> None:
    statement = says("exp A", TRANSITION, matrix((1, 2), (3, 4)))
    assert fits(statement)


def test_the_matrix_of_the_model_is_printed_as_given() -> None:
    given = matrix(("1/2", "1/2"))
    assert r"\frac{1}{2} & \frac{1}{2}" in displayed(says("matrix", A, given)).latex
    assert r"\frac{1}{2}\begin{bmatrix} 1 & 1" in displayed(says("P", P, given)).latex


def test_a_matrix_a_little_too_wide_is_set_tight() -> None:
    shown = displayed(says("matrix", A, matrix(*(tuple(range(10, 32)) for _ in range(3)))))
    assert shown.form == "whole"
    assert r"\arraycolsep" in shown.latex


def test_a_wide_matrix_of_short_columns_is_set_by_column() -> None:
    entry = add("alpha", prod(3, root(2)), "beta", "gamma")
    shown = displayed(says("P", P, matrix(*((entry,) * 6 for _ in range(6)))), label="eq:P")
    assert shown.form == "columns"
    name = r"\bigl(\boldsymbol{P}\bigr)"
    assert rf"{name}_{{\cdot 1\ldots 3}} &= " in shown.latex
    assert rf"{name}_{{\cdot 4\ldots 6}} &= " in shown.latex
    assert shown.latex.count(r"\label{eq:P}") == 1


def test_a_matrix_of_long_entries_is_set_by_entry() -> None:
    w = wide_terms(1, 9)
    shown = displayed(says("exp A", TRANSITION, (P, A), matrix((w, 0), (exp(-1), w))))
    assert (shown.form, shown.zeros) == ("entries", True)
    name = r"\bigl(\mathrm{e}^{\boldsymbol{A}t}\bigr)"
    assert rf"{name}_{{11}} &= {name}_{{22}}" in shown.latex
    assert rf"{name}_{{21}} &= \mathrm{{e}}^{{-t}}" in shown.latex
    assert f"{name}_{{12}}" not in shown.latex
    assert r"\mathrm{e}^{\boldsymbol{A}t} = \boldsymbol{P}\boldsymbol{A}" in shown.latex


def test_the_front_of_a_matrix_is_in_every_entry() -> None:
    w = wide_terms(1, 9)
    shown = displayed(says("exp A", TRANSITION, matrix((prod("c", w), prod("c", 2, T)))))
    assert shown.latex.count(r"= c\,\Bigl(") == shown.latex.count(r"= c \cdot 2t") == 1


def test_entries_can_be_demanded() -> None:
    shown = displayed(says("exp A", TRANSITION, matrix((1, 2), (3, 4))), by="entries")
    assert shown.form == "entries"


def test_a_mostly_empty_wide_matrix_is_set_by_entry() -> None:
    n = 40
    rows = [tuple("1000/7" if i == j else 0 for j in range(n)) for i in range(n)]
    assert displayed(says("matrix", A, matrix(*rows))).form == "entries"


def test_a_wide_vector_is_set_by_entry() -> None:
    shown = displayed(says("v", V, column(wide_terms(1, 9), 1)))
    assert r"\bigl(\boldsymbol{v}\bigr)_{2} &= 1" in shown.latex


def test_several_short_statements_share_a_display() -> None:
    shown = displayed_together([says("", q("a"), q(1)), says("", q("b"), q(2))], ["", "eq:b"])
    assert [str(one) for one in shown] == [
        "\\begin{align}\n  a &= 1 \\notag \\\\*\n  b &= 2\\label{eq:b}\n\\end{align}"
    ]


def test_statements_with_a_matrix_taken_apart_stand_alone() -> None:
    wide = says("v", V, column(wide_terms(1, 9), 1))
    assert len(displayed_together([wide, SYSTEM], ["", ""])) == 2


def test_an_unknown_relation_is_refused() -> None:
    with pytest.raises(ValueError, match="no relation"):
        displayed(Statement("", (q(1), q(2)), "=>"))


def test_a_wide_matrix_without_a_name_is_refused() -> None:
    with pytest.raises(ValueError, match="needs a name"):
        displayed(says("", matrix((wide_terms(1, 9),))))


def test_a_long_exponent_is_left_whole() -> None:
    latex = displayed(says("", q("y"), add(Call("exp", wide_terms(1, 4)), 1))).latex
    assert latex.count(r"\mathrm{e}^{\frac") + latex.count(r"\mathrm{e}^{79") == 1


def test_a_matrix_taller_than_the_page_is_set_by_entry() -> None:
    assert displayed(says("v", V, column(*range(50)))).form == "entries"
    assert fits(says("v", V, column(*range(30))))


def test_a_short_formula_is_kept_on_one_page_and_a_long_one_is_not() -> None:
    short = displayed(says("", q("y"), wide_terms(1, 14))).latex
    long = displayed(says("", q("y"), wide_terms(1, 80))).latex
    assert short.count(r"\\*") == short.count(r"\\") > 0
    assert r"\\*" not in long
