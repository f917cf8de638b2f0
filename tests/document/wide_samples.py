"""Hand-made derivations with formulas wider than the line and matrices higher than the page."""

from __future__ import annotations

from fractions import Fraction

from closedform.derivation.step import IMAGINARY_UNIT, Derivation, Matrix, Step, Symbol
from closedform.notation.expression import Expression, Name, Power, Quotient, number
from tests.document.making import (
    CAUTIONS,
    LAM,
    P_INVERSE,
    TRANSITION,
    J,
    P,
    T,
    add,
    checks,
    column,
    cos,
    exp,
    matrix,
    model,
    neg,
    polynomial,
    prod,
    q,
    root,
    row,
    says,
    scalar,
    sin,
    vector,
)


def wide_terms(seed: int, count: int) -> Expression:
    """A long sum of modes with coefficients that differ from entry to entry."""
    terms: list[str | int | Expression] = []
    for k in range(count):
        coefficient = Fraction((seed * 7919 + 31 * k) % 9973 + 1, 1009 + 2 * k)
        mode = exp(-(k + 1)) if k % 2 else prod(exp(-(k + 1)), cos(root(k + 2)))
        term = prod(number(coefficient), mode)
        terms.append(neg(term) if (seed + k) % 3 == 0 else term)
    return add(*terms)


def six_wide() -> Derivation:
    """Six states; entries of e^(At) long enough to need the entry-by-entry list."""
    n = 6
    a = matrix(*(tuple((i * j) % 5 - 2 for j in range(1, n + 1)) for i in range(1, n + 1)))
    entries = [[wide_terms(6 * i + j + 1, 6) for j in range(n)] for i in range(n)]
    entries[0][5] = q(0)
    entries[5][0] = entries[2][3] = entries[1][1]
    p = matrix(
        *(tuple(add(i + 1, prod(j + 2, root(3 + i + j))) for j in range(n)) for i in range(n))
    )
    names = tuple(f"x{i}" for i in range(1, n + 1))
    return Derivation(
        "Six coupled compartments",
        (
            model("", names, a, column(*range(1, n + 1))),
            polynomial(add(*(prod(1234 + k, Power(LAM, q(n - k))) for k in range(n)), 77)),
            Step("eigenvalues", (), {"named": False, "rows": [row(wide_terms(1, 1), "-1")]}),
            Step("jordan_form", (says("P", P, p), says("J", J, a)), {"diagonal": False}),
            Step(
                "transition",
                (
                    says(
                        "exp A",
                        TRANSITION,
                        (P, Symbol("exponential"), P_INVERSE),
                        Matrix(tuple(map(tuple, entries))),
                    ),
                ),
                {"route": "form"},
            ),
            Step(
                "solution",
                (
                    says("solution", vector("x", t=T), column(*(entry[0] for entry in entries))),
                    *(
                        says(
                            "solution of state",
                            scalar(name, t=T),
                            prod(exp(-9), wide_terms(i, 12)),
                        )
                        for i, name in enumerate(names)
                    ),
                    says(
                        "solution of state",
                        scalar("x_sum", t=T),
                        Quotient(wide_terms(3, 9), q("1234567")),
                    ),
                ),
            ),
            Step(
                "values",
                (),
                {
                    "header": [T, *(scalar(name, t=T) for name in names), scalar("x_sum", t=T)],
                    "rows": [
                        [f"{k / 10}", *(f"-{k}.0123456789e-{k}" for _ in range(n + 1))]
                        for k in range(60)
                    ],
                    "digits": 11,
                },
            ),
            checks(),
            CAUTIONS,
        ),
    )


