from __future__ import annotations

import pytest

from closedform.derivation.proof.finding import StatementRefutedError
from closedform.derivation.proof.rewriting import require_equal
from closedform.derivation.step import Matrix
from closedform.document import matrices
from closedform.document.matrices import matrix_box, matrix_height, with_front
from closedform.notation.expression import Call, Product, Quotient, number
from closedform.verification.record import UnprovedError
from tests.document.making import T, add, column, exp, matrix, neg, prod, q


def test_a_common_exponential_is_set_in_front() -> None:
    e = exp(-2)
    given = matrix((e, prod(T, e)), (0, neg(prod(3, e))))
    assert with_front(given) == Matrix(((q(1), T), (q(0), neg(3))), e)


def test_several_common_factors_are_set_in_front() -> None:
    e = exp(-2)
    given = matrix((prod("1/2", T, e), prod("1/2", "x", e)))
    assert with_front(given) == Matrix(((T, q("x")),), Product((q("1/2"), e)))


def test_common_denominators_are_set_in_front() -> None:
    given = matrix(("2/3", "1/3"), ("-1/3", 1))
    assert with_front(given) == Matrix(((q(2), q(1)), (q(-1), q(3))), q("1/3"))


def test_a_wrong_rest_is_refused(monkeypatch: pytest.MonkeyPatch) -> None:
    e = exp(-2)
    given = matrix((e, prod(T, e)), (0, neg(prod(3, e))))
    monkeypatch.setattr(matrices, "_without", lambda entry, _: entry)
    with pytest.raises(StatementRefutedError, match=r"entry \(1, 1\)"):
        with_front(given)


def test_a_wrong_common_denominator_is_refused(monkeypatch: pytest.MonkeyPatch) -> None:
    monkeypatch.setattr(matrices, "number", lambda value: number(value + 1))
    with pytest.raises(StatementRefutedError, match=r"entry \(1, 1\)"):
        with_front(matrix(("2/3", "1/3"), ("-1/3", 1)))


def test_matrices_are_equal_as_values_of_every_name() -> None:
    require_equal(Matrix(((add("a", "b"),),), q(2)), matrix((add(prod(2, "a"), prod(2, "b")),)))
    for other in (matrix(("a",)), matrix(("a", "b")), matrix((prod("a", "a"),))):
        with pytest.raises(StatementRefutedError):
            require_equal(other, matrix(("b",)))


def test_matrices_are_compared_as_finely_as_their_numbers_ask_for() -> None:
    large = number(10**900)
    same = Matrix(((add(large, "a", neg(large)),),))
    require_equal(same, matrix(("a",)))
    with pytest.raises(StatementRefutedError):
        require_equal(same, matrix((add("a", "1/1000000000"),)))


def test_a_matrix_that_no_precision_settles_is_left_open_and_not_refuted() -> None:
    large = Call("exp", Call("exp", number(11)))
    with pytest.raises(UnprovedError, match=r"entry \(1, 1\): not settled by 16384 bits"):
        require_equal(Matrix(((add("a", large, neg(large)),),)), matrix(("a",)))
    with pytest.raises(StatementRefutedError, match="it has no value"):
        require_equal(matrix((Quotient(q("a"), number(0)),)), matrix(("a",)))


def test_what_is_not_shared_stays() -> None:
    for given in (
        matrix((exp(-1), exp(-2))),
        matrix(("1/2", "1/3")),
        matrix((prod(2, "x"), prod(2, "y"))),
        matrix((add("a", "b"), prod("a", "c"))),
        matrix((0, 0)),
        column(exp(-1)),
        matrix(("omega", 0), (0, neg("omega"))),
    ):
        assert with_front(given) == given


def test_a_given_front_stays() -> None:
    given = Matrix(((exp(-1), exp(-1)),), q("c"))
    assert with_front(given) == given
    assert matrix_box(given).latex.startswith(r"c\begin{bmatrix}")


def test_a_sum_in_front_is_bracketed() -> None:
    given = Matrix(((q(1),),), add("a", "b"))
    assert matrix_box(given).latex.startswith(r"(a + b)\begin{bmatrix}")


def test_tight_columns_are_nearer() -> None:
    given = matrix(tuple(range(9)))
    assert matrix_box(given, tight=True).width < matrix_box(given).width - 3


def test_rows_with_fractions_are_higher() -> None:
    assert matrix_height(column("1/2", "1/3")) > matrix_height(column(1, 2))
    assert r"\\[3pt]" in matrix_box(column("1/2", "1/3")).latex
