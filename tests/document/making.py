"""Short ways to write formulas, statements and steps by hand."""

from __future__ import annotations

from collections.abc import Sequence
from fractions import Fraction

from closedform.derivation.step import (
    Matrix,
    Side,
    Statement,
    Step,
    Symbol,
)
from closedform.notation.expression import (
    Call,
    Expression,
    Name,
    Negation,
    Product,
    Sum,
    number,
)

T, LAM = Name("t"), Name("lambda")
A, X, V = Symbol("matrix", letter="A"), Symbol("vector", letter="x"), Symbol("vector", letter="v")
P, J, P_INVERSE = Symbol("matrix", letter="P"), Symbol("matrix", letter="J"), Symbol("inverse")
TRANSITION = Symbol("transition")
CAUTIONS = Step("cautions")


def q(value: str | int | Expression) -> Expression:
    """A number from "3/2", a name from "x1"; a formula is left alone."""
    if isinstance(value, int):
        return number(value)
    if isinstance(value, str):
        return number(Fraction(value)) if value.lstrip("-")[0].isdigit() else Name(value)
    return value


def prod(*factors: str | int | Expression) -> Expression:
    return Product(tuple(map(q, factors)))


def add(*terms: str | int | Expression) -> Expression:
    return Sum(tuple(map(q, terms)))


def neg(term: str | int | Expression) -> Expression:
    return Negation(q(term))


def exp(*factors: str | int | Expression) -> Expression:
    if isinstance(factors[0], int) and factors[0] < 0:
        return Call("exp", neg(prod(-factors[0], *factors[1:], T)))
    return Call("exp", prod(*factors, T))


def root(value: str | int | Expression) -> Expression:
    return Call("sqrt", q(value))


def cos(*factors: str | int | Expression) -> Expression:
    return Call("cos", prod(*factors, T))


def sin(*factors: str | int | Expression) -> Expression:
    return Call("sin", prod(*factors, T))


def matrix(*rows: Sequence[str | int | Expression]) -> Matrix:
    return Matrix(tuple(tuple(map(q, row)) for row in rows))


def column(*entries: str | int | Expression) -> Matrix:
    return matrix(*((entry,) for entry in entries))


def vector(letter: str, *indices: str, t: Expression | None = None) -> Symbol:
    return Symbol("vector", indices, t, letter)


def scalar(letter: str, *indices: str, t: Expression | None = None) -> Symbol:
    return Symbol("scalar", indices, t, letter)


def says(what: str, *sides: Side) -> Statement:
    return Statement(what, sides)


def model(
    title: str,
    states: tuple[str, ...],
    a: Matrix,
    x0: Matrix,
    *,
    outputs: tuple[Statement, ...] = (),
    summary: str = "",
) -> Step:
    return Step(
        "model",
        (
            says("system", Symbol("derivative", letter="x"), (A, X)),
            says("matrix", A, a),
            says("initial", vector("x", t=number(0)), vector("x", "0"), x0),
            *outputs,
        ),
        {
            "title": title,
            "summary": summary,
            "states": states,
            "time": "t",
            "n": len(states),
            "outputs": [statement.says for statement in outputs],
        },
    )


def polynomial(*sides: Expression) -> Step:
    return Step(
        "characteristic_polynomial",
        (
            says(
                "characteristic polynomial",
                Symbol("characteristic polynomial"),
                Symbol("determinant"),
                *sides,
            ),
        ),
    )


def row(
    eigenvalue: Side,
    decimal: str,
    *,
    multiplicity: int = 1,
    blocks: tuple[int, ...] = (1,),
    meaning: str = "real",
) -> dict[str, object]:
    return {
        "eigenvalue": eigenvalue,
        "multiplicity": multiplicity,
        "index": max(blocks),
        "blocks": blocks,
        "meaning": meaning,
        "decimal": decimal,
    }


def vectors(
    eigenvalue: Expression,
    *statements: Statement,
    multiplicity: int = 1,
    index: int = 1,
    geometric: int = 1,
    numbers: tuple[int, ...] = (1,),
    kind: str = "real",
) -> Step:
    return Step(
        "eigenvectors",
        statements,
        {
            "eigenvalue": eigenvalue,
            "long": False,
            "multiplicity": multiplicity,
            "index": index,
            "geometric multiplicity": geometric,
            "numbers": numbers,
            "kind": kind,
            "conjugate": kind == "circular",
        },
        ("eigenvalues",),
    )


def checks(*items: str) -> Step:
    rows: list[dict[str, object]] = [
        {
            "item": says("", Symbol("derivative", argument=T), (A, vector("x", t=T))),
            "outcome": "proved",
            "how": "Every function in the solution was differentiated and the difference of both "
            "sides collected by independent functions of t: all coefficients vanish.",
        },
        {
            "item": says("", vector("x", t=number(0)), vector("x", "0")),
            "outcome": "proved",
            "how": "t = 0 was put into the solution; the difference is the zero vector.",
        },
    ]
    rows += [{"item": item, "outcome": "not attempted", "how": "There is none."} for item in items]
    return Step("verification", (), {"rows": rows})