def ten_named(*, several: bool = True) -> Derivation:
    """Ten states whose eigenvalues are named roots; e^(At) through the resolvent."""
    n = 10
    names = tuple(f"x_{i}" for i in range(1, n + 1))
    band = matrix(
        *(tuple(-2 if i == j else 1 if abs(i - j) == 1 else 0 for j in range(n)) for i in range(n))
    )
    omegas = [f"omega_{k}" for k in range(1, n // 2 + 1)]
    g = add(*(Quotient(sin(w), prod(w, add(1, prod(3, Power(q(w), q(2)))))) for w in omegas))
    entries = tuple(
        tuple(
            add(*(prod(f"{(i + 2 * j + k) % 7 + 1}/{k + 3}", f"c_{k + 1}", cos(w))
                  for k, w in enumerate(omegas)))
            for j in range(n)
        )
        for i in range(n)
    )  # fmt: skip
    s = Name("s")
    p_of_s = Symbol("characteristic polynomial", argument=s)
    g_symbol = Symbol("scalar", argument=T, letter="g")
    return Derivation(
        "A chain of five equal masses",
        (
            model("", names, band, column(1, *([0] * (n - 1)))),
            polynomial(add(*(prod(k * k + 11, Power(LAM, q(n - k))) for k in range(0, n, 2)), 1)),
            Step(
                "eigenvalues",
                (),
                {
                    "field": "Q(sqrt(2), sqrt(3))",
                    "named": True,
                    "rows": [row(scalar("lambda", "1"), "1.2i")],
                },
            ),
            Step(
                "named_roots",
                (
                    says(
                        "polynomial",
                        Symbol("characteristic polynomial"),
                        add(*(prod(k * k + 11, Power(LAM, q(n - k))) for k in range(0, n, 2)), 1),
                    ),
                ),
                {
                    "rows": [
                        {
                            "name": Name(w),
                            "part": "imaginary",
                            "eigenvalue": Symbol(
                                "scalar", (f"{2 * i + 1},{2 * i + 2}",), letter="lambda"
                            ),
                            "real": False,
                            "interval": ("1.21", "1.22"),
                            "decimal": f"1.2{i}34567",
                        }
                        for i, w in enumerate(omegas)
                    ],
                    "degree": n,
                    "whole": True,
                },
            ),
            Step(
                "resolvent",
                (
                    says(
                        "expansion",
                        TRANSITION,
                        Symbol(
                            "sum",
                            parts=tuple(
                                (
                                    Symbol("matrix", (str(k),), letter="R"),
                                    Symbol("scalar", argument=T, letter="g", order=k),
                                )
                                for k in range(n)
                            ),
                        ),
                    ),
                    says("denominator", p_of_s, add(Power(s, q(n)), prod(3, s), 1)),
                    says("impulse response", g_symbol, g),
                    says(
                        "residue matrix", Symbol("matrix", ("9",), letter="R"), Symbol("identity")
                    ),
                    says("residue matrix", Symbol("matrix", ("8",), letter="R"), band),
                ),
                {"factors": 2 if several else 1, "repeated": several},
            ),
            Step(
                "transition",
                (says("exp A", TRANSITION, Matrix(entries)),),
                {"route": "resolvent"},
            ),
            Step(
                "solution",
                (
                    says("solution", vector("x", t=T), column(*(entry[0] for entry in entries))),
                    *(
                        says("solution of state", scalar(name, t=T), entries[i][0])
                        for i, name in enumerate(names)
                    ),
                ),
            ),
            Step(
                "abbreviations",
                (),
                {
                    "several": several,
                    "pairs": True,
                    "reals": True,
                    "rows": [
                        {
                            "numerator": None
                            if k == 3
                            else add(*(prod(f"{k}/7", Power(LAM, q(m))) for m in range(2, 9))),
                            "factor": "1",
                            "at": prod(w, IMAGINARY_UNIT),
                            "constants": [
                                (Name(f"c_{k}"), "0.1234567"),
                                None if k == 2 else (Name(f"d_{k}"), "-1.5e-9"),
                            ],
                        }
                        for k, w in enumerate(omegas, start=1)
                    ],
                },
            ),
            checks(),
            CAUTIONS,
        ),
    )


def many_states() -> Derivation:
    """Forty-two states: matrices taller than a page and wider than the line, mostly zero."""
    n = 42
    chain = matrix(
        *(tuple(-2 if i == j else "1/3" if i == j + 1 else 0 for j in range(n)) for i in range(n))
    )
    full = matrix(*(tuple((i * j) % 9 - 4 for j in range(24)) for i in range(24)))
    names = tuple(f"x_{i}" for i in range(1, n + 1))
    return Derivation(
        "A cascade",
        (
            model("", names, chain, column(*range(n))),
            Step(
                "jordan_form",
                (
                    says("P", P, full),
                    says("J", J, chain),
                    says(
                        "P inverse", P_INVERSE, matrix(*((f"{k}/7",) * 24 for k in range(90, 114)))
                    ),
                ),
                {"diagonal": False},
            ),
            Step(
                "solution",
                (
                    says(
                        "solution", vector("x", t=T), column(*(prod(k, exp(-k)) for k in range(n)))
                    ),
                ),
            ),
            Step(
                "outputs",
                (
                    says("output", scalar("y", t=T), add(*names, *names)),
                    says("output", scalar("z", t=T), q(-1)),
                ),
            ),
        ),
    )
